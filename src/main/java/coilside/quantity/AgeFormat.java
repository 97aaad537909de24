package coilside.quantity;

/** How long ago something was, in the largest unit that leaves a whole number above one. */
public final class AgeFormat {
  private AgeFormat() {}

  /** "12 s", "3 min", "2 h", "5 d"; a time that lies ahead (a clock set back) is "0 s". */
  public static String text(double seconds) {
    if (Double.isNaN(seconds)) {
      return "unknown";
    }
    double s = Math.max(0, seconds);
    if (s < 99.5) {
      return Math.round(s) + " s";
    }
    if (s < 99.5 * 60) {
      return Math.round(s / 60) + " min";
    }
    return s < 48 * 3600 ? Math.round(s / 3600) + " h" : Math.round(s / 86400) + " d";
  }
}
