package coilside.board.driver;

import java.nio.charset.StandardCharsets;

/** The end of what came in and was not understood, to be shown when the line goes dead. */
final class LastWords {
  private static final int MOST = 160;
  private static final int FEWEST = 4;

  private final byte[] bytes = new byte[MOST];
  private int length;

  void add(byte[] from, int n) {
    int taken = Math.min(n, MOST);
    int kept = Math.min(length, MOST - taken);
    System.arraycopy(bytes, length - kept, bytes, 0, kept);
    System.arraycopy(from, n - taken, bytes, kept, taken);
    length = kept + taken;
  }

  void forget() {
    length = 0;
  }

  /** The last line, where all of it is printable; "" otherwise. */
  String lastLine() {
    String[] lines =
        new String(bytes, 0, length, StandardCharsets.ISO_8859_1).strip().split("[\\r\\n\\x00]+");
    String last = lines[lines.length - 1].strip();
    boolean printable = last.chars().allMatch(c -> c >= 0x20 && c < 0x7f);
    return printable && last.length() >= FEWEST ? last : "";
  }
}
