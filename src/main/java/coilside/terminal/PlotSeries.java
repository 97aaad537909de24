package coilside.terminal;

import java.util.List;

/** Draws the curves, points and marks of a plot into its area, all lines into one layer of dots. */
final class PlotSeries {
  private final Canvas canvas;
  private final Glyphs glyphs;
  private final DrawingStyle style;
  private final double logFloor;

  /**
   * @param logFloor smallest size that a logarithmic scale shows
   */
  PlotSeries(Canvas canvas, DrawingStyle style, double logFloor) {
    this.canvas = canvas;
    this.style = style;
    this.logFloor = logFloor;
    glyphs = canvas.glyphs();
  }

  /** The ordinate as it is drawn: itself, or the logarithm of its size. */
  static double scaled(double v, boolean log, double logFloor) {
    return log ? Math.log10(Math.max(Math.abs(v), logFloor)) : v;
  }

  void draw(List<Series> all, Area plot, Axis x, Axis y, boolean log) {
    Dots dots = new Dots(canvas, plot, style);
    for (Series s : all) {
      switch (s.form()) {
        case LINE -> line(dots, s, x, y, log);
        case BAND -> band(dots, s, x, y, log);
        case POINTS -> {
          errorBars(dots, s, x, y, log);
          if (crowded(s, plot)) {
            singleDots(dots, s, x, y, log);
          }
        }
        case MARKS -> {
          /* whole characters, below */
        }
      }
    }
    dots.paint();
    for (Series s : all) {
      if (s.form() == Series.Form.POINTS && !crowded(s, plot)) {
        points(plot, s, x, y, log);
      } else if (s.form() == Series.Form.MARKS) {
        marks(plot, s, x);
      }
    }
  }

  /** More points than whole characters could tell apart. */
  private static boolean crowded(Series s, Area plot) {
    return s.x().length > plot.width();
  }

  private void singleDots(Dots dots, Series s, Axis x, Axis y, boolean log) {
    for (int k = 0; k < s.x().length; k++) {
      double column = column(dots, x, s.x()[k]);
      double row = dotRow(dots, y, scaled(s.y()[k], log, logFloor));
      if (Double.isFinite(row)) {
        dots.dot((int) Math.round(column), (int) Math.round(row), s.ink());
      }
    }
  }

  private static double column(Dots dots, Axis x, double v) {
    return x.fraction(v) * (dots.width() - 1);
  }

  private static double dotRow(Dots dots, Axis y, double v) {
    return (1 - y.fraction(v)) * (dots.height() - 1);
  }

  /** Many samples in one column become one stroke from their least to their largest. */
  private void line(Dots dots, Series s, Axis x, Axis y, boolean log) {
    int current = Integer.MIN_VALUE;
    double lastX = Double.NaN;
    double lastY = Double.NaN;
    double low = 0;
    double high = 0;
    for (int k = 0; k < s.x().length; k++) {
      double cx = column(dots, x, s.x()[k]);
      if (!Double.isFinite(s.y()[k])) {
        lastX = Double.NaN;
        continue;
      }
      if (cx < -dots.width() || cx > 2.0 * dots.width()) {
        if (cx > dots.width() && lastX > dots.width()) {
          break;
        }
      }
      double cy = dotRow(dots, y, scaled(s.y()[k], log, logFloor));
      int column = (int) Math.round(Math.max(-1e6, Math.min(1e6, cx)));
      if (column == current) {
        low = Math.min(low, cy);
        high = Math.max(high, cy);
      } else {
        stroke(dots, current, low, high, s.ink());
        if (!Double.isNaN(lastX)) {
          dots.line(lastX, lastY, cx, cy, s.ink());
        }
        current = column;
        low = cy;
        high = cy;
      }
      lastX = cx;
      lastY = cy;
    }
    stroke(dots, current, low, high, s.ink());
  }

  private static void stroke(Dots dots, int column, double low, double high, Ink ink) {
    if (column >= 0 && column < dots.width()) {
      double l = Math.max(-1, Math.min(dots.height(), low));
      double h = Math.max(-1, Math.min(dots.height(), high));
      dots.vertical(column, (int) Math.round(l), (int) Math.round(h), ink);
    }
  }

  private void band(Dots dots, Series s, Axis x, Axis y, boolean log) {
    for (int k = 0; k + 1 < s.x().length; k++) {
      int from = (int) Math.max(0, Math.round(column(dots, x, s.x()[k])));
      int to = (int) Math.min(dots.width() - 1.0, Math.round(column(dots, x, s.x()[k + 1])));
      double u = s.uncertainty(k);
      double nextU = s.uncertainty(k + 1);
      double[] upper = {s.y()[k] + u, s.y()[k + 1] + nextU};
      double[] lower = {s.y()[k] - u, s.y()[k + 1] - nextU};
      for (int c = from; c <= to; c++) {
        if (c % 2 == 0) {
          double share = to > from ? (double) (c - from) / (to - from) : 0;
          edge(dots, c, y, upper[0] + share * (upper[1] - upper[0]), log, s.ink());
          edge(dots, c, y, lower[0] + share * (lower[1] - lower[0]), log, s.ink());
        }
      }
    }
  }

  private void edge(Dots dots, int column, Axis y, double value, boolean log, Ink ink) {
    if (!log || value > logFloor) {
      dots.dot(column, (int) Math.round(dotRow(dots, y, scaled(value, log, logFloor))), ink);
    }
  }

  private void errorBars(Dots dots, Series s, Axis x, Axis y, boolean log) {
    for (int k = 0; k < s.x().length; k++) {
      double u = s.uncertainty(k);
      int column = (int) Math.round(column(dots, x, s.x()[k]));
      if (u > 0 && !log && column >= 0 && column < dots.width()) {
        stroke(dots, column, dotRow(dots, y, s.y()[k] + u), dotRow(dots, y, s.y()[k] - u), s.ink());
      }
    }
  }

  private void points(Area plot, Series s, Axis x, Axis y, boolean log) {
    for (int k = 0; k < s.x().length; k++) {
      double fx = x.fraction(s.x()[k]);
      double fy = y.fraction(scaled(s.y()[k], log, logFloor));
      if (fx >= 0 && fx <= 1 && fy >= 0 && fy <= 1) {
        canvas.put(
            plot.x() + (int) Math.round(fx * (plot.width() - 1)),
            plot.bottom() - 1 - (int) Math.round(fy * (plot.height() - 1)),
            glyphs.point(),
            s.ink());
      }
    }
  }

  private void marks(Area plot, Series s, Axis x) {
    for (double v : s.x()) {
      double f = x.fraction(v);
      if (f >= 0 && f <= 1) {
        canvas.put(
            plot.x() + (int) Math.round(f * (plot.width() - 1)),
            plot.bottom() - 1,
            glyphs.next(),
            s.ink());
      }
    }
  }
}
