package coilside.quantity;

import java.math.BigDecimal;
import java.math.RoundingMode;
import java.util.Locale;

/**
 * Values in the concise form of JCGM 100 section 7.2.2, the uncertainty in units of the last
 * digits: "8.123 456 7(12) MHz". Two digits of uncertainty are kept; digits are grouped in threes
 * after the point.
 */
public final class ConciseFormat {
  private static final String[] PREFIXES = {"p", "n", "\u00b5", "m", "", "k", "M", "G"};
  private static final int NONE = 4;
  private static final int DIGITS_WITHOUT = 4;

  private ConciseFormat() {}

  /** For people, possibly with characters beyond ASCII. */
  public static String text(Measured m) {
    return format(m, true);
  }

  /** The same in ASCII. */
  public static String ascii(Measured m) {
    return format(m, false);
  }

  private static String format(Measured m, boolean pretty) {
    double value = m.value();
    String unit = pretty ? m.unit().pretty() : m.unit().symbol();
    if (m.unit() == Unit.ONE) {
      unit = "";
    }
    if (!Double.isFinite(value)) {
      return (value + " " + unit).strip();
    }
    int prefix = prefixable(m.unit()) ? prefix(value, m) : NONE;
    double scale = Math.pow(1000, NONE - prefix);
    if (m.unit() == Unit.ONE && value != 0 && Math.abs(value) < 1e-3) {
      return partsPerMillion(m);
    }
    String number = number(value * scale, m.hasUncertainty() ? m.u() * scale : Double.NaN);
    String p = PREFIXES[prefix];
    if (!pretty && p.equals("\u00b5")) {
      p = "u";
    }
    return (number + " " + p + unit).strip();
  }

  private static String partsPerMillion(Measured m) {
    return number(m.value() * 1e6, m.hasUncertainty() ? m.u() * 1e6 : Double.NaN) + " ppm";
  }

  private static boolean prefixable(Unit unit) {
    return switch (unit) {
      case HERTZ, SECOND, TESLA, VOLT, VOLT_PER_ROOT_HERTZ -> true;
      case ONE, DECIBEL, RADIAN, CELSIUS, HERTZ_PER_SECOND -> false;
    };
  }

  private static int prefix(double value, Measured m) {
    double size = Math.max(Math.abs(value), m.hasUncertainty() ? m.u() : 0);
    if (size == 0) {
      return NONE;
    }
    int p = NONE + (int) Math.floor(Math.log10(size * (1 + 1e-12)) / 3);
    return Math.max(0, Math.min(PREFIXES.length - 1, p));
  }

  /** The number with its uncertainty in brackets; NaN or 0 for none. */
  static String number(double value, double u) {
    if (!(u > 0) || Double.isInfinite(u)) {
      BigDecimal plain =
          new BigDecimal(value)
              .round(new java.math.MathContext(DIGITS_WITHOUT))
              .stripTrailingZeros();
      return group(plain.scale() < 0 ? plain.setScale(0) : plain);
    }
    int exponent = (int) Math.floor(Math.log10(u));
    int decimals = 1 - exponent;
    BigDecimal digits = new BigDecimal(u).setScale(decimals, RoundingMode.HALF_UP);
    if (digits.precision() > 2) {
      decimals--;
      digits = new BigDecimal(u).setScale(decimals, RoundingMode.HALF_UP);
    }
    BigDecimal rounded = new BigDecimal(value).setScale(decimals, RoundingMode.HALF_UP);
    if (decimals <= 0) {
      return group(rounded.setScale(0)) + "(" + digits.setScale(0).toPlainString() + ")";
    }
    if (digits.compareTo(BigDecimal.ONE) >= 0) {
      return group(rounded) + "(" + digits.toPlainString() + ")";
    }
    return group(rounded) + "(" + digits.unscaledValue() + ")";
  }

  private static String group(BigDecimal number) {
    String text = number.toPlainString();
    int point = text.indexOf('.');
    if (point < 0) {
      return text;
    }
    String decimals = text.substring(point + 1);
    if (decimals.length() <= 4) {
      return text;
    }
    StringBuilder out = new StringBuilder(text.substring(0, point + 1));
    for (int i = 0; i < decimals.length(); i++) {
      if (i > 0 && i % 3 == 0) {
        out.append(' ');
      }
      out.append(decimals.charAt(i));
    }
    return out.toString().toLowerCase(Locale.ROOT);
  }
}
