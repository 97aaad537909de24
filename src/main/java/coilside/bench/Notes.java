package coilside.bench;

/** Reads the settings that an acquisition left in its capture. */
final class Notes {
  private Notes() {}

  /** A number, SI units; an exception that names it when it is missing or damaged. */
  static double number(Capture capture, String name) {
    String text = capture.settings().get(name);
    if (text == null) {
      throw new IllegalArgumentException("the capture holds no setting '" + name + "'");
    }
    try {
      return Double.parseDouble(text);
    } catch (NumberFormatException e) {
      throw new IllegalArgumentException(
          "the capture's setting '" + name + "' is '" + text + "', not a number", e);
    }
  }

  static double number(Capture capture, String name, double otherwise) {
    return capture.settings().containsKey(name) ? number(capture, name) : otherwise;
  }
}
