package coilside.signal;

import java.util.function.DoubleUnaryOperator;

/**
 * Weights for an FID before it is transformed. Each makes a new FID; times count from the FID's
 * first sample, so that the window does not change what was lost to the dead time.
 */
public final class Windows {
  private Windows() {}

  /** Exponential: adds {@code hertz} to the full width at half height of every line. */
  public static Fid exponential(Fid fid, double hertz) {
    notNegative(hertz);
    return weighted(fid, t -> Math.exp(-Math.PI * hertz * t));
  }

  /**
   * Gaussian: alone it would give a line of {@code hertz} full width at half height (of the
   * absorption part).
   */
  public static Fid gaussian(Fid fid, double hertz) {
    notNegative(hertz);
    double a = Math.PI * hertz;
    return weighted(fid, t -> Math.exp(-a * a * t * t / (4 * Math.log(2))));
  }

  /** The matched window for this T2*: best SNR of the peak, and the line's width doubled. */
  public static Fid matched(Fid fid, double t2StarSeconds) {
    if (!(t2StarSeconds > 0)) {
      throw new IllegalArgumentException("T2* of " + t2StarSeconds + " s must be above 0 s");
    }
    return weighted(fid, t -> Math.exp(-t / t2StarSeconds));
  }

  /**
   * From an exponential decay to a Gaussian line: takes {@code lorentzHertz} off and puts a
   * Gaussian of {@code gaussHertz} on. Raises noise; narrows lines.
   */
  public static Fid lorentzToGauss(Fid fid, double lorentzHertz, double gaussHertz) {
    notNegative(lorentzHertz);
    notNegative(gaussHertz);
    double a = Math.PI * gaussHertz;
    return weighted(
        fid, t -> Math.exp(Math.PI * lorentzHertz * t - a * a * t * t / (4 * Math.log(2))));
  }

  /** A cosine that falls from 1 at the first sample to 0 just after the last. */
  public static Fid cosine(Fid fid) {
    double length = fid.points() * fid.dwellSeconds();
    return weighted(fid, t -> Math.cos(Math.PI / 2 * t / length));
  }

  /** Any other weight as a function of the time after the first sample, s. */
  public static Fid weighted(Fid fid, DoubleUnaryOperator weight) {
    int n = fid.points();
    double[] re = new double[n];
    double[] im = new double[n];
    for (int k = 0; k < n; k++) {
      double w = weight.applyAsDouble(k * fid.dwellSeconds());
      re[k] = w * fid.re(k);
      im[k] = w * fid.im(k);
    }
    return new Fid(re, im, fid.dwellSeconds(), fid.startSeconds(), fid.carrierHertz());
  }

  /**
   * The four-term cosine window with side lobes below -92 dB (F. J. Harris, Proc. IEEE 66, 51-83,
   * 1978), n weights: for finding weak lines beside strong ones.
   */
  static double[] lowSideLobes(int n) {
    double[] w = new double[n];
    for (int k = 0; k < n; k++) {
      double x = 2 * Math.PI * (k + 0.5) / n;
      w[k] =
          0.35875 - 0.48829 * Math.cos(x) + 0.14128 * Math.cos(2 * x) - 0.01168 * Math.cos(3 * x);
    }
    return w;
  }

  private static void notNegative(double hertz) {
    if (!(hertz >= 0) || !Double.isFinite(hertz)) {
      throw new IllegalArgumentException("line broadening " + hertz + " Hz must be 0 Hz or more");
    }
  }
}
