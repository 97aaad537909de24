package coilside.command;

import coilside.quantity.AgeFormat;

/** Ages for tables. */
final class Ages {
  private Ages() {}

  static String text(double seconds) {
    return AgeFormat.text(seconds);
  }
}
