package coilside.terminal;

/**
 * A range that follows the data without jitter: it grows at once when data leave it, and shrinks
 * only after the data have filled less than half of it for several updates in a row.
 */
final class Autoscale {
  private static final int PATIENCE = 12;
  private final double margin;
  private double low = Double.NaN;
  private double high = Double.NaN;
  private int tooWide;

  /**
   * @param margin room left beyond the data at each end, as a fraction of their span
   */
  Autoscale(double margin) {
    this.margin = margin;
  }

  double low() {
    return low;
  }

  double high() {
    return high;
  }

  void reset() {
    low = Double.NaN;
    high = Double.NaN;
    tooWide = 0;
  }

  void update(double dataLow, double dataHigh) {
    if (!Double.isFinite(dataLow) || !Double.isFinite(dataHigh)) {
      return;
    }
    double span = dataHigh - dataLow;
    if (!(span > 0)) {
      span = dataHigh == 0 ? 1 : Math.abs(dataHigh) * 0.1;
    }
    boolean outside = !(dataLow >= low - 1e-9 * span && dataHigh <= high + 1e-9 * span);
    tooWide = span < 0.5 * (high - low) ? tooWide + 1 : 0;
    if (outside || tooWide >= PATIENCE) {
      take(dataLow, dataHigh, span);
    }
  }

  private void take(double dataLow, double dataHigh, double span) {
    double step = new Axis(0, span, "").step(8);
    low = Math.floor((dataLow - margin * span) / step) * step;
    high = Math.ceil((dataHigh + margin * span) / step) * step;
    if (!(high > low)) {
      low -= span / 2;
      high += span / 2;
    }
    tooWide = 0;
  }
}
