package coilside.command;

/**
 * What {@code --board} says: a profile, and where the board is.
 *
 * @param profile a file, or the name of a shipped profile
 * @param port a path, HOST:PORT, "simulated", or empty for what the profile says
 */
record BoardAddress(String profile, String port) {
  /** The simulated bench's profile where none is named. */
  static final String USUAL_PROFILE = "scpi-console";

  static final String SIMULATED = "simulated";

  /** Reads PROFILE[@PORT]; null stands for the simulated bench. */
  static BoardAddress parse(String text) {
    if (text == null) {
      return new BoardAddress(USUAL_PROFILE, SIMULATED);
    }
    int at = text.lastIndexOf('@');
    String profile = at < 0 ? text : text.substring(0, at);
    String port = at < 0 ? "" : text.substring(at + 1);
    if (profile.isBlank() || (at >= 0 && port.isBlank())) {
      throw new UsageException(
          "--board '"
              + text
              + "' is not PROFILE[@PORT]; for example --board scpi-console@/dev/ttyACM0,"
              + " my-board.toml@127.0.0.1:5025, or scpi-console@simulated");
    }
    return new BoardAddress(profile, port);
  }

  boolean simulated() {
    return port.equals(SIMULATED);
  }
}
