package coilside.terminal;

import java.util.ArrayList;
import java.util.List;
import java.util.Locale;

/**
 * One axis: a range, its ticks at round numbers, and labels with one SI prefix for the whole axis.
 *
 * @param low value at the start
 * @param high value at the end, above {@code low}
 * @param unit unit of both
 */
record Axis(double low, double high, String unit) {
  Axis {
    if (!(high > low) || Double.isInfinite(high - low)) {
      double centre = Double.isFinite(low) ? low : 0;
      double half = Math.max(Math.abs(centre) * 1e-9, 1e-12);
      low = centre - half;
      high = centre + half;
    }
  }

  double span() {
    return high - low;
  }

  /** 0 at low, 1 at high. */
  double fraction(double value) {
    return (value - low) / span();
  }

  double value(double fraction) {
    return low + fraction * span();
  }

  /** A step of 1, 2 or 5 times a power of ten that gives at most so many ticks. */
  double step(int atMost) {
    double raw = span() / Math.max(1, atMost);
    double ten = Math.pow(10, Math.floor(Math.log10(raw)));
    for (double m : new double[] {1, 2, 5, 10}) {
      if (m * ten >= raw * (1 - 1e-9)) {
        return m * ten;
      }
    }
    return 10 * ten;
  }

  List<Double> ticks(int atMost) {
    double step = step(atMost);
    List<Double> out = new ArrayList<>();
    double first = Math.ceil(low / step - 1e-9);
    for (int i = 0; i <= atMost + 1; i++) {
      double t = (first + i) * step;
      if (t > high + step * 1e-9) {
        break;
      }
      out.add(t == 0 ? 0.0 : t);
    }
    return out;
  }

  int exponent() {
    return Numbers.exponent(Math.max(Math.abs(low), Math.abs(high)), unit);
  }

  /** A tick's label in the axis's prefixed unit, with as many decimals as the step asks for. */
  String label(double tick, int atMost) {
    int e = exponent();
    double scale = Math.pow(10, e);
    int decimals =
        (int) Math.max(0, Math.min(9, -Math.floor(Math.log10(step(atMost) / scale) + 1e-9)));
    return String.format(Locale.ROOT, "%." + decimals + "f", tick / scale);
  }

  /** "ms", "kHz": prefix and unit of the labels. */
  String unitText() {
    return Numbers.prefix(exponent()) + (unit.equals("1") ? "" : unit);
  }
}
