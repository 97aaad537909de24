package coilside.fit;

import coilside.signal.Tail;

/**
 * What residuals hold near a line: they are turned to the line's frequency, averaged in blocks of
 * about T2*&#47;64, and searched as {@link ExponentialStart} does for a signal.
 *
 * @param statistic largest |X|/sigma_X
 * @param threshold what noise exceeds once in a thousand times
 * @param lambdaRe decay per original sample of what was found
 * @param lambdaIm frequency per original sample of what was found
 */
record Misfit(double statistic, double threshold, double lambdaRe, double lambdaIm) {
  boolean passes() {
    return statistic <= threshold;
  }

  /** How many samples go into a block for a line that decays by {@code -lambdaRe} a sample. */
  static int block(int n, double lambdaRe) {
    int most = Math.max(1, n / 64);
    return (int) Math.max(1, Math.min(most, Math.floor(-1 / (64 * lambdaRe))));
  }

  static Misfit of(
      double[] re, double[] im, int n, double sigma, double lambdaRe, double lambdaIm) {
    int block = block(n, lambdaRe);
    int blocks = n / block;
    double[][] z = blocks(re, im, n, block, lambdaIm);
    ExponentialStart start = ExponentialStart.of(z[0], z[1]);
    double sigmaBlock = sigma / Math.sqrt(block);
    return new Misfit(
        Math.sqrt(start.powerOverSamples()) / sigmaBlock,
        Tail.sigmaThreshold(Math.max(blocks, start.trials()), 1e-3),
        start.lambdaRe() / block,
        lambdaIm + start.lambdaIm() / block);
  }

  /** Block means of y_k exp(-i omega k); each stands at the middle of its block. */
  static double[][] blocks(double[] re, double[] im, int n, int block, double omega) {
    int blocks = n / block;
    double[] outRe = new double[blocks];
    double[] outIm = new double[blocks];
    double stepRe = Math.cos(omega);
    double stepIm = -Math.sin(omega);
    for (int b = 0; b < blocks; b++) {
      double angle = -omega * (b * (double) block);
      double wr = Math.cos(angle);
      double wi = Math.sin(angle);
      double sr = 0;
      double si = 0;
      for (int k = b * block; k < (b + 1) * block; k++) {
        sr += re[k] * wr - im[k] * wi;
        si += re[k] * wi + im[k] * wr;
        double s = wr * stepRe - wi * stepIm;
        wi = wr * stepIm + wi * stepRe;
        wr = s;
      }
      outRe[b] = sr / block;
      outIm[b] = si / block;
    }
    return new double[][] {outRe, outIm};
  }
}
