package coilside.quantity;

import java.math.BigDecimal;
import java.math.MathContext;
import java.math.RoundingMode;

/**
 * A measured value in the concise form of JCGM 100, 7.2.2: "8.123 456 7(12) MHz" is 8.123 456 7 MHz
 * with a standard uncertainty of 0.000 001 2 MHz.
 *
 * <p>The uncertainty has two digits, the value as many decimals. Digits after the point stand in
 * groups of three. SI prefixes are chosen by the value's size; seconds and tesla take none above
 * one; a pure number below 1e-3 is given in ppm. A value without uncertainty has six significant
 * digits, no trailing zeros.
 */
public final class ConciseFormat {
  private static final String[] PREFIXES = {"f", "p", "n", "µ", "m", "", "k", "M", "G", "T"};
  private static final int UNITY = 5;
  private static final int MOST_DECIMALS = 15;

  private ConciseFormat() {}

  /** For people: µ, √Hz and ° as they are. */
  public static String text(Measured m) {
    return format(m, false);
  }

  /** The same in ASCII: u, Hz^0.5, degC. */
  public static String ascii(Measured m) {
    return format(m, true);
  }

  /** A bare number with its unit, six significant digits. */
  public static String text(double value, Unit unit) {
    return text(Measured.withoutUncertainty(value, unit, "not asked for"));
  }

  private static String format(Measured m, boolean ascii) {
    String symbol = ascii ? m.unit().symbol() : m.unit().pretty();
    if (m.unit() == Unit.ONE) {
      symbol = "";
    }
    if (!Double.isFinite(m.value())) {
      return "unknown" + (symbol.isEmpty() ? "" : " " + symbol);
    }
    boolean withU = m.hasUncertainty() && Double.isFinite(m.u()) && m.u() > 0;
    if (m.unit() == Unit.ONE && m.value() != 0 && Math.abs(m.value()) < 1e-3) {
      return (withU ? withUncertainty(m, -6) : bare(m.value(), -6)) + " ppm";
    }
    int prefix = prefix(m.unit(), Math.abs(m.value()), withU ? m.u() : 0);
    int shift = 3 * (prefix - UNITY);
    String number = withU ? withUncertainty(m, shift) : bare(m.value(), shift);
    if (m.hasUncertainty() && Double.isInfinite(m.u())) {
      number += "(unknown)";
    }
    String unit = PREFIXES[prefix] + symbol;
    if (ascii) {
      unit = unit.replace('µ', 'u');
    }
    return unit.isEmpty() ? number : number + " " + unit;
  }

  private static String withUncertainty(Measured m, int shift) {
    BigDecimal u = BigDecimal.valueOf(m.u()).movePointLeft(shift).round(new MathContext(2));
    int decimals = Math.min(MOST_DECIMALS, u.scale() - u.precision() + 2);
    u = u.setScale(decimals, RoundingMode.UP);
    BigDecimal value =
        BigDecimal.valueOf(m.value()).movePointLeft(shift).setScale(decimals, RoundingMode.HALF_UP);
    if (decimals <= 0) {
      return value.toBigInteger() + "(" + u.toBigInteger() + ")";
    }
    boolean acrossPoint = u.compareTo(BigDecimal.ONE) >= 0;
    String digits = acrossPoint ? u.toPlainString() : u.unscaledValue().toString();
    return grouped(value.toPlainString()) + "(" + digits + ")";
  }

  private static String bare(double value, int shift) {
    BigDecimal v =
        BigDecimal.valueOf(value)
            .movePointLeft(shift)
            .round(new MathContext(6, RoundingMode.HALF_UP));
    return v.signum() == 0 ? "0" : grouped(v.stripTrailingZeros().toPlainString());
  }

  /** The prefix that puts the value between 1 and 1000, and leaves no digit of u above 99. */
  private static int prefix(Unit unit, double size, double u) {
    boolean prefixed =
        switch (unit) {
          case HERTZ, SECOND, TESLA, VOLT, VOLT_PER_ROOT_HERTZ, HERTZ_PER_SECOND -> true;
          case ONE, DECIBEL, RADIAN, CELSIUS -> false;
        };
    int most = unit == Unit.SECOND || unit == Unit.TESLA ? UNITY : PREFIXES.length - 1;
    double largest = Math.max(size, u);
    if (!prefixed || !(largest > 0)) {
      return UNITY;
    }
    int prefix = UNITY + (int) Math.floor(Math.log10(largest * (1 + 1e-9)) / 3);
    if (u >= 99.5 * Math.pow(10, 3.0 * (prefix - UNITY))) {
      prefix++;
    }
    return Math.max(0, Math.min(most, prefix));
  }

  private static String grouped(String plain) {
    int point = plain.indexOf('.');
    if (point < 0 || plain.length() - point - 1 <= 4) {
      return plain;
    }
    StringBuilder out = new StringBuilder(plain.substring(0, point + 1));
    for (int i = point + 1; i < plain.length(); i++) {
      int done = i - point - 1;
      if (done > 0 && done % 3 == 0) {
        out.append(' ');
      }
      out.append(plain.charAt(i));
    }
    return out.toString();
  }
}
