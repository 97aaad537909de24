package coilside.bench;

/**
 * A safe guess of T1 from a few scans with rising rests, before the 90-degree pulse is known: cuts
 * the circle between pulse and repetition time openly. Its only use is a repetition time that is
 * surely long enough; the assumption is checked once T1 has been measured.
 *
 * <p>Model: scan k sees A sin(theta) m_k; after the pulse m cos(theta) is left, and during rest r
 * it recovers as m' = 1 + (m cos(theta) - 1) exp(-r/T1). T1 and cos(theta) are searched on a grid,
 * A is linear.
 */
final class RecoveryGuess {
  private static final double SHORTEST = 3e-3;
  private static final double LONGEST = 20;
  private static final int STEPS = 90;
  private static final int ANGLES = 25;
  private static final int STARTS = 5;

  /** What the model leaves out (echoes of earlier pulses, B1 spread), relative. */
  private static final double MODEL_ERROR = 0.01;

  private RecoveryGuess() {}

  /**
   * The longest T1 that still fits the amplitudes about as well as the best.
   *
   * @param rests rest before each scan, s
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
    double allowed = lowest + 4 * (sigma * sigma + model * model);
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
      double cos = -1 + 1.98 * c / (ANGLES - 1);
      for (int s = 0; s < STARTS; s++) {
        double start = cos + (1 - cos) * s / (STARTS - 1.0);
        lowest = Math.min(lowest, misfit(t1, cos, start, rests, amplitudes));
      }
    }
    return lowest;
  }

  private static double misfit(
      double t1, double cos, double start, double[] rests, double[] amplitudes) {
    double after = start;
    double mm = 0;
    double my = 0;
    double yy = 0;
    for (int k = 0; k < rests.length; k++) {
      double m = 1 + (after - 1) * Math.exp(-rests[k] / t1);
      mm += m * m;
      my += m * amplitudes[k];
      yy += amplitudes[k] * amplitudes[k];
      after = m * cos;
    }
    return mm > 0 ? yy - my * my / mm : yy;
  }
}
