package coilside.terminal;

import java.util.ArrayList;
import java.util.List;

/**
 * Draws a {@link PlotModel} into an area: title, axes with round ticks, curves as joined dots,
 * points with error bars, marks, a residual panel below, and a cursor with its reading.
 */
final class Plot {
  private static final double DECADES_SHOWN = 4;
  private final Canvas canvas;
  private final DrawingStyle style;
  private final Glyphs glyphs;
  private PlotModel model;
  private PlotView view;
  private double logFloor;

  Plot(Canvas canvas, DrawingStyle style) {
    this.canvas = canvas;
    this.style = style;
    glyphs = canvas.glyphs();
  }

  void draw(PlotModel plotted, PlotView looked, Area area, boolean withResiduals, boolean chosen) {
    model = plotted;
    view = looked;
    if (area.width() < 20 || area.height() < 4) {
      canvas.put(area.x(), area.y(), model.title(), Ink.TITLE, area.right());
      return;
    }
    boolean residualPanel = withResiduals && !model.residuals().isEmpty() && area.height() >= 11;
    int residualRows = residualPanel ? Math.max(3, area.height() / 5) : 0;
    int left = 8;
    Area plot =
        new Area(
            area.x() + left, area.y() + 1, area.width() - left, area.height() - 3 - residualRows);
    Axis x = xAxis();
    logFloor = floor();
    Axis y = yAxis(model.series(), view.yScale, view.logarithmic(), x);
    titleRow(area, x, chosen);
    yTicks(area, plot, y, view.logarithmic());
    new PlotSeries(canvas, style, logFloor).draw(model.series(), plot, x, y, view.logarithmic());
    if (residualPanel) {
      Area below = new Area(plot.x(), plot.bottom(), plot.width(), residualRows);
      Axis r = yAxis(model.residuals(), view.residualScale, false, x);
      separator(area, below.y(), r.unitText());
      Area inner = new Area(below.x(), below.y() + 1, below.width(), below.height() - 1);
      yTicks(area, inner, r, false);
      new PlotSeries(canvas, style, logFloor).draw(model.residuals(), inner, x, r, false);
    }
    xTicks(area, plot, plot.bottom() + residualRows, x);
    inset(plot);
    view.drawnIn(plot);
    cursor(plot, plot.bottom() + residualRows, y, x);
  }

  /** Lines in the emptier upper corner, where the plot has room to spare. */
  private void inset(Area plot) {
    List<String> lines = model.inset();
    int width = lines.stream().mapToInt(String::length).max().orElse(0);
    if (lines.isEmpty() || plot.width() < 2 * width || plot.height() < lines.size() + 8) {
      return;
    }
    Area left = new Area(plot.x() + 1, plot.y() + 1, width, lines.size());
    Area right = new Area(plot.right() - width - 1, plot.y() + 1, width, lines.size());
    Area corner = drawn(left) < drawn(right) ? left : right;
    canvas.clear(corner);
    for (int i = 0; i < lines.size(); i++) {
      canvas.put(corner.x(), corner.y() + i, lines.get(i), Ink.PLAIN, corner.right());
    }
  }

  private int drawn(Area area) {
    int n = 0;
    for (int row = area.y(); row < area.bottom(); row++) {
      for (int column = area.x(); column < area.right(); column++) {
        n += canvas.at(column, row) == ' ' ? 0 : 1;
      }
    }
    return n;
  }

  private Axis xAxis() {
    double low = Double.POSITIVE_INFINITY;
    double high = Double.NEGATIVE_INFINITY;
    for (Series s : model.series()) {
      for (double v : s.x()) {
        if (Double.isFinite(v)) {
          low = Math.min(low, v);
          high = Math.max(high, v);
        }
      }
    }
    if (low > high) {
      low = 0;
      high = 1;
    }
    boolean dense = model.series().stream().noneMatch(s -> s.form() == Series.Form.POINTS);
    if (dense) {
      // A trace fills the width exactly; only point plots get round ends.
      double span = high - low;
      view.prefer((model.shownFrom() - low) / span, (model.shownTo() - low) / span);
      return new Axis(low + view.from() * span, low + view.to() * span, model.xUnit());
    }
    view.xScale.update(low, high);
    double span = view.xScale.high() - view.xScale.low();
    return new Axis(
        view.xScale.low() + view.from() * span,
        view.xScale.low() + view.to() * span,
        model.xUnit());
  }

  private double floor() {
    double top = 0;
    for (Series s : model.series()) {
      if (s.form() == Series.Form.LINE || s.form() == Series.Form.POINTS) {
        for (double v : s.y()) {
          if (Double.isFinite(v)) {
            top = Math.max(top, Math.abs(v));
          }
        }
      }
    }
    return top > 0 ? top * Math.pow(10, -DECADES_SHOWN) : 1e-12;
  }

  private Axis yAxis(List<Series> all, Autoscale scale, boolean log, Axis x) {
    double low = Double.POSITIVE_INFINITY;
    double high = Double.NEGATIVE_INFINITY;
    for (Series s : all) {
      if (s.form() == Series.Form.MARKS) {
        continue;
      }
      for (int k = 0; k < s.y().length; k++) {
        double v = s.y()[k];
        if (!Double.isFinite(v) || s.x()[k] < x.low() || s.x()[k] > x.high()) {
          continue;
        }
        if (log && s.form() == Series.Form.BAND) {
          // A band about zero has no lower edge on a logarithmic scale.
          double edge = PlotSeries.scaled(Math.abs(v) + s.uncertainty(k), true, logFloor);
          low = Math.min(low, edge);
          high = Math.max(high, edge);
          continue;
        }
        double u = log ? 0 : s.uncertainty(k);
        low = Math.min(low, PlotSeries.scaled(v, log, logFloor) - u);
        high = Math.max(high, PlotSeries.scaled(v, log, logFloor) + u);
      }
    }
    scale.update(low, high);
    if (Double.isNaN(scale.low())) {
      return new Axis(0, 1, model.yUnit());
    }
    return new Axis(scale.low(), scale.high(), model.yUnit());
  }

  private void titleRow(Area area, Axis x, boolean chosen) {
    String zoom =
        view.zoomed()
            ? "  zoomed " + glyphs.times() + Math.round(1 / (view.to() - view.from()))
            : "";
    String log = view.logarithmic() ? "  log" : "";
    int end =
        canvas.put(
            area.x(),
            area.y(),
            model.title() + log + zoom,
            chosen ? Ink.TITLE : Ink.PLAIN,
            area.right());
    StringBuilder legend = new StringBuilder();
    if (model.series().size() > 1) {
      for (Series s : model.series()) {
        if (!s.name().isEmpty()) {
          legend.append(legend.isEmpty() ? "" : "  ").append(mark(s)).append(' ').append(s.name());
        }
      }
    }
    if (end + 2 + legend.length() <= area.right()) {
      canvas.putRight(area.right(), area.y(), legend.toString(), Ink.FAINT, end + 2);
    }
  }

  private char mark(Series s) {
    return switch (s.form()) {
      case LINE -> glyphs.horizontal();
      case POINTS -> glyphs.point();
      case BAND -> glyphs.empty();
      case MARKS -> glyphs.next();
    };
  }

  private void separator(Area area, int row, String unit) {
    String name = unit.isEmpty() ? "residual " : "residual (" + unit + ") ";
    int end = canvas.put(area.x(), row, name, Ink.AXIS, area.right());
    for (int i = end; i < area.right(); i++) {
      canvas.put(i, row, glyphs.dotted(), Ink.AXIS);
    }
  }

  private void yTicks(Area area, Area plot, Axis y, boolean log) {
    for (int row = plot.y(); row < plot.bottom(); row++) {
      canvas.put(plot.x() - 1, row, glyphs.vertical(), Ink.AXIS);
    }
    int wanted = Math.max(1, Math.min(9, plot.height() / 2));
    while (!log && wanted < 2 * plot.height() && y.ticks(wanted).size() < 2) {
      wanted++;
    }
    int atMost = wanted;
    List<Double> ticks = log ? decades(y, atMost) : y.ticks(atMost);
    int last = Integer.MAX_VALUE;
    for (double t : ticks) {
      int row = plot.bottom() - 1 - (int) Math.round(y.fraction(t) * (plot.height() - 1));
      if (row < plot.y() || row >= plot.bottom() || Math.abs(row - last) < 1) {
        continue;
      }
      last = row;
      String label =
          log ? Numbers.si(Math.pow(10, t), model.yUnit(), 1).replace(" ", "") : y.label(t, atMost);
      canvas.put(plot.x() - 1, row, glyphs.sideTick(), Ink.AXIS);
      canvas.putRight(plot.x() - 1, row, label, Ink.AXIS, area.x());
    }
  }

  private static List<Double> decades(Axis y, int atMost) {
    List<Double> out = new ArrayList<>();
    int step = (int) Math.max(1, Math.ceil(y.span() / Math.max(1, atMost)));
    for (double d = Math.ceil(y.low()); d <= y.high(); d += step) {
      out.add(d);
    }
    return out;
  }

  private void xTicks(Area area, Area plot, int row, Axis x) {
    canvas.put(plot.x() - 1, row, glyphs.corner(), Ink.AXIS);
    for (int i = plot.x(); i < plot.right(); i++) {
      canvas.put(i, row, glyphs.horizontal(), Ink.AXIS);
    }
    String unit = x.unitText();
    String name = model.xName() + (unit.isEmpty() ? "" : " (" + unit + ")");
    int nameFrom = Math.max(plot.x() + plot.width() / 2, plot.right() - name.length());
    canvas.putRight(plot.right(), row + 1, name, Ink.AXIS, nameFrom);
    String yUnit =
        view.logarithmic() ? "" : new Axis(viewLow(), viewHigh(), model.yUnit()).unitText();
    canvas.put(area.x(), row, yUnit, Ink.AXIS, plot.x() - 1);
    int atMost = Math.max(2, plot.width() / 8);
    int free = area.x();
    for (double t : x.ticks(atMost)) {
      int column = plot.x() + (int) Math.round(x.fraction(t) * (plot.width() - 1));
      if (column < plot.x() || column >= plot.right()) {
        continue;
      }
      canvas.put(column, row, glyphs.tick(), Ink.AXIS);
      String label = x.label(t, atMost);
      int from = column - label.length() / 2;
      if (from >= free && from + label.length() < nameFrom) {
        canvas.put(from, row + 1, label, Ink.AXIS, area.right());
        free = from + label.length() + 1;
      }
    }
  }

  private double viewLow() {
    return Double.isNaN(view.yScale.low()) ? 0 : view.yScale.low();
  }

  private double viewHigh() {
    return Double.isNaN(view.yScale.high()) ? 1 : view.yScale.high();
  }

  private void cursor(Area plot, int bottom, Axis y, Axis x) {
    if (!view.cursorOn()) {
      return;
    }
    double value = x.value(view.cursor());
    int column = plot.x() + (int) Math.round(view.cursor() * (plot.width() - 1));
    for (int row = plot.y(); row < bottom; row++) {
      if (canvas.at(column, row) == ' ') {
        canvas.put(column, row, glyphs.vertical(), Ink.NEXT);
      } else {
        canvas.tint(column, row, 1, Ink.NEXT);
      }
    }
    String text = " " + reading(value) + " ";
    int from = Math.max(plot.x(), Math.min(column + 2, plot.right() - text.length()));
    canvas.put(from, plot.y(), text, Ink.CHOSEN, plot.right());
  }

  /** What stands under the cursor: abscissa, ppm where it makes sense, and each line's ordinate. */
  private String reading(double at) {
    StringBuilder out = new StringBuilder(Numbers.si(at, model.xUnit(), 4));
    if (model.ppmOfHertz() > 0) {
      out.append("  ").append(Numbers.si(at / model.ppmOfHertz() * 1e6, "ppm", 4));
    }
    for (Series s : model.series()) {
      if (s.form() == Series.Form.LINE || s.form() == Series.Form.POINTS) {
        int k = nearest(s.x(), at);
        if (k >= 0) {
          out.append("  ").append(s.name()).append(s.name().isEmpty() ? "" : " ");
          out.append(Numbers.si(s.y()[k], model.yUnit(), 3));
        }
      }
    }
    return out.toString();
  }

  private static int nearest(double[] x, double at) {
    int best = -1;
    for (int k = 0; k < x.length; k++) {
      if (best < 0 || Math.abs(x[k] - at) < Math.abs(x[best] - at)) {
        best = k;
      }
    }
    return best;
  }
}
