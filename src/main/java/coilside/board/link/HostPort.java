package coilside.board.link;

/**
 * A host and a port as people write them: "bench.lab:5025", "127.0.0.1:5025", "[::1]:5025".
 *
 * @param host name or address, without brackets
 * @param port 0..65535; 0 lets a listener choose a free one
 */
public record HostPort(String host, int port) {
  public HostPort {
    if (host.isBlank()) {
      throw new IllegalArgumentException("the host is empty; write HOST:PORT, 127.0.0.1:5025");
    }
    if (port < 0 || port > 65535) {
      throw new IllegalArgumentException("port " + port + " must be 0..65535");
    }
  }

  /** Reads "HOST:PORT"; an unchecked exception that says what is allowed otherwise. */
  public static HostPort parse(String text) {
    int colon = text.lastIndexOf(':');
    if (colon < 0) {
      throw new IllegalArgumentException(
          "'" + text + "' names no port; write HOST:PORT, for example 127.0.0.1:5025");
    }
    String host = text.substring(0, colon);
    if (host.startsWith("[") && host.endsWith("]")) {
      host = host.substring(1, host.length() - 1);
    } else if (host.indexOf(':') >= 0) {
      throw new IllegalArgumentException(
          "'" + text + "': write an IPv6 address in brackets, for example [::1]:5025");
    }
    try {
      return new HostPort(host, Integer.parseInt(text.substring(colon + 1)));
    } catch (NumberFormatException e) {
      throw new IllegalArgumentException(
          "'" + text.substring(colon + 1) + "' is no port number; write 1..65535, for example 5025",
          e);
    }
  }

  static String text(String host, int port) {
    return host.indexOf(':') >= 0 ? "[" + host + "]:" + port : host + ":" + port;
  }

  @Override
  public String toString() {
    return text(host, port);
  }
}
