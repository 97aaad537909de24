package coilside.signal;

import coilside.quantity.Measured;
import coilside.quantity.Unit;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;

/**
 * The lines of a phased spectrum: maxima of its real part above a threshold, with position, width
 * and area.
 *
 * <p>Widths and areas read off a line are a cross-check: the record's length and the window are
 * part of them. T2* comes from the time-domain fit.
 */
public final class Peaks {
  private Peaks() {}

  /**
   * One line.
   *
   * @param offsetHertz from the carrier, Hz
   * @param offsetPpm the same over the carrier, 1e-6; NaN without a carrier
   * @param height of the real part, V
   * @param widthHertz full width at half height, Hz
   * @param area as the initial amplitude that it stands for, V: twice the mean of the real part
   *     over the whole spectrum, counting this line's points only
   */
  public record Peak(
      Measured offsetHertz,
      double offsetPpm,
      Measured height,
      Measured widthHertz,
      Measured area) {}

  private static final double MOST_RISE = 1.125;

  /** Noise of the real part of one point, V: from the median distance to the median. */
  public static double noise(Spectrum s) {
    double[] re = s.re().clone();
    Arrays.sort(re);
    double median = re[re.length / 2];
    for (int k = 0; k < re.length; k++) {
      re[k] = Math.abs(re[k] - median);
    }
    Arrays.sort(re);
    return 1.4826 * re[re.length / 2];
  }

  /**
   * Finds lines, by rising offset.
   *
   * @param noise standard deviation of one point's real part, V; see {@link #noise}
   * @param thresholdSigma least height over that noise
   */
  public static List<Peak> find(Spectrum s, double noise, double thresholdSigma) {
    double[] y = s.re();
    int n = y.length;
    double limit = noise * thresholdSigma;
    List<Peak> peaks = new ArrayList<>();
    int from = 0;
    while (from < n) {
      if (y[from] < limit) {
        from++;
        continue;
      }
      int to = from;
      int top = from;
      while (to < n && y[to] >= limit / 2) {
        if (y[to] > y[top]) {
          top = to;
        }
        to++;
      }
      split(s, noise, limit, from, to, top, peaks);
      from = to;
    }
    peaks.sort((a, b) -> Double.compare(a.offsetHertz().value(), b.offsetHertz().value()));
    return peaks;
  }

  /** A group of points above the limit may hold several maxima with valleys between them. */
  private static void split(
      Spectrum s, double noise, double limit, int from, int to, int top, List<Peak> peaks) {
    double[] y = s.re();
    double valley = y[top];
    int cut = -1;
    int direction = 0;
    for (int side = -1; side <= 1 && cut < 0; side += 2) {
      double low = y[top];
      int at = top;
      for (int k = top + side; k >= from && k < to; k += side) {
        if (y[k] < low) {
          low = y[k];
          at = k;
        } else if (y[k] > low + Math.max(limit, 0.02 * y[top]) && y[k] > 1.1 * low) {
          cut = at;
          valley = low;
          direction = side;
          break;
        }
      }
    }
    if (cut < 0 || valley >= y[top]) {
      peaks.add(measure(s, noise, top, from, to));
      return;
    }
    int leftFrom = from;
    int leftTo = direction < 0 ? cut : cut + 1;
    int rightFrom = direction < 0 ? cut : cut + 1;
    for (int[] part : new int[][] {{leftFrom, leftTo}, {rightFrom, to}}) {
      int best = part[0];
      for (int k = part[0]; k < part[1]; k++) {
        if (y[k] > y[best]) {
          best = k;
        }
      }
      if (part[1] > part[0] && y[best] > limit) {
        split(s, noise, limit, part[0], part[1], best, peaks);
      }
    }
  }

  private static Peak measure(Spectrum s, double noise, int top, int from, int to) {
    double[] y = s.re();
    int n = y.length;
    double step = s.stepHertz();
    double shift = 0;
    double height = y[top];
    if (top > 0 && top < n - 1) {
      double a = y[top - 1];
      double c = y[top + 1];
      double curve = a - 2 * y[top] + c;
      if (curve < 0) {
        shift = Math.max(-0.5, Math.min(0.5, 0.5 * (a - c) / curve));
        // A parabola through neighbours of a true peak rises by an eighth at most; more means a
        // dispersive line, whose deep neighbour would lift it without end.
        height = Math.min(y[top] - 0.25 * (a - c) * shift, MOST_RISE * y[top]);
      }
    }
    double left = crossing(y, top, -1, height / 2);
    double right = crossing(y, top, 1, height / 2);
    double width = (right - left) * step;
    double sum = 0;
    int reach = (int) Math.ceil(8 * (right - left));
    int low = Math.max(0, Math.min(from, top - reach));
    int high = Math.min(n, Math.max(to, top + reach + 1));
    if (valleyBefore(y, top, from)) {
      low = from;
    }
    if (valleyBefore(y, top, to)) {
      high = to;
    }
    for (int k = low; k < high; k++) {
      sum += y[k];
    }
    double area = 2 * sum / n;
    double position = (top + shift - n / 2) * step;
    double uPosition = noise / height * width / 2;
    double ppm = s.carrierHertz() > 0 ? 1e6 * position / s.carrierHertz() : Double.NaN;
    return new Peak(
        Measured.of(position, uPosition, Unit.HERTZ),
        ppm,
        Measured.of(height, noise, Unit.VOLT),
        Measured.of(width, noise / height * width * Math.sqrt(2), Unit.HERTZ),
        Measured.of(area, 2 * noise * Math.sqrt(high - low) / n, Unit.VOLT));
  }

  /** Whether the range's edge is a valley towards a neighbour, still well above the foot. */
  private static boolean valleyBefore(double[] y, int top, int edge) {
    int k = Math.max(0, Math.min(y.length - 1, edge));
    return y[k] > 0.15 * y[top];
  }

  private static double crossing(double[] y, int top, int side, double level) {
    int k = top;
    while (k + side >= 0 && k + side < y.length && y[k + side] > level) {
      k += side;
    }
    int next = k + side;
    if (next < 0 || next >= y.length) {
      return k;
    }
    return k + side * (y[k] - level) / (y[k] - y[next]);
  }
}
