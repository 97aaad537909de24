package coilside.terminal;

import coilside.bench.Picture;
import coilside.bench.Rung;
import coilside.signal.Fid;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;

/** Turns the bench's pictures into plots. */
final class PictureModels {
  private PictureModels() {}

  /** The plots of a picture, the most telling first. */
  static List<PlotModel> of(Picture picture, Part part, boolean ppm, String prefix) {
    if (picture instanceof Picture.Curve curve) {
      return List.of(curve(curve, prefix));
    }
    Picture.Trace trace = Phased.of((Picture.Trace) picture);
    List<PlotModel> out = new ArrayList<>();
    out.add(fid(trace, part, prefix));
    boolean phased = Phased.applies((Picture.Trace) picture);
    trace
        .spectrum()
        .ifPresent(s -> out.add(SpectrumModels.of(s, trace.rung(), part, phased, ppm, prefix)));
    return out;
  }

  /** The samples of one scan as they came, for where nothing better can be shown yet. */
  static PlotModel scan(Fid fid, Part part) {
    double[] time = new double[fid.points()];
    Arrays.setAll(time, fid::time);
    return new PlotModel(
        "scan",
        "last scan, " + part.words,
        "time",
        "s",
        "amplitude",
        "V",
        List.of(Series.line("", Ink.SIGNAL, time, part(fid.re(), fid.im(), part))),
        List.of(),
        0,
        Double.NaN,
        Double.NaN,
        "The picture of this rung comes with its first points.");
  }

  private static PlotModel curve(Picture.Curve c, String prefix) {
    List<Series> series = new ArrayList<>();
    List<Series> residuals = new ArrayList<>();
    boolean search = c.rung() == Rung.RESONANCE || c.rung() == Rung.GAIN;
    double[] x = c.x();
    double[] y = c.y();
    double[] u = c.u();
    if (search && x.length > 1) {
      Integer[] order = new Integer[x.length];
      Arrays.setAll(order, k -> k);
      Arrays.sort(order, (a, b) -> Double.compare(c.x()[a], c.x()[b]));
      double[] sx = new double[x.length];
      double[] sy = new double[x.length];
      for (int k = 0; k < x.length; k++) {
        sx[k] = x[order[k]];
        sy[k] = y[order[k]];
      }
      series.add(Series.line("", Ink.FAINT, sx, sy));
    }
    if (c.fitU().length > 1) {
      series.add(Series.band("fit +- u", c.fitX(), c.fitY(), c.fitU()));
    }
    if (c.fitX().length > 1) {
      series.add(
          Series.line(
              c.rung() == Rung.RESONANCE ? "threshold" : "fit", Ink.FIT, c.fitX(), c.fitY()));
    }
    series.add(
        Series.points(x.length == 1 ? "1 point" : x.length + " points", Ink.SIGNAL, x, y, u));
    if (c.nextX().length > 0) {
      series.add(Series.marks("next", c.nextX()));
    }
    if (!search && c.fitX().length > 1 && x.length > 0) {
      double[] r = new double[x.length];
      for (int k = 0; k < x.length; k++) {
        r[k] = y[k] - interpolate(c.fitX(), c.fitY(), x[k]);
      }
      double[] ends = {c.fitX()[0], c.fitX()[c.fitX().length - 1]};
      residuals.add(Series.line("", Ink.FAINT, ends, new double[2]));
      residuals.add(Series.points("", Ink.SECOND, x, r, u));
    }
    return new PlotModel(
        prefix + c.rung().id() + ".curve",
        c.rung().id() + ": " + c.yName(),
        c.xName(),
        c.xUnit(),
        c.yName(),
        c.yUnit(),
        series,
        residuals,
        0,
        Double.NaN,
        Double.NaN,
        c.caption());
  }

  static double interpolate(double[] x, double[] y, double at) {
    for (int k = 0; k + 1 < x.length; k++) {
      if (at >= x[k] && at <= x[k + 1] && x[k + 1] > x[k]) {
        return y[k] + (y[k + 1] - y[k]) * (at - x[k]) / (x[k + 1] - x[k]);
      }
    }
    return Double.NaN;
  }

  static double[] part(double[] re, double[] im, Part part) {
    return switch (part) {
      case REAL, BOTH -> re;
      case IMAGINARY -> im;
      case MAGNITUDE -> {
        double[] m = new double[re.length];
        Arrays.setAll(m, k -> Math.hypot(re[k], im[k]));
        yield m;
      }
    };
  }

  private static PlotModel fid(Picture.Trace t, Part part, String prefix) {
    Fid fid = t.fid();
    double[] time = new double[fid.points()];
    Arrays.setAll(time, fid::time);
    double[] y = part(fid.re(), fid.im(), part);
    List<Series> series = new ArrayList<>();
    List<Series> residuals = new ArrayList<>();
    series.add(Series.line(part == Part.BOTH ? "real" : part.words, Ink.SIGNAL, time, y));
    if (part == Part.BOTH) {
      series.add(Series.line("imaginary", Ink.SECOND, time, fid.im()));
    }
    t.fit()
        .ifPresent(
            fit -> {
              int n = Math.min(fit.points(), fid.points());
              double[] fy = part(fit.re(), fit.im(), part);
              int from = Math.max(0, Math.min(n - 1, t.usedFrom()));
              double[] ft = Arrays.copyOfRange(time, from, n);
              series.add(Series.line("fit", Ink.FIT, ft, Arrays.copyOfRange(fy, from, n)));
              double[] r = new double[n - from];
              Arrays.setAll(r, k -> y[from + k] - fy[from + k]);
              double[] u = new double[2];
              Arrays.fill(u, rms(r));
              residuals.add(
                  Series.band("", new double[] {ft[0], ft[ft.length - 1]}, new double[2], u));
              residuals.add(Series.line("", Ink.SECOND, ft, r));
            });
    return new PlotModel(
        prefix + t.rung().id() + ".fid",
        "FID, " + part.words + (Phased.applies(t) ? ", phased" : ""),
        "time",
        "s",
        "amplitude",
        "V",
        series,
        residuals,
        0,
        Double.NaN,
        Double.NaN,
        t.caption());
  }

  private static double rms(double[] v) {
    double sum = 0;
    for (double x : v) {
      sum += x * x;
    }
    return Math.sqrt(sum / Math.max(1, v.length));
  }
}
