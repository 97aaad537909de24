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
  private double[] undo = new double[0];
  private int undoSize;
  private final double[] fall = new double[SPREAD + 1];

  /**
   * Adds the sum to (re, im).
   *
   * @param cRe real parts of the weights
   * @param cIm imaginary parts
   * @param x phase step of each line, rad a sample, within -pi .. pi
   * @param from first line
   * @param to one after the last
   * @param re gets the real parts added
   * @param im gets the imaginary parts added
   * @param n samples
   */
  void add(
      double[] cRe,
      double[] cIm,
      double[] x,
      int from,
      int to,
      double[] re,
      double[] im,
      int at,
      int n) {
    if (n < FEWEST) {
      direct(cRe, cIm, x, from, to, re, im, at, n);
      return;
    }
    int size = Fourier.powerOfTwoAtLeast(n);
    int fine = 2 * size;
    if (grid.length < 2 * fine) {
      grid = new double[2 * fine];
    }
    Arrays.fill(grid, 0, 2 * fine, 0);
    double tau = Math.PI * SPREAD / ((double) size * size * 2 * 1.5);
    double step = 2 * Math.PI / fine;
    for (int l = 0; l <= SPREAD; l++) {
      fall[l] = Math.exp(-(l * step) * (l * step) / (4 * tau));
    }
    double half = size / 2.0;
    int mask = fine - 1;
    for (int j = from; j < to; j++) {
      double a = cRe[j];
      double b = cIm[j];
      if (a == 0 && b == 0) {
        continue;
      }
      double turn = x[j] * half;
      double c = Math.cos(turn);
      double s = Math.sin(turn);
      // The transform has the other sign: everything is conjugated on the way in and out.
      double pRe = a * c - b * s;
      double pIm = -(a * s + b * c);
      int m = (int) Math.floor(x[j] / step);
      double d = x[j] - m * step;
      double e1 = Math.exp(-d * d / (4 * tau));
      double e2 = Math.exp(d * step / (2 * tau));
      double up = e1;
      for (int l = 0; l <= SPREAD; l++) {
        int g = 2 * ((m + l) & mask);
        double w = up * fall[l];
        grid[g] += w * pRe;
        grid[g + 1] += w * pIm;
        up *= e2;
      }
      double down = e1 / e2;
      for (int l = 1; l < SPREAD; l++) {
        int g = 2 * ((m - l) & mask);
        double w = down * fall[l];
        grid[g] += w * pRe;
        grid[g + 1] += w * pIm;
        down /= e2;
      }
    }
    Fourier.transform(grid, fine);
    prepareUndo(size, tau);
    for (int k = 0; k < n; k++) {
      int shifted = k - size / 2;
      int g = 2 * (shifted & mask);
      double w = undo[k];
      re[at + k] += w * grid[g];
      im[at + k] -= w * grid[g + 1];
    }
  }

  private void prepareUndo(int size, double tau) {
    if (undoSize == size) {
      return;
    }
    undo = new double[size];
    double scale = Math.sqrt(Math.PI / tau) / (2.0 * size);
    for (int k = 0; k < size; k++) {
      double q = k - size / 2;
      undo[k] = scale * Math.exp(q * q * tau);
    }
    undoSize = size;
  }

  /** The same, term by term. */
  static void direct(
      double[] cRe,
      double[] cIm,
      double[] x,
      int from,
      int to,
      double[] re,
      double[] im,
      int at,
      int n) {
    for (int j = from; j < to; j++) {
      double a = cRe[j];
      double b = cIm[j];
      if (a == 0 && b == 0) {
        continue;
      }
      double c = Math.cos(x[j]);
      double s = Math.sin(x[j]);
      for (int k = 0; k < n; k++) {
        re[at + k] += a;
        im[at + k] += b;
        double t = a * c - b * s;
        b = a * s + b * c;
        a = t;
      }
    }
  }
}
