package coilside.signal;

/** Tail probabilities and thresholds of noise: what a false-alarm probability means in numbers. */
public final class Tail {
  private Tail() {}

  /** Chance that the mean of m unit exponentials exceeds x: exp(-m x) sum (m x)^j/j!, j below m. */
  static double meanOfExponentials(int m, double x) {
    double y = m * x;
    if (m > 400) {
      double z = Math.cbrt(x);
      double v = 1.0 / (9.0 * m);
      return normal((z - (1 - v)) / Math.sqrt(v));
    }
    double logTerm = -y;
    double sum = 0;
    for (int j = 0; j < m; j++) {
      sum += Math.exp(logTerm);
      logTerm += Math.log(y / (j + 1));
    }
    return sum;
  }

  /** The x that {@link #meanOfExponentials} brings down to this probability. */
  static double thresholdOfMean(int m, double probability) {
    double low = 1;
    double high = 2;
    while (meanOfExponentials(m, high) > probability) {
      low = high;
      high *= 2;
    }
    for (int i = 0; i < 80; i++) {
      double mid = (low + high) / 2;
      if (meanOfExponentials(m, mid) > probability) {
        low = mid;
      } else {
        high = mid;
      }
    }
    return high;
  }

  /**
   * Height |X|/sigma that noise in {@code trials} independent complex bins exceeds anywhere with
   * this probability, sigma being that of one real channel: sqrt(2 ln(trials/probability)).
   */
  public static double sigmaThreshold(double trials, double falseAlarmProbability) {
    if (!(falseAlarmProbability > 0 && falseAlarmProbability < 1)) {
      throw new IllegalArgumentException(
          "a false-alarm probability of " + falseAlarmProbability + " must lie between 0 and 1");
    }
    double single = -Math.expm1(Math.log1p(-falseAlarmProbability) / Math.max(1, trials));
    return Math.sqrt(-2 * Math.log(single));
  }

  /** Upper tail of the standard normal distribution (erfc by continued fraction and series). */
  static double normal(double z) {
    if (z < 0) {
      return 1 - normal(-z);
    }
    if (z > 2.5) {
      double f = 0;
      for (int k = 60; k >= 1; k--) {
        f = k / (z + f);
      }
      return Math.exp(-z * z / 2) / Math.sqrt(2 * Math.PI) / (z + f);
    }
    double term = z;
    double sum = z;
    for (int k = 1; k < 100; k++) {
      term *= z * z / (2 * k + 1);
      sum += term;
    }
    return 0.5 - sum * Math.exp(-z * z / 2) / Math.sqrt(2 * Math.PI);
  }
}
