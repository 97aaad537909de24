package coilside.command;

import coilside.quantity.Quantities;
import coilside.quantity.Unit;

/** Reads option values that carry units. */
final class Values {
  private Values() {}

  /** A value above zero, in the unit; the refusal names the option. */
  static double positive(String option, String text, Unit unit) {
    double value = any(option, text, unit);
    if (!(value > 0)) {
      throw new UsageException(option + " '" + text + "' must be above 0");
    }
    return value;
  }

  static double any(String option, String text, Unit unit) {
    try {
      return Quantities.parse(text, unit);
    } catch (IllegalArgumentException e) {
      throw new UsageException(option + ": " + e.getMessage());
    }
  }

  /** A fraction, as 0.5 or 50%. */
  static double fraction(String option, String text) {
    try {
      String t = text.strip();
      double value =
          t.endsWith("%")
              ? Double.parseDouble(t.substring(0, t.length() - 1)) / 100
              : Double.parseDouble(t);
      if (value >= 0 && value <= 1) {
        return value;
      }
    } catch (NumberFormatException e) {
      // Said below, together with what is out of range.
    }
    throw new UsageException(option + " '" + text + "' must be 0 to 1, or 0% to 100%");
  }
}
