package coilside.record;

import java.time.Instant;
import java.time.ZoneOffset;
import java.time.format.DateTimeFormatter;
import java.time.format.DateTimeFormatterBuilder;
import java.util.Locale;

/** Text from outside made fit for file names, lines and tables; times as text. */
final class Words {
  private static final DateTimeFormatter NANOSECONDS =
      new DateTimeFormatterBuilder().appendInstant(9).toFormatter(Locale.ROOT);
  private static final DateTimeFormatter FILE_TIME =
      DateTimeFormatter.ofPattern("uuuu-MM-dd-HHmmss", Locale.ROOT).withZone(ZoneOffset.UTC);

  private Words() {}

  /** UTC with nine decimals: sorts as text, comes back exactly. */
  static String utc(Instant when) {
    return NANOSECONDS.format(when);
  }

  /** UTC to the second, as it stands in file names: 2026-12-01-130501. */
  static String fileTime(Instant when) {
    return FILE_TIME.format(when);
  }

  /**
   * One line: control and invisible formatting characters become spaces, at most max characters.
   */
  static String oneLine(String text, int max) {
    StringBuilder out = new StringBuilder();
    text.codePoints()
        .limit(max)
        .forEach(
            c -> {
              int type = Character.getType(c);
              boolean bad =
                  Character.isISOControl(c)
                      || type == Character.FORMAT
                      || type == Character.SURROGATE
                      || type == Character.LINE_SEPARATOR
                      || type == Character.PARAGRAPH_SEPARATOR;
              out.appendCodePoint(bad ? ' ' : c);
            });
    return out.toString();
  }

  /**
   * Part of a file name: lower case a-z, 0-9 and single hyphens, at most max characters; empty when
   * nothing of the text is left.
   */
  static String fileNamePart(String text, int max) {
    StringBuilder out = new StringBuilder();
    for (int i = 0; i < text.length() && out.length() < max; i++) {
      char c = Character.toLowerCase(text.charAt(i));
      if (c >= 'a' && c <= 'z' || c >= '0' && c <= '9') {
        out.append(c);
      } else if (out.length() > 0 && out.charAt(out.length() - 1) != '-') {
        out.append('-');
      }
    }
    while (out.length() > 0 && out.charAt(out.length() - 1) == '-') {
      out.setLength(out.length() - 1);
    }
    return out.toString();
  }

  /** ASCII only, for standards that know nothing else: other characters become '?'. */
  static String ascii(String text, int max) {
    StringBuilder out = new StringBuilder();
    oneLine(text, max)
        .codePoints()
        .forEach(
            c -> {
              if (c == 'µ' || c == 'μ') {
                out.append('u');
              } else if (c == '°') {
                out.append("deg");
              } else {
                out.append(c < 0x7f && c >= 0x20 ? (char) c : '?');
              }
            });
    return out.toString();
  }
}
