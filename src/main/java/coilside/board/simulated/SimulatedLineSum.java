package coilside.board.simulated;

import coilside.signal.Fourier;
import java.util.Arrays;

/**
 * The sum of many steady lines on a uniform grid of times, sum over j of c_j exp(i k x_j) for k = 0
 * .. n-1, by a non-uniform fast Fourier transform.
 *
 * <p>Gaussian gridding on a grid twice as fine, spread over 6 grid points each side: L. Greengard,
 * J.-Y. Lee, SIAM Rev. 46 (2004) 443, type 1, with the opposite sign of the exponent. Error below
 * 1e-6 of the sum of |c_j|. Not for use from several threads at once.
 */
final class SimulatedLineSum {
  /** Shortest sum worth a transform. */
  static final int FEWEST = 24;

  private static final int SPREAD = 6;

  private double[] grid = new double[0];

  /** What depends on the phase steps and the number of samples only, to be used again. */
  static final class Plan {
    private final int samples;
    private final int size;
    private final double[] cos;
    private final double[] sin;
    private final int[] cell;
    private final double[] middle;
    private final double[] up;
    private final double[] down;
    private final double[] fall = new double[SPREAD + 1];
    private final double[] undo;

    /**
     * @param x phase step of each line, rad a sample, within -pi .. pi
     * @param samples most samples of a sum
     */
    Plan(double[] x, int samples) {
      this.samples = samples;
      this.size = samples < FEWEST ? 0 : Fourier.powerOfTwoAtLeast(samples);
      int lines = x.length;
      cos = new double[lines];
      sin = new double[lines];
      boolean direct = size == 0;
      cell = new int[direct ? 0 : lines];
      middle = new double[cell.length];
      up = new double[cell.length];
      down = new double[cell.length];
      undo = new double[size];
      double step = Math.PI / size;
      double tau = Math.PI * SPREAD / (3.0 * size * size);
      for (int j = 0; j < lines; j++) {
        double angle = direct ? x[j] : x[j] * size / 2;
        cos[j] = Math.cos(angle);
        sin[j] = Math.sin(angle);
        if (!direct) {
          cell[j] = (int) Math.floor(x[j] / step);
          double d = x[j] - cell[j] * step;
          middle[j] = Math.exp(-d * d / (4 * tau));
          up[j] = Math.exp(d * step / (2 * tau));
          down[j] = 1 / up[j];
        }
      }
      for (int l = 0; l <= SPREAD; l++) {
        fall[l] = Math.exp(-(l * step) * (l * step) / (4 * tau));
      }
      double scale = direct ? 0 : Math.sqrt(Math.PI / tau) / (2.0 * size);
      for (int k = 0; k < size; k++) {
        double q = k - size / 2;
        undo[k] = scale * Math.exp(q * q * tau);
      }
    }
  }

  /**
   * Adds the sum to (re, im).
   *
   * @param plan of the lines' phase steps
   * @param cRe real parts of the weights
   * @param cIm imaginary parts
   * @param from first line
   * @param to one after the last
   * @param re gets the real parts added
   * @param im gets the imaginary parts added
   * @param n samples, at most those of the plan
   */
  void add(
      Plan plan, double[] cRe, double[] cIm, int from, int to, double[] re, double[] im, int n) {
    if (n > plan.samples) {
      throw new IllegalArgumentException(n + " samples, the plan is for " + plan.samples);
    }
    if (plan.size == 0) {
      direct(plan.cos, plan.sin, cRe, cIm, from, to, re, im, n);
      return;
    }
    int fine = 2 * plan.size;
    if (grid.length < 2 * fine) {
      grid = new double[2 * fine];
    }
    Arrays.fill(grid, 0, 2 * fine, 0);
    int mask = fine - 1;
    for (int j = from; j < to; j++) {
      double a = cRe[j];
      double b = cIm[j];
      if (a != 0 || b != 0) {
        // The transform has the other sign: everything is conjugated on the way in and out.
        spread(
            plan, j, a * plan.cos[j] - b * plan.sin[j], -a * plan.sin[j] - b * plan.cos[j], mask);
      }
    }
    Fourier.transform(grid, fine);
    int half = plan.size / 2;
    for (int k = 0; k < n; k++) {
      double w = plan.undo[k];
      int g = 2 * ((k - half) & mask);
      re[k] += w * grid[g];
      im[k] -= w * grid[g + 1];
    }
  }

  private void spread(Plan plan, int j, double re, double im, int mask) {
    int m = plan.cell[j];
    double w = plan.middle[j];
    double factor = plan.up[j];
    for (int l = 0; l <= SPREAD; l++) {
      int g = 2 * ((m + l) & mask);
      double part = w * plan.fall[l];
      grid[g] += part * re;
      grid[g + 1] += part * im;
      w *= factor;
    }
    factor = plan.down[j];
    w = plan.middle[j] * factor;
    for (int l = 1; l < SPREAD; l++) {
      int g = 2 * ((m - l) & mask);
      double part = w * plan.fall[l];
      grid[g] += part * re;
      grid[g + 1] += part * im;
      w *= factor;
    }
  }

  /** The same term by term, from cosine and sine of each phase step. */
  static void direct(
      double[] cos,
      double[] sin,
      double[] cRe,
      double[] cIm,
      int from,
      int to,
      double[] re,
      double[] im,
      int n) {
    for (int j = from; j < to; j++) {
      double a = cRe[j];
      double b = cIm[j];
      if (a == 0 && b == 0) {
        continue;
      }
      for (int k = 0; k < n; k++) {
        re[k] += a;
        im[k] += b;
        double t = a * cos[j] - b * sin[j];
        b = a * sin[j] + b * cos[j];
        a = t;
      }
    }
  }
}
