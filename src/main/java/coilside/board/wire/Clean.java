package coilside.board.wire;

/** Makes what a board said fit for a screen or a message. */
public final class Clean {
  private static final int LONGEST = 200;

  private Clean() {}

  /** Printable ASCII as it is, everything else as a dot, at most 200 characters. */
  public static String text(String raw) {
    StringBuilder out = new StringBuilder();
    for (int i = 0; i < raw.length() && i < LONGEST; i++) {
      char c = raw.charAt(i);
      out.append(c >= 0x20 && c < 0x7f ? c : '.');
    }
    return raw.length() > LONGEST ? out + "..." : out.toString();
  }
}
