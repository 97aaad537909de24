package coilside.quantity;

import java.util.Locale;

/** Ages in words short enough for a table: "12 s", "3 min", "2.5 h", "4 days". */
public final class AgeFormat {
  private AgeFormat() {}

  public static String text(double seconds) {
    double s = Math.max(0, seconds);
    if (s < 120) {
      return String.format(Locale.ROOT, "%.0f s", s);
    }
    if (s < 7200) {
      return String.format(Locale.ROOT, "%.0f min", s / 60);
    }
    if (s < 48 * 3600) {
      return String.format(Locale.ROOT, "%.1f h", s / 3600);
    }
    return String.format(Locale.ROOT, "%.0f days", s / 86400);
  }
}
