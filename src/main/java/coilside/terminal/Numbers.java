package coilside.terminal;

import coilside.quantity.Measured;
import coilside.quantity.Unit;
import java.time.Duration;
import java.util.Locale;

/** How values, times and ages are written on the screen. */
final class Numbers {
  private static final String[] PREFIXES = {"p", "n", "µ", "m", "", "k", "M", "G"};

  private Numbers() {}

  private static boolean takesPrefix(String unit) {
    return switch (unit) {
      case "", "1", "dB", "ppm", "%", "°C", "degC", "sigma", "rad", "deg" -> false;
      default -> true;
    };
  }

  /** The power of ten of the SI prefix that keeps |value| in 1..1000; 0 where none is used. */
  static int exponent(double value, String unit) {
    double size = Math.abs(value);
    if (!takesPrefix(unit) || !(size > 0) || Double.isInfinite(size)) {
      return 0;
    }
    int e = (int) Math.floor(Math.log10(size * (1 + 1e-12)) / 3) * 3;
    return Math.max(-12, Math.min(9, e));
  }

  static String prefix(int exponent) {
    return PREFIXES[exponent / 3 + 4];
  }

  /** A value to so many significant digits with prefix and unit: "33.0 ms". */
  static String si(double value, String unit, int digits) {
    if (!Double.isFinite(value)) {
      return "-";
    }
    int e = exponent(value, unit);
    double scaled = value / Math.pow(10, e);
    int whole = scaled == 0 ? 1 : (int) Math.floor(Math.log10(Math.abs(scaled))) + 1;
    int decimals = Math.max(0, Math.min(9, digits - Math.max(1, whole)));
    if (Math.abs(scaled) < 1 && scaled != 0 && !takesPrefix(unit)) {
      decimals = Math.min(9, digits - whole);
    }
    return join(fixed(scaled, decimals), prefix(e), unit);
  }

  private static String join(String number, String prefix, String unit) {
    String u = prefix + (unit.equals("1") ? "" : unit);
    return u.isEmpty() ? number : number + " " + u;
  }

  private static String fixed(double value, int decimals) {
    String s = String.format(Locale.ROOT, "%." + decimals + "f", value);
    return s.startsWith("-") && s.matches("-0(\\.0*)?") ? s.substring(1) : s;
  }

  /**
   * The concise form, "8.123 456 7(12) MHz": the digits in brackets are the standard uncertainty in
   * units of the last digits shown.
   */
  static String concise(Measured m, boolean unicode) {
    String unit = unicode ? m.unit().pretty() : m.unit() == Unit.ONE ? "" : m.unit().symbol();
    return concise(m.value(), m.u(), unit);
  }

  static String concise(double value, double u, String unit) {
    if (!Double.isFinite(value)) {
      return "-";
    }
    if (!(u > 0) || Double.isInfinite(u)) {
      return si(value, unit, 4);
    }
    int e = exponent(Math.max(Math.abs(value), u), unit);
    double scale = Math.pow(10, e);
    double v = value / scale;
    double s = u / scale;
    int decimals = 1 - (int) Math.floor(Math.log10(s));
    if (Math.round(s * Math.pow(10, decimals)) >= 100) {
      decimals--;
    }
    decimals = Math.min(12, decimals);
    if (decimals <= 0) {
      return join(fixed(v, 0) + "(" + fixed(s, 0) + ")", prefix(e), unit);
    }
    // Brackets count units of the last digit, unless the uncertainty reaches above the point.
    String bracket = s >= 1 ? fixed(s, decimals) : fixed(s * Math.pow(10, decimals), 0);
    return join(grouped(fixed(v, decimals)) + "(" + bracket + ")", prefix(e), unit);
  }

  /** Digits behind the point in groups of three where there are more than four. */
  private static String grouped(String number) {
    int point = number.indexOf('.');
    if (point < 0 || number.length() - point - 1 <= 4) {
      return number;
    }
    StringBuilder out = new StringBuilder(number.substring(0, point + 1));
    String tail = number.substring(point + 1);
    for (int i = 0; i < tail.length(); i++) {
      if (i > 0 && i % 3 == 0) {
        out.append(' ');
      }
      out.append(tail.charAt(i));
    }
    return out.toString();
  }

  /** A named value of a finding, where its name asks for another form than its unit does. */
  static String named(String name, Measured m, boolean unicode) {
    return switch (name) {
      case "field_spread" -> concise(m.value() * 1e6, m.u() * 1e6, "ppm");
      case "b1_spread", "peak_fraction" -> concise(m.value() * 100, m.u() * 100, "%");
      default -> concise(m, unicode);
    };
  }

  /** A value name in words: "repetition_time" is "repetition time". */
  static String words(String name) {
    return switch (name) {
      case "pulse_90" -> "90-degree pulse";
      case "pulse_180" -> "180-degree pulse";
      case "t1" -> "T1";
      case "t2" -> "T2";
      case "t2_star" -> "T2*";
      case "b1" -> "B1";
      case "b1_spread" -> "B1 spread";
      case "snr" -> "SNR";
      case "dc_offset" -> "DC offset";
      case "larmor_frequency" -> "Larmor frequency";
      case "field" -> "field B0";
      case "ring_down_time" -> "ring-down time";
      default -> name.replace('_', ' ');
    };
  }

  static String age(Duration d) {
    long s = Math.max(0, d.toSeconds());
    if (s < 100) {
      return s + " s";
    }
    if (s < 6000) {
      return s / 60 + " min";
    }
    if (s < 48 * 3600) {
      return s / 3600 + " h";
    }
    return s / 86400 + " d";
  }

  /** Time left as "0:07", "12:30" or "3:05:00". */
  static String clock(double seconds) {
    long s = Math.max(0, Math.round(Math.min(seconds, 9e8)));
    return s < 3600
        ? String.format(Locale.ROOT, "%d:%02d", s / 60, s % 60)
        : String.format(Locale.ROOT, "%d:%02d:%02d", s / 3600, s / 60 % 60, s % 60);
  }
}
