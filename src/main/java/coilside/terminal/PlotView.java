package coilside.terminal;

/** How one plot is looked at: zoom, pan, cursor, logarithmic scale, and the scales in use. */
final class PlotView {
  final Autoscale xScale = new Autoscale(0);
  final Autoscale yScale = new Autoscale(0.02);
  final Autoscale residualScale = new Autoscale(0.02);
  private double from;
  private double to = 1;
  private boolean touched;
  private double cursor = Double.NaN;
  private boolean logarithmic;
  private Area drawn = new Area(0, 0, 0, 0);

  /**
   * @param logarithmic whether the scale starts out logarithmic
   */
  PlotView(boolean logarithmic) {
    this.logarithmic = logarithmic;
  }

  double from() {
    return from;
  }

  double to() {
    return to;
  }

  /**
   * Looks at the part worth looking at first, until the operator zooms; it only moves when what is
   * asked for differs by more than a quarter, so that the axis rests.
   */
  void prefer(double wantedFrom, double wantedTo) {
    if (touched || Double.isNaN(wantedFrom) || Double.isNaN(wantedTo)) {
      return;
    }
    double f = Math.max(0, wantedFrom);
    double t = Math.min(1, wantedTo);
    if (t - f > 1e-4 && Math.abs(f - from) + Math.abs(t - to) > 0.25 * (t - f)) {
      from = f;
      to = t;
    }
  }

  boolean zoomed() {
    return touched && (from > 0 || to < 1);
  }

  boolean logarithmic() {
    return logarithmic;
  }

  void toggleLogarithmic() {
    logarithmic = !logarithmic;
    yScale.reset();
  }

  boolean cursorOn() {
    return !Double.isNaN(cursor);
  }

  /** Place of the cursor within the visible part, 0..1. */
  double cursor() {
    return cursor;
  }

  void toggleCursor() {
    cursor = cursorOn() ? Double.NaN : 0.5;
  }

  /** Where it was drawn last. */
  void drawnIn(Area area) {
    drawn = area;
  }

  /** Places the cursor there; false when that is outside. */
  boolean placeCursor(int column, int row) {
    if (column < drawn.x() || column >= drawn.right() || row < drawn.y() || row >= drawn.bottom()) {
      return false;
    }
    cursor = (column - drawn.x()) / Math.max(1.0, drawn.width() - 1.0);
    return true;
  }

  void moveCursor(double by) {
    if (cursorOn()) {
      cursor = Math.max(0, Math.min(1, cursor + by));
    }
  }

  /** Zooms about the cursor, or the middle; a factor below 1 shows less. */
  void zoom(double factor) {
    touched = true;
    double centre = from + (cursorOn() ? cursor : 0.5) * (to - from);
    double width = Math.max(1e-4, Math.min(1, (to - from) * factor));
    double share = (centre - from) / (to - from);
    from = centre - share * width;
    to = from + width;
    keepInside();
  }

  void pan(double by) {
    touched = true;
    double shift = by * (to - from);
    from += shift;
    to += shift;
    keepInside();
  }

  /** All of it; once more, the part worth looking at first. */
  void showAll() {
    touched = !(touched && from == 0 && to == 1);
    from = 0;
    to = 1;
    rescale();
  }

  /** Finds its scales anew: what was shown before does not matter any more. */
  void rescale() {
    xScale.reset();
    yScale.reset();
    residualScale.reset();
  }

  private void keepInside() {
    double width = Math.min(1, to - from);
    from = Math.max(0, Math.min(1 - width, from));
    to = from + width;
  }
}
