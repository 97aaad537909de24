package coilside.fit;

/**
 * How a frequency wanders over an averaging time m tau0, from equally spaced values of the
 * (fractional) frequency: the deviations of NIST SP 1065 (W. J. Riley, Handbook of Frequency
 * Stability Analysis, 2008), sections 5.2-5.9.
 */
public final class AllanDeviation {
  private AllanDeviation() {}

  /** Plain Allan deviation: adjacent averages of m values. */
  public static double plain(double[] y, int m) {
    int groups = y.length / m;
    need(groups, 2, y, m, "the Allan deviation");
    double[] mean = means(y, m, groups);
    double sum = 0;
    for (int i = 0; i + 1 < groups; i++) {
      double d = mean[i + 1] - mean[i];
      sum += d * d;
    }
    return Math.sqrt(sum / (2 * (groups - 1.0)));
  }

  /** Overlapping Allan deviation: the usual choice. */
  public static double overlapping(double[] y, int m) {
    double[] x = phase(y);
    int terms = x.length - 2 * m;
    need(terms, 1, y, m, "the overlapping Allan deviation");
    double sum = 0;
    for (int i = 0; i < terms; i++) {
      double d = x[i + 2 * m] - 2 * x[i + m] + x[i];
      sum += d * d;
    }
    return Math.sqrt(sum / (2.0 * m * m * terms));
  }

  /** Modified Allan deviation: tells white from flicker phase noise. */
  public static double modified(double[] y, int m) {
    double[] x = phase(y);
    int terms = x.length - 3 * m + 1;
    need(terms, 1, y, m, "the modified Allan deviation");
    double inner = 0;
    for (int i = 0; i < m; i++) {
      inner += x[i + 2 * m] - 2 * x[i + m] + x[i];
    }
    double sum = inner * inner;
    for (int j = 1; j < terms; j++) {
      inner += x[j + 3 * m - 1] - 3 * x[j + 2 * m - 1] + 3 * x[j + m - 1] - x[j - 1];
      sum += inner * inner;
    }
    return Math.sqrt(sum / (2.0 * m * m * m * m * terms));
  }

  /** Time deviation, s for fractional frequencies: m tau0/sqrt(3) times the modified deviation. */
  public static double time(double[] y, int m, double tau0Seconds) {
    return m * tau0Seconds / Math.sqrt(3) * modified(y, m);
  }

  /** Overlapping Hadamard deviation: blind to linear drift. */
  public static double hadamard(double[] y, int m) {
    double[] x = phase(y);
    int terms = x.length - 3 * m;
    need(terms, 1, y, m, "the Hadamard deviation");
    double sum = 0;
    for (int i = 0; i < terms; i++) {
      double d = x[i + 3 * m] - 3 * x[i + 2 * m] + 3 * x[i + m] - x[i];
      sum += d * d;
    }
    return Math.sqrt(sum / (6.0 * m * m * terms));
  }

  private static double[] means(double[] y, int m, int groups) {
    double[] mean = new double[groups];
    for (int g = 0; g < groups; g++) {
      for (int k = 0; k < m; k++) {
        mean[g] += y[g * m + k] / m;
      }
    }
    return mean;
  }

  /** Summed frequency: x_0 = 0, x_(i+1) = x_i + y_i, the mean taken off against cancellation. */
  private static double[] phase(double[] y) {
    double mean = 0;
    for (double v : y) {
      mean += v / y.length;
    }
    double[] x = new double[y.length + 1];
    for (int i = 0; i < y.length; i++) {
      x[i + 1] = x[i] + (y[i] - mean);
    }
    return x;
  }

  private static void need(int have, int least, double[] y, int m, String what) {
    if (m < 1 || have < least) {
      throw new IllegalArgumentException(
          what + " at " + m + " intervals needs more than " + y.length + " values");
    }
  }
}
