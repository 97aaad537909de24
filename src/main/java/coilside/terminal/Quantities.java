package coilside.terminal;

import java.util.Locale;

/** Reads what an operator types: a number with an optional prefix and unit. */
final class Quantities {
  private Quantities() {}

  /**
   * Reads "8.1 MHz", "30s", "12.5 us", "1 %" into SI; a bare number counts in {@code bareScale}.
   *
   * @throws IllegalArgumentException with what is wrong and an example
   */
  static double read(String text, String unit, double bareScale, String example) {
    String t = text.trim().replace(" ", "");
    int end = 0;
    while (end < t.length() && "+-.0123456789eE".indexOf(t.charAt(end)) >= 0) {
      end++;
    }
    double number;
    try {
      number = Double.parseDouble(t.substring(0, end));
    } catch (NumberFormatException e) {
      throw new IllegalArgumentException(
          "'" + text + "' is not a number; write for example " + example, e);
    }
    String tail = t.substring(end);
    if (tail.isEmpty()) {
      return number * bareScale;
    }
    if (tail.equals("%")) {
      return number / 100;
    }
    if (unit.equals("s") && tail.equals("min")) {
      return number * 60;
    }
    if (unit.equals("s") && tail.equals("h")) {
      return number * 3600;
    }
    if (!unit.isEmpty() && tail.toLowerCase(Locale.ROOT).endsWith(unit.toLowerCase(Locale.ROOT))) {
      String prefix = tail.substring(0, tail.length() - unit.length());
      double factor =
          switch (prefix) {
            case "" -> 1;
            case "k", "K" -> 1e3;
            case "M" -> 1e6;
            case "G" -> 1e9;
            case "m" -> 1e-3;
            case "u", "µ", "μ" -> 1e-6;
            case "n" -> 1e-9;
            default -> Double.NaN;
          };
      if (!Double.isNaN(factor)) {
        return number * factor;
      }
    }
    throw new IllegalArgumentException(
        "'" + tail + "' is not a unit that fits here; write for example " + example);
  }
}
