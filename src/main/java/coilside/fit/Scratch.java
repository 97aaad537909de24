package coilside.fit;

/**
 * Working arrays that a thread keeps from one fit of an FID to the next, so that live running does
 * not allocate megabytes a second. Arrays above 2^18 values are not kept.
 */
final class Scratch {
  private static final int MOST_KEPT = 1 << 18;
  private static final ThreadLocal<double[][]> KEPT =
      ThreadLocal.withInitial(() -> new double[3][0]);

  private Scratch() {}

  /** At least n values of any content, for a transform; valid until the next call. */
  static double[] transform(int n) {
    return get(0, n);
  }

  /** At least n values for the real parts of residuals; valid until the next call. */
  static double[] residualRe(int n) {
    return get(1, n);
  }

  /** At least n values for the imaginary parts of residuals; valid until the next call. */
  static double[] residualIm(int n) {
    return get(2, n);
  }

  private static double[] get(int which, int n) {
    double[][] kept = KEPT.get();
    if (kept[which].length >= n) {
      return kept[which];
    }
    double[] fresh = new double[n];
    if (n <= MOST_KEPT) {
      kept[which] = fresh;
    }
    return fresh;
  }
}
