package coilside.board.link;

import java.io.ByteArrayOutputStream;

/**
 * Bytes written so that a person can read them: printable ASCII as it is, line ends as {@code \n}
 * and {@code \r}, tabs as {@code \t}, a backslash doubled, all else as {@code \xNN}. A blank at
 * either end is written {@code \x20}, so that no editor loses it.
 */
final class WireText {
  private WireText() {}

  static String of(byte[] bytes, int offset, int length) {
    StringBuilder out = new StringBuilder(length + 16);
    for (int i = 0; i < length; i++) {
      int b = bytes[offset + i] & 0xff;
      boolean edge = i == 0 || i == length - 1;
      switch (b) {
        case '\n' -> out.append("\\n");
        case '\r' -> out.append("\\r");
        case '\t' -> out.append("\\t");
        case '\\' -> out.append("\\\\");
        default -> {
          if (b > 0x20 && b < 0x7f || b == 0x20 && !edge) {
            out.append((char) b);
          } else {
            out.append(String.format("\\x%02x", b));
          }
        }
      }
    }
    return out.toString();
  }

  /**
   * Reads what {@link #of} writes; an unchecked exception with the position where it cannot be
   * read.
   */
  static byte[] parse(String text) {
    ByteArrayOutputStream out = new ByteArrayOutputStream(text.length());
    for (int i = 0; i < text.length(); i++) {
      char c = text.charAt(i);
      if (c > 0x7e || c < 0x20) {
        throw new IllegalArgumentException(
            "character " + (i + 1) + " is no printable ASCII; write it as \\xNN");
      }
      if (c != '\\') {
        out.write(c);
        continue;
      }
      char kind = i + 1 < text.length() ? text.charAt(i + 1) : ' ';
      switch (kind) {
        case 'n' -> out.write('\n');
        case 'r' -> out.write('\r');
        case 't' -> out.write('\t');
        case '\\' -> out.write('\\');
        case 'x' -> {
          out.write(hex(text, i + 2));
          i += 2;
        }
        default ->
            throw new IllegalArgumentException(
                "'\\" + kind + "' at character " + (i + 1) + "; known are \\n \\r \\t \\\\ \\xNN");
      }
      i++;
    }
    return out.toByteArray();
  }

  private static int hex(String text, int at) {
    int high = at + 1 < text.length() ? Character.digit(text.charAt(at), 16) : -1;
    int low = at + 1 < text.length() ? Character.digit(text.charAt(at + 1), 16) : -1;
    if (high < 0 || low < 0) {
      throw new IllegalArgumentException(
          "'\\x' at character " + (at - 1) + " needs two hexadecimal digits");
    }
    return high << 4 | low;
  }
}
