package coilside.signal;

/**
 * A smooth background under a spectrum: a polynomial of low degree through the points that carry no
 * line, found by leaving out what stands more than three scatters off and fitting again.
 */
public final class Baseline {
  private Baseline() {}

  /**
   * The spectrum without its background, real and imaginary part each.
   *
   * @param degree of the polynomial, 0 to 5
   */
  public static Spectrum subtract(Spectrum s, int degree) {
    if (degree < 0 || degree > 5) {
      throw new IllegalArgumentException("a baseline of degree " + degree + " must be 0 to 5");
    }
    return new Spectrum(
        without(s.re(), degree), without(s.im(), degree), s.stepHertz(), s.carrierHertz());
  }

  private static double[] without(double[] y, int degree) {
    int n = y.length;
    boolean[] line = new boolean[n];
    double[] c = new double[degree + 1];
    for (int pass = 0; pass < 12; pass++) {
      c = fit(y, line, degree);
      double[] away = new double[n];
      for (int k = 0; k < n; k++) {
        away[k] = Math.abs(y[k] - value(c, k, n));
      }
      double[] sorted = away.clone();
      java.util.Arrays.sort(sorted);
      double limit = 3 * 1.4826 * sorted[n / 2];
      boolean changed = false;
      for (int k = 0; k < n; k++) {
        boolean now = away[k] > limit;
        changed |= now != line[k];
        line[k] = now;
      }
      if (!changed || limit == 0) {
        break;
      }
    }
    double[] out = new double[n];
    for (int k = 0; k < n; k++) {
      out[k] = y[k] - value(c, k, n);
    }
    return out;
  }

  private static double value(double[] c, int k, int n) {
    double x = 2.0 * k / n - 1;
    double before = 0;
    double last = 0;
    for (int j = c.length - 1; j >= 1; j--) {
      double next = 2 * x * last - before + c[j];
      before = last;
      last = next;
    }
    return x * last - before + c[0];
  }

  /** Least squares in Chebyshev polynomials, by the normal equations. */
  private static double[] fit(double[] y, boolean[] line, int degree) {
    int n = y.length;
    int p = degree + 1;
    double[][] a = new double[p][p + 1];
    double[] t = new double[p];
    for (int k = 0; k < n; k++) {
      if (line[k]) {
        continue;
      }
      double x = 2.0 * k / n - 1;
      for (int j = 0; j < p; j++) {
        t[j] = j == 0 ? 1 : j == 1 ? x : 2 * x * t[j - 1] - t[j - 2];
      }
      for (int i = 0; i < p; i++) {
        for (int j = 0; j < p; j++) {
          a[i][j] += t[i] * t[j];
        }
        a[i][p] += t[i] * y[k];
      }
    }
    for (int i = 0; i < p; i++) {
      for (int r = 0; r < p; r++) {
        if (r != i && a[i][i] != 0) {
          double f = a[r][i] / a[i][i];
          for (int j = i; j <= p; j++) {
            a[r][j] -= f * a[i][j];
          }
        }
      }
    }
    double[] c = new double[p];
    for (int i = 0; i < p; i++) {
      c[i] = a[i][i] == 0 ? 0 : a[i][p] / a[i][i];
    }
    return c;
  }
}
