package coilside.report;

import java.util.Locale;

/** Text and numbers made safe for HTML and SVG. */
final class Markup {
  private Markup() {}

  /** Escaped for element text and attribute values; characters XML forbids become spaces. */
  static String text(String raw) {
    StringBuilder out = new StringBuilder();
    raw.codePoints()
        .forEach(
            c -> {
              switch (c) {
                case '&' -> out.append("&amp;");
                case '<' -> out.append("&lt;");
                case '>' -> out.append("&gt;");
                case '"' -> out.append("&quot;");
                case '\'' -> out.append("&#39;");
                default -> out.appendCodePoint(shown(c) ? c : ' ');
              }
            });
    return out.toString();
  }

  /** Controls, direction overrides and halves of characters are not shown. */
  private static boolean shown(int c) {
    int type = Character.getType(c);
    return !Character.isISOControl(c)
        && type != Character.FORMAT
        && type != Character.SURROGATE
        && c != 0xfffe
        && c != 0xffff;
  }

  /** A coordinate with at most two decimals. */
  static String number(double x) {
    String text = String.format(Locale.ROOT, "%.2f", x);
    return text.endsWith(".00") ? text.substring(0, text.length() - 3) : text;
  }
}
