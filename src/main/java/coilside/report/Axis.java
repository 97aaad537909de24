package coilside.report;

import java.util.ArrayList;
import java.util.List;
import java.util.Locale;

/**
 * One axis of a plot: a range, ticks at round numbers, and the SI prefix in which they are written.
 *
 * @param name what it shows
 * @param unit SI symbol; "1" or empty for none
 * @param min lower end
 * @param max upper end, above {@code min}
 */
record Axis(String name, String unit, double min, double max) {
  private static final String[] PREFIXES = {"p", "n", "µ", "m", "", "k", "M", "G"};
  private static final int NONE = 4;

  /** An axis that holds all finite values with some air around them. */
  static Axis around(String name, String unit, double air, double[]... values) {
    double min = Double.POSITIVE_INFINITY;
    double max = Double.NEGATIVE_INFINITY;
    for (double[] some : values) {
      for (double v : some) {
        if (Double.isFinite(v)) {
          min = Math.min(min, v);
          max = Math.max(max, v);
        }
      }
    }
    if (min > max) {
      return new Axis(name, unit, 0, 1);
    }
    double span = max - min;
    double least = Math.max(Math.abs(max), Math.abs(min)) * 1e-12;
    if (!(span > least)) {
      span = Math.max(Math.abs(max), 1e-12);
      return new Axis(name, unit, min - span / 2, max + span / 2);
    }
    return new Axis(name, unit, min - air * span, max + air * span);
  }

  double fraction(double x) {
    return (x - min) / (max - min);
  }

  private int prefix() {
    double size = Math.max(Math.abs(min), Math.abs(max));
    if (unit.isEmpty() || unit.equals("1") || unit.equals("dB") || unit.equals("sigma")) {
      return NONE;
    }
    int p = NONE + (int) Math.floor(Math.log10(size) / 3);
    return Math.max(0, Math.min(PREFIXES.length - 1, p));
  }

  /** Name and unit as written beside the axis. */
  String label() {
    String symbol = unit.equals("1") ? "" : PREFIXES[prefix()] + unit;
    return symbol.isEmpty() ? name : name + " / " + symbol;
  }

  /** Round numbers within the range, about {@code wanted} of them. */
  List<Double> ticks(int wanted) {
    double raw = (max - min) / wanted;
    double decade = Math.pow(10, Math.floor(Math.log10(raw)));
    double step = decade * 10;
    for (double candidate : new double[] {1, 2, 5}) {
      if (candidate * decade >= 0.75 * raw) {
        step = candidate * decade;
        break;
      }
    }
    List<Double> out = new ArrayList<>();
    for (long i = (long) Math.ceil(min / step - 1e-9); i * step <= max + 1e-9 * step; i++) {
      out.add(i * step);
    }
    return out;
  }

  /** A tick as text, with the decimals that tell neighbours apart. */
  String tickText(double tick, double step) {
    double scale = Math.pow(1000, NONE - prefix());
    int decimals = (int) Math.max(0, -Math.floor(Math.log10(step * scale) + 1e-9));
    String text = String.format(Locale.ROOT, "%." + Math.min(decimals, 12) + "f", tick * scale);
    return text.matches("-0(\\.0*)?") ? text.substring(1) : text;
  }
}
