package coilside.bench;

/**
 * A safe guess of T1 from a few scans with rising rests, before the 90-degree pulse is known: cuts
 * the circle between pulse and repetition time openly. Its only use is a repetition time that is
 * surely long enough; the assumption is checked once T1 has been measured.
 *
 * <p>Model: scan k sees A sin(theta) m_k; after the pulse m cos(theta) is left, and during rest r
 * it recovers as m' = 1 + (m cos(theta) - 1) exp(-r/T1). T1 and cos(theta) are searched on a grid,
 * A and what stood before the first scan are linear.
 */
final class RecoveryGuess {
  private static final double SHORTEST = 3e-3;
  private static final double LONGEST = 20;
  private static final int STEPS = 180;
  private static final int ANGLES = 100;

  /** Deviations by which a T1 may miss the best fit and still count as possible. */
  private static final double DEVIATIONS = 2;

  /** What the model leaves out (echoes of earlier pulses, B1 spread), relative. */
  private static final double MODEL_ERROR = 0.01;

  private RecoveryGuess() {}

  /**
   * The longest T1 that still fits the amplitudes about as well as the best.
   *
   * @param rests from the pulse before to that of each scan, s
   * @param amplitudes amplitude of each scan, any unit
   * @param sigma noise of one amplitude, same unit
   * @return T1, s
   */
  static double longest(double[] rests, double[] amplitudes, double sigma) {
    double[] best = new double[STEPS];
    double lowest = Double.POSITIVE_INFINITY;
    for (int t = 0; t < STEPS; t++) {
      best[t] = misfit(t1(t), rests, amplitudes);
      lowest = Math.min(lowest, best[t]);
    }
    double model = MODEL_ERROR * largest(amplitudes);
    double allowed = lowest + DEVIATIONS * DEVIATIONS * (sigma * sigma + model * model);
    double longest = t1(0);
    for (int t = 0; t < STEPS; t++) {
      if (best[t] <= allowed) {
        longest = t1(t);
      }
    }
    return longest;
  }

  private static double largest(double[] values) {
    double top = 0;
    for (double v : values) {
      top = Math.max(top, Math.abs(v));
    }
    return top;
  }

  private static double t1(int step) {
    return SHORTEST * Math.pow(LONGEST / SHORTEST, step / (STEPS - 1.0));
  }

  private static double misfit(double t1, double[] rests, double[] amplitudes) {
    double lowest = Double.POSITIVE_INFINITY;
    for (int c = 0; c < ANGLES; c++) {
      lowest = Math.min(lowest, misfit(t1, -1 + 1.98 * c / (ANGLES - 1), rests, amplitudes));
    }
    return lowest;
  }

  /**
   * Every m is p + q times what stood before the first scan, so amplitude and start are linear; the
   * start is held between what a pulse leaves and full recovery.
   */
  private static double misfit(double t1, double cos, double[] rests, double[] amplitudes) {
    int n = rests.length;
    double[] p = new double[n];
    double[] q = new double[n];
    double afterP = 0;
    double afterQ = 1;
    double pp = 0;
    double pq = 0;
    double qq = 0;
    double py = 0;
    double qy = 0;
    for (int k = 0; k < n; k++) {
      double e = Math.exp(-rests[k] / t1);
      p[k] = 1 + (afterP - 1) * e;
      q[k] = afterQ * e;
      afterP = p[k] * cos;
      afterQ = q[k] * cos;
      pp += p[k] * p[k];
      pq += p[k] * q[k];
      qq += q[k] * q[k];
      py += p[k] * amplitudes[k];
      qy += q[k] * amplitudes[k];
    }
    double det = pp * qq - pq * pq;
    double start = det > 1e-12 * pp * qq ? (pp * qy - pq * py) / (qq * py - pq * qy) : 1;
    double lowestStart = Math.min(cos, 0);
    double lowest = Double.POSITIVE_INFINITY;
    for (double s : new double[] {start, lowestStart, 1}) {
      if (s >= lowestStart && s <= 1) {
        lowest = Math.min(lowest, scaled(p, q, s, amplitudes));
      }
    }
    return lowest;
  }

  private static double scaled(double[] p, double[] q, double start, double[] amplitudes) {
    double mm = 0;
    double my = 0;
    double yy = 0;
    for (int k = 0; k < p.length; k++) {
      double m = p[k] + q[k] * start;
      mm += m * m;
      my += m * amplitudes[k];
      yy += amplitudes[k] * amplitudes[k];
    }
    return mm > 0 ? yy - my * my / mm : yy;
  }
}
