package coilside.fit;

import coilside.signal.Fourier;

/**
 * Where the strongest exponential in some samples is, good enough for {@link Exponentials} to
 * start.
 *
 * @param lambdaRe minus its decay per sample
 * @param lambdaIm its frequency, rad per sample
 * @param powerOverSamples |X|^2/n of the bin it was found in: 2 sigma^2 on the average for noise
 * @param trials bins that were searched
 */
record ExponentialStart(double lambdaRe, double lambdaIm, double powerOverSamples, double trials) {
  /**
   * Finds the strongest exponential in the Fourier transforms of the whole record and of its first
   * quarter, sixteenth ...: the peak bin and its larger neighbour give z, exactly without noise.
   */
  static ExponentialStart of(double[] re, double[] im) {
    int longest = Integer.highestOneBit(re.length);
    double[] z = Scratch.transform(2 * longest);
    ExponentialStart best = null;
    double trials = 0;
    for (int n = longest; n >= Math.min(longest, 16); n /= 4) {
      for (int k = 0; k < n; k++) {
        z[2 * k] = re[k];
        z[2 * k + 1] = im[k];
      }
      Fourier.transform(z, n);
      trials += n;
      int peak = 0;
      double top = -1;
      for (int k = 0; k < n; k++) {
        double p = z[2 * k] * z[2 * k] + z[2 * k + 1] * z[2 * k + 1];
        if (p > top) {
          top = p;
          peak = k;
        }
      }
      if (best == null || top / n > best.powerOverSamples) {
        best = pole(z, n, peak, top / n);
      }
    }
    return new ExponentialStart(best.lambdaRe, best.lambdaIm, best.powerOverSamples, trials);
  }

  private static ExponentialStart pole(double[] z, int n, int p, double powerOverSamples) {
    int mask = n - 1;
    int up = (p + 1) & mask;
    int down = (p - 1) & mask;
    int o =
        Math.hypot(z[2 * up], z[2 * up + 1]) > Math.hypot(z[2 * down], z[2 * down + 1]) ? up : down;
    double pa = -2 * Math.PI * p / n;
    double oa = -2 * Math.PI * o / n;
    double xr = z[2 * p] - z[2 * o];
    double xi = z[2 * p + 1] - z[2 * o + 1];
    double dr =
        z[2 * p] * Math.cos(pa)
            - z[2 * p + 1] * Math.sin(pa)
            - z[2 * o] * Math.cos(oa)
            + z[2 * o + 1] * Math.sin(oa);
    double di =
        z[2 * p] * Math.sin(pa)
            + z[2 * p + 1] * Math.cos(pa)
            - z[2 * o] * Math.sin(oa)
            - z[2 * o + 1] * Math.cos(oa);
    double size = dr * dr + di * di;
    double qr = (xr * dr + xi * di) / size;
    double qi = (xi * dr - xr * di) / size;
    double alpha = -Math.log(Math.hypot(qr, qi));
    double omega = Math.atan2(qi, qr);
    double expected = Math.IEEEremainder(2 * Math.PI * p / n, 2 * Math.PI);
    if (!Double.isFinite(omega)
        || Math.abs(Math.IEEEremainder(omega - expected, 2 * Math.PI)) > 3 * Math.PI / n) {
      omega = expected;
    }
    if (!(alpha > 0.1 / n)) {
      alpha = 0.5 / n;
    }
    return new ExponentialStart(-Math.min(alpha, 2), omega, powerOverSamples, n);
  }
}
