package coilside.terminal;

import coilside.quantity.AgeFormat;
import coilside.quantity.ConciseFormat;
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
    if (value == 0) {
      return join("0", "", unit);
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

  /** Up to six digits without trailing zeros: "7.9 MHz", "0.5". */
  static String trimmed(double value, String unit) {
    return si(value, unit, 6)
        .replaceFirst("(\\.\\d*?)0+( |$)", "$1$2")
        .replaceFirst("\\.( |$)", "$1");
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
    return unicode ? ConciseFormat.text(m) : ConciseFormat.ascii(m);
  }

  /** A named value of a finding, where its name asks for another form than its unit does. */
  static String named(String name, Measured m, boolean unicode) {
    return switch (name) {
      case "b1_spread", "peak_fraction" -> {
        Measured percent =
            m.hasUncertainty()
                ? Measured.of(m.value() * 100, m.u() * 100, Unit.ONE)
                : Measured.withoutUncertainty(m.value() * 100, Unit.ONE, m.whyNoUncertainty());
        yield concise(percent, unicode) + " %";
      }
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
    return AgeFormat.text(d.toMillis() / 1e3);
  }

  /** Time left as "0:07", "12:30" or "3:05:00". */
  static String clock(double seconds) {
    long s = Math.max(0, Math.round(Math.min(seconds, 9e8)));
    return s < 3600
        ? String.format(Locale.ROOT, "%d:%02d", s / 60, s % 60)
        : String.format(Locale.ROOT, "%d:%02d:%02d", s / 3600, s / 60 % 60, s % 60);
  }
}
