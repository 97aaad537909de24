package coilside.record;

/** Fields of a CSV file after RFC 4180. */
final class Csv {
  private Csv() {}

  /**
   * A text field on one line, quoted where it must be. Text that a spreadsheet would take for a
   * formula gets a leading apostrophe, since samples and notes are typed by anybody.
   */
  static String text(String text) {
    String line = Words.oneLine(text, 2000);
    if (!line.isEmpty() && "=+-@".indexOf(line.charAt(0)) >= 0) {
      line = "'" + line;
    }
    boolean quote = line.indexOf(',') >= 0 || line.indexOf('"') >= 0;
    return quote ? '"' + line.replace("\"", "\"\"") + '"' : line;
  }

  /** A number with all its digits; empty where there is none. */
  static String number(double x) {
    return Double.isNaN(x) ? "" : Double.toString(x);
  }
}
