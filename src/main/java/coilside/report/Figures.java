package coilside.report;

import coilside.bench.LogRow;
import coilside.bench.Picture;
import coilside.quantity.Measured;
import coilside.signal.Fid;
import coilside.signal.Spectrum;
import java.time.Duration;
import java.time.Instant;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;

/** Pictures of rungs and logs as figures with a caption. */
final class Figures {
  private static final int TALL = 300;
  private static final int FLAT = 170;
  private static final double AIR = 0.05;
  private static final double SECONDS_PER_HOUR = 3600;

  private Figures() {}

  static String of(Picture picture) {
    if (picture instanceof Picture.Curve curve) {
      return figure(curve(curve), curve.rung().title(), curve.caption());
    }
    if (picture instanceof Picture.Trace trace) {
      return figure(trace(trace), trace.rung().title(), trace.caption());
    }
    throw new IllegalStateException("a kind of picture without a drawing: " + picture);
  }

  private static String figure(String drawings, String title, String caption) {
    return "<figure>\n"
        + drawings
        + "<figcaption><b>"
        + Markup.text(title)
        + "</b> "
        + Markup.text(caption)
        + "</figcaption></figure>\n";
  }

  private static String curve(Picture.Curve c) {
    Axis x = Axis.around(c.xName(), c.xUnit(), AIR, c.x(), c.fitX());
    double[] low = shifted(c.y(), c.u(), -1);
    double[] high = shifted(c.y(), c.u(), 1);
    Axis y = Axis.around(c.yName(), c.yUnit(), AIR, low, high, c.fitY());
    return new Plot(TALL, x, y)
        .curve("fit", c.fitX(), c.fitY())
        .points("data", c.x(), c.y(), c.u())
        .svg(c.yName() + " against " + c.xName() + ": " + c.caption());
  }

  private static double[] shifted(double[] y, double[] u, int sign) {
    double[] out = y.clone();
    for (int k = 0; k < Math.min(y.length, u.length); k++) {
      out[k] += Double.isFinite(u[k]) ? sign * u[k] : 0;
    }
    return out;
  }

  private static String trace(Picture.Trace t) {
    Fid fid = t.fid();
    double[] times = new double[fid.points()];
    for (int k = 0; k < times.length; k++) {
      times[k] = fid.time(k);
    }
    Axis x = Axis.around("time after the pulse", "s", 0, times);
    Axis y = Axis.around("signal", "V", AIR, fid.re(), fid.im());
    Plot decay = new Plot(TALL, x, y).curve("imaginary", times, fid.im());
    StringBuilder out = new StringBuilder();
    if (t.fit().isPresent()) {
      Fid fit = t.fit().get();
      int from = Math.max(0, Math.min(t.usedFrom(), fid.points()));
      double[] used = java.util.Arrays.copyOfRange(times, from, times.length);
      double[] fitRe = part(fit.re(), from);
      decay.curve("fit", used, fitRe).curve("data", times, fid.re());
      out.append(decay.svg("FID, real and imaginary part, with fit: " + t.caption()));
      double[] residual = minus(part(fid.re(), from), fitRe);
      double[] residualIm = minus(part(fid.im(), from), part(fit.im(), from));
      Axis r = Axis.around("residual", "V", AIR, residual, residualIm);
      out.append(
          new Plot(FLAT, x, r)
              .curve("imaginary", used, residualIm)
              .curve("data", used, residual)
              .svg("what the fit leaves of the FID"));
    } else {
      decay.curve("data", times, fid.re());
      out.append(decay.svg("FID, real and imaginary part: " + t.caption()));
    }
    t.spectrum().ifPresent(s -> out.append(spectrum(s)));
    for (String mark : t.marks()) {
      out.append("<p class=\"note\">").append(Markup.text(mark)).append("</p>\n");
    }
    return out.toString();
  }

  private static double[] part(double[] values, int from) {
    return java.util.Arrays.copyOfRange(values, Math.min(from, values.length), values.length);
  }

  private static double[] minus(double[] a, double[] b) {
    double[] out = new double[Math.min(a.length, b.length)];
    for (int k = 0; k < out.length; k++) {
      out[k] = a[k] - b[k];
    }
    return out;
  }

  private static String spectrum(Spectrum s) {
    double[] offsets = new double[s.points()];
    double[] magnitude = new double[s.points()];
    for (int k = 0; k < offsets.length; k++) {
      offsets[k] = s.offsetHertz(k);
      magnitude[k] = s.magnitude(k);
    }
    Axis x = Axis.around("offset from the carrier", "Hz", 0, offsets);
    Axis y = Axis.around("magnitude", "V", AIR, magnitude, new double[] {0});
    return new Plot(FLAT, x, y).curve("data", offsets, magnitude).svg("magnitude spectrum");
  }

  /** One strip chart a value that the log holds; gaps stay gaps. */
  static String log(List<LogRow> rows) {
    Map<String, Measured> first = new LinkedHashMap<>();
    rows.forEach(row -> row.values().forEach(first::putIfAbsent));
    Instant start = rows.get(0).started();
    double[] hours = new double[rows.size()];
    for (int i = 0; i < hours.length; i++) {
      hours[i] = Duration.between(start, rows.get(i).started()).toMillis() / 1e3 / SECONDS_PER_HOUR;
    }
    Axis x = Axis.around("time since " + start + " / h", "", 0, hours);
    StringBuilder out = new StringBuilder();
    for (Map.Entry<String, Measured> entry : first.entrySet()) {
      out.append(strip(rows, entry.getKey(), entry.getValue().unit().symbol(), hours, x));
    }
    long gaps = rows.stream().filter(row -> row.values().isEmpty()).count();
    return figure(out.toString(), "Log", rows.size() + " rows, " + gaps + " of them gaps");
  }

  private static String strip(List<LogRow> rows, String name, String unit, double[] hours, Axis x) {
    double[] values = new double[rows.size()];
    List<double[]> bars = new ArrayList<>();
    for (int sign : new int[] {-1, 1}) {
      double[] edge = new double[rows.size()];
      for (int i = 0; i < edge.length; i++) {
        Measured m = rows.get(i).values().get(name);
        values[i] = m == null ? Double.NaN : m.value();
        edge[i] = m == null || !m.hasUncertainty() ? values[i] : m.value() + sign * m.u();
      }
      bars.add(edge);
    }
    String words = name.replace('_', ' ');
    double middle = middle(values);
    boolean difference = Math.abs(middle) > 1e3 * spread(values);
    double zero = difference ? middle : 0;
    Axis y =
        Axis.around(
            difference ? words + " - " + plain(middle) + " " + unit : words,
            difference || !unit.equals("1") ? unit : "",
            AIR,
            less(values, zero),
            less(bars.get(0), zero),
            less(bars.get(1), zero));
    return new Plot(FLAT, x, y)
        .curve("band", hours, less(bars.get(0), zero))
        .curve("band", hours, less(bars.get(1), zero))
        .curve("data", hours, less(values, zero))
        .svg(words + " through the log, with its standard uncertainty");
  }

  private static String plain(double x) {
    return new java.math.BigDecimal(Double.toString(x)).stripTrailingZeros().toPlainString();
  }

  private static double[] less(double[] values, double zero) {
    double[] out = new double[values.length];
    for (int i = 0; i < out.length; i++) {
      out[i] = values[i] - zero;
    }
    return out;
  }

  /** A round number near the values, so that small changes of a large one can be read. */
  private static double middle(double[] values) {
    double first = java.util.Arrays.stream(values).filter(Double::isFinite).findFirst().orElse(0);
    double spread = spread(values);
    double step = spread > 0 ? Math.pow(10, Math.ceil(Math.log10(spread))) : Math.abs(first);
    return step > 0 ? Math.rint(first / step) * step : first;
  }

  private static double spread(double[] values) {
    double min = java.util.Arrays.stream(values).filter(Double::isFinite).min().orElse(0);
    double max = java.util.Arrays.stream(values).filter(Double::isFinite).max().orElse(0);
    return max - min;
  }
}
