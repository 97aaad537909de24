package coilside.report;

import java.util.List;

/**
 * A plot as inline SVG: frame, ticks, lines, points with uncertainty bars. Colours are CSS classes.
 */
final class Plot {
  private static final int WIDTH = 640;
  private static final int LEFT = 60;
  private static final int RIGHT = 14;
  private static final int TOP = 26;
  private static final int BOTTOM = 44;
  private static final int MOST_POINTS = 1200;
  private static final double DOT = 3;

  private final int height;
  private final Axis x;
  private final Axis y;
  private final StringBuilder body = new StringBuilder();

  Plot(int height, Axis x, Axis y) {
    this.height = height;
    this.x = x;
    this.y = y;
    frame();
  }

  private double px(double v) {
    return LEFT + x.fraction(v) * (WIDTH - LEFT - RIGHT);
  }

  private double py(double v) {
    return height - BOTTOM - y.fraction(v) * (height - TOP - BOTTOM);
  }

  private void frame() {
    List<Double> xs = x.ticks(6);
    double stepX = xs.size() > 1 ? xs.get(1) - xs.get(0) : x.max() - x.min();
    for (double tick : xs) {
      line("grid", px(tick), TOP, px(tick), height - BOTTOM);
      text("tick", px(tick), height - BOTTOM + 16, "middle", x.tickText(tick, stepX));
    }
    List<Double> ys = y.ticks(5);
    double stepY = ys.size() > 1 ? ys.get(1) - ys.get(0) : y.max() - y.min();
    for (double tick : ys) {
      line("grid", LEFT, py(tick), WIDTH - RIGHT, py(tick));
      text("tick", LEFT - 6, py(tick) + 4, "end", y.tickText(tick, stepY));
    }
    body.append("<rect class=\"frame\" x=\"").append(LEFT).append("\" y=\"").append(TOP);
    body.append("\" width=\"").append(WIDTH - LEFT - RIGHT).append("\" height=\"");
    body.append(height - TOP - BOTTOM).append("\"/>");
    text("label", (LEFT + WIDTH - RIGHT) / 2.0, height - 8, "middle", x.label());
    text("label", LEFT, TOP - 8, "start", y.label());
  }

  private void line(String css, double x1, double y1, double x2, double y2) {
    body.append("<line class=\"").append(css).append("\" x1=\"").append(Markup.number(x1));
    body.append("\" y1=\"").append(Markup.number(y1)).append("\" x2=\"");
    body.append(Markup.number(x2)).append("\" y2=\"").append(Markup.number(y2)).append("\"/>");
  }

  private void text(String css, double atX, double atY, String anchor, String words) {
    body.append("<text class=\"").append(css).append("\" x=\"").append(Markup.number(atX));
    body.append("\" y=\"").append(Markup.number(atY)).append("\" text-anchor=\"").append(anchor);
    body.append("\">").append(Markup.text(words)).append("</text>");
  }

  /** A line through the points, broken where one is no number; long ones keep their extremes. */
  Plot curve(String css, double[] xs, double[] ys) {
    int n = Math.min(xs.length, ys.length);
    int block = Math.max(1, (2 * n + MOST_POINTS - 1) / MOST_POINTS);
    StringBuilder path = new StringBuilder();
    boolean down = false;
    for (int from = 0; from < n; from += block) {
      int to = Math.min(n, from + block);
      int low = from;
      int high = from;
      for (int k = from; k < to; k++) {
        low = ys[k] < ys[low] ? k : low;
        high = ys[k] > ys[high] ? k : high;
      }
      int[] kept =
          low == high ? new int[] {low} : new int[] {Math.min(low, high), Math.max(low, high)};
      for (int k : kept) {
        boolean drawable = Double.isFinite(xs[k]) && Double.isFinite(ys[k]);
        if (drawable) {
          path.append(down ? 'L' : 'M').append(Markup.number(px(xs[k]))).append(' ');
          path.append(Markup.number(py(ys[k])));
        }
        down = drawable;
      }
    }
    if (path.length() > 0) {
      body.append("<path class=\"").append(css).append("\" d=\"").append(path).append("\"/>");
    }
    return this;
  }

  /** Dots with a bar of one standard uncertainty to either side where it is known. */
  Plot points(String css, double[] xs, double[] ys, double[] us) {
    for (int k = 0; k < Math.min(xs.length, ys.length); k++) {
      if (!Double.isFinite(xs[k]) || !Double.isFinite(ys[k])) {
        continue;
      }
      if (k < us.length && us[k] > 0 && Double.isFinite(us[k])) {
        line(css + " bar", px(xs[k]), py(ys[k] - us[k]), px(xs[k]), py(ys[k] + us[k]));
      }
      body.append("<circle class=\"").append(css).append("\" cx=\"");
      body.append(Markup.number(px(xs[k]))).append("\" cy=\"").append(Markup.number(py(ys[k])));
      body.append("\" r=\"").append(Markup.number(DOT)).append("\"/>");
    }
    return this;
  }

  /** The finished SVG element; the description is what a screen reader says. */
  String svg(String description) {
    return "<svg role=\"img\" aria-label=\""
        + Markup.text(description)
        + "\" viewBox=\"0 0 "
        + WIDTH
        + " "
        + height
        + "\">"
        + body
        + "</svg>\n";
  }
}
