package coilside.board.profile;

/**
 * Where the board listens on a network.
 *
 * @param host name or address
 * @param port 1..65535
 */
public record TcpAttachment(String host, int port) {}
