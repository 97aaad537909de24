package coilside.terminal;

import java.util.Arrays;

/** A layer of dots over an area of a canvas; row 0 is at the top. Drawing outside is clipped. */
final class Dots {
  private final Canvas canvas;
  private final Area area;
  private final DrawingStyle style;
  private final int[] patterns;
  private final Ink[] inks;

  Dots(Canvas canvas, Area area, DrawingStyle style) {
    this.canvas = canvas;
    this.area = area;
    this.style = style;
    patterns = new int[area.width() * area.height()];
    inks = new Ink[patterns.length];
    Arrays.fill(inks, Ink.PLAIN);
  }

  int width() {
    return area.width() * style.across;
  }

  int height() {
    return area.height() * style.down;
  }

  void dot(int x, int y, Ink ink) {
    if (x < 0 || y < 0 || x >= width() || y >= height()) {
      return;
    }
    int cell = y / style.down * area.width() + x / style.across;
    patterns[cell] |= 1 << (y % style.down * style.across + x % style.across);
    inks[cell] = ink;
  }

  void vertical(int x, int y0, int y1, Ink ink) {
    int from = Math.max(0, Math.min(y0, y1));
    int to = Math.min(height() - 1, Math.max(y0, y1));
    for (int y = from; y <= to; y++) {
      dot(x, y, ink);
    }
  }

  /** A joined line: each column between the ends is filled from one crossing to the next. */
  void line(double x0, double y0, double x1, double y1, Ink ink) {
    if (!Double.isFinite(x0 + y0 + x1 + y1)) {
      return;
    }
    if (x1 < x0) {
      line(x1, y1, x0, y0, ink);
      return;
    }
    int from = (int) Math.max(0, Math.round(x0));
    int to = (int) Math.min(width() - 1.0, Math.round(x1));
    if (x1 - x0 < 1) {
      if (from <= to) {
        vertical(from, clamp(y0), clamp(y1), ink);
      }
      return;
    }
    double slope = (y1 - y0) / (x1 - x0);
    for (int x = from; x <= to; x++) {
      double a = y0 + slope * (Math.max(x0, x - 0.5) - x0);
      double b = y0 + slope * (Math.min(x1, x + 0.5) - x0);
      vertical(x, clamp(a), clamp(b), ink);
    }
  }

  /** Far outside stays outside, but within the reach of whole numbers. */
  private int clamp(double y) {
    return (int) Math.round(Math.max(-1, Math.min(height(), y)));
  }

  /** Puts the dots on the canvas; cells without dots are left as they are. */
  void paint() {
    for (int i = 0; i < patterns.length; i++) {
      if (patterns[i] != 0) {
        canvas.put(
            area.x() + i % area.width(),
            area.y() + i / area.width(),
            style.character(patterns[i]),
            inks[i]);
      }
    }
  }
}
