package coilside.board;

/**
 * Who answered at the other end of the link.
 *
 * @param name what the board says it is, control characters removed
 * @param profileName the name in the profile file
 * @param profileDigest SHA-256 of the profile file, hex
 * @param port where it is attached, as text ("ttyACM0", "127.0.0.1:5025", "in this process")
 * @param simulated true for the simulated bench in this process (never true for what came over a
 *     real link: the measuring side cannot tell then)
 */
public record BoardIdentity(
    String name, String profileName, String profileDigest, String port, boolean simulated) {}
