package coilside.signal;

import java.util.Random;

/** Makes FIDs of a known kind for tests; the noise is seeded by the caller. */
public final class Synthetic {
  private Synthetic() {}

  /** White noise of standard deviation sigma in each channel. */
  public static Fid noise(Random random, int points, double dwellSeconds, double sigma) {
    double[] re = new double[points];
    double[] im = new double[points];
    for (int k = 0; k < points; k++) {
      re[k] = sigma * random.nextGaussian();
      im[k] = sigma * random.nextGaussian();
    }
    return new Fid(re, im, dwellSeconds, 0, 8.09e6);
  }

  /** A exp(i(phi + 2 pi f t)) exp(-t/T2*) from {@code start} on, without noise. */
  public static Fid decay(
      int points, double dwell, double start, double a, double phi, double f, double t2) {
    double[] re = new double[points];
    double[] im = new double[points];
    for (int k = 0; k < points; k++) {
      double t = start + k * dwell;
      double e = a * Math.exp(-t / t2);
      re[k] = e * Math.cos(phi + 2 * Math.PI * f * t);
      im[k] = e * Math.sin(phi + 2 * Math.PI * f * t);
    }
    return new Fid(re, im, dwell, start, 8.09e6);
  }

  /** The sum of two FIDs on one grid, with the first's start time. */
  public static Fid sum(Fid a, Fid b) {
    double[] re = new double[a.points()];
    double[] im = new double[a.points()];
    for (int k = 0; k < re.length; k++) {
      re[k] = a.re(k) + b.re(k);
      im[k] = a.im(k) + b.im(k);
    }
    return new Fid(re, im, a.dwellSeconds(), a.startSeconds(), a.carrierHertz());
  }
}
