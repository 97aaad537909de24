package coilside.signal;

import coilside.quantity.Measured;
import coilside.quantity.Unit;

/**
 * What a quadrature receiver does wrong: DC offsets, unequal gain of I and Q, and a phase between
 * them that is not 90 degrees. Measured from a strong line off the carrier by its image on the
 * other side.
 *
 * <p>Model: I' = I + dcI, Q' = gain (Q cos(skew) + I sin(skew)) + dcQ. With w = gain exp(-i skew)
 * the image's ratio is r = (1 - w)/(1 + w): the point at -f is r times the conjugate of the point
 * at f. Image rejection: -20 log10 |r|.
 *
 * @param gainRatio gain of Q over that of I
 * @param skewRadians phase error of Q, rad
 * @param imageRatio |r|
 * @param offsetRe DC offset of I, V
 * @param offsetIm DC offset of Q, V
 * @param ratioRe real part of r
 * @param ratioIm imaginary part of r
 */
public record QuadratureError(
    Measured gainRatio,
    Measured skewRadians,
    Measured imageRatio,
    Measured offsetRe,
    Measured offsetIm,
    double ratioRe,
    double ratioIm) {

  /**
   * Measures it from an FID whose line stands off the carrier.
   *
   * @param sigma noise of one real channel, one sample, V
   * @throws IllegalArgumentException when the line and its image cannot be told apart: it must
   *     stand at least 16 bins, and four times its width, from the carrier and from the edge of the
   *     spectrum
   */
  public static QuadratureError measure(Fid fid, double sigma) {
    if (!(sigma > 0) || !Double.isFinite(sigma)) {
      throw new IllegalArgumentException("noise of " + sigma + " V must be above 0 V");
    }
    // The window is centred on its stretch, the signal decays: the best stretch is a few T2*.
    QuadratureError best = null;
    IllegalArgumentException refusal = null;
    for (int length = fid.points(); length >= 64; length /= 2) {
      try {
        QuadratureError q = over(fid, length, sigma);
        if (best == null || q.imageRatio.u() < best.imageRatio.u()) {
          best = q;
        }
      } catch (IllegalArgumentException e) {
        refusal = refusal == null ? e : refusal;
      }
    }
    if (best == null) {
      throw refusal == null
          ? new IllegalArgumentException(
              "an FID of " + fid.points() + " points is too short: at least 64")
          : refusal;
    }
    return best;
  }

  private static QuadratureError over(Fid fid, int n, double sigma) {
    double lastRe = 0;
    double lastIm = 0;
    double sumW = 0;
    double sumW2 = 0;
    double[] window = Windows.lowSideLobes(n);
    for (int k = 0; k < n; k++) {
      lastRe += window[k] * fid.re(k);
      lastIm += window[k] * fid.im(k);
      sumW += window[k];
      sumW2 += window[k] * window[k];
    }
    double dcRe = lastRe / sumW;
    double dcIm = lastIm / sumW;
    int points = Fourier.powerOfTwoAtLeast(n);
    double[] z = new double[2 * points];
    for (int k = 0; k < n; k++) {
      z[2 * k] = window[k] * (fid.re(k) - dcRe);
      z[2 * k + 1] = window[k] * (fid.im(k) - dcIm);
    }
    Fourier.transform(z, points);
    int peak = 1;
    double top = 0;
    for (int k = 0; k < points; k++) {
      double p = z[2 * k] * z[2 * k] + z[2 * k + 1] * z[2 * k + 1];
      if (p > top) {
        top = p;
        peak = k;
      }
    }
    int half = 1;
    while (half < points / 4
        && Math.max(power(z, points, peak + half), power(z, points, peak - half)) > top / 100) {
      half++;
    }
    int centred = peak < points / 2 ? peak : peak - points;
    int room = Math.min(Math.abs(centred), points / 2 - Math.abs(centred));
    if (room < Math.max(16, 4 * half)) {
      throw new IllegalArgumentException(
          "the line stands "
              + Math.abs(centred) / (points * fid.dwellSeconds())
              + " Hz from the carrier: set the carrier so that it is at least "
              + Math.max(16, 4 * half) / (points * fid.dwellSeconds())
              + " Hz from it and from the edge of the spectrum");
    }
    double re = 0;
    double im = 0;
    double norm = 0;
    for (int j = -half; j <= half; j++) {
      int a = (peak + j) & (points - 1);
      int b = (-(peak + j)) & (points - 1);
      re += z[2 * b] * z[2 * a] - z[2 * b + 1] * z[2 * a + 1];
      im += z[2 * b] * z[2 * a + 1] + z[2 * b + 1] * z[2 * a];
      norm += z[2 * a] * z[2 * a] + z[2 * a + 1] * z[2 * a + 1];
    }
    double rRe = re / norm;
    double rIm = im / norm;
    // The windowed noise against the windowed signal, in time.
    double signal = 0;
    double crossed = 0;
    for (int k = 0; k < n; k++) {
      double w2 = window[k] * window[k];
      double r = fid.re(k) - dcRe;
      double i = fid.im(k) - dcIm;
      double size = Math.max(0, r * r + i * i - 2 * sigma * sigma);
      signal += w2 * size;
      crossed += w2 * w2 * size;
    }
    double u = sigma * Math.sqrt(crossed) / signal;
    double denominator = (1 + rRe) * (1 + rRe) + rIm * rIm;
    double wRe = ((1 - rRe) * (1 + rRe) - rIm * rIm) / denominator;
    double wIm = (-rIm * (1 + rRe) - rIm * (1 - rRe)) / denominator;
    double uW = 2 * u / denominator;
    double gain = Math.hypot(wRe, wIm);
    double uDc = sigma * Math.sqrt(sumW2) / sumW;
    return new QuadratureError(
        Measured.of(gain, uW, Unit.ONE),
        Measured.of(-Math.atan2(wIm, wRe), uW / gain, Unit.RADIAN),
        Measured.of(Math.hypot(rRe, rIm), u, Unit.ONE),
        Measured.of(dcRe, uDc, Unit.VOLT),
        Measured.of(dcIm, uDc, Unit.VOLT),
        rRe,
        rIm);
  }

  private static double power(double[] z, int points, int bin) {
    int k = bin & (points - 1);
    return z[2 * k] * z[2 * k] + z[2 * k + 1] * z[2 * k + 1];
  }

  /** Image rejection in decibels for a gain ratio and a phase error, exactly. */
  public static double imageRejectionDecibels(double gainRatio, double skewRadians) {
    double c = 2 * gainRatio * Math.cos(skewRadians);
    double g = 1 + gainRatio * gainRatio;
    return 10 * Math.log10((g + c) / (g - c));
  }

  /** The FID with offsets and image taken out; the I channel's gain is kept. */
  public Fid remove(Fid fid) {
    int n = fid.points();
    double[] re = new double[n];
    double[] im = new double[n];
    double g = gainRatio.value();
    double c = Math.cos(skewRadians.value());
    double s = Math.sin(skewRadians.value());
    for (int k = 0; k < n; k++) {
      re[k] = fid.re(k) - offsetRe.value();
      im[k] = ((fid.im(k) - offsetIm.value()) / g - re[k] * s) / c;
    }
    return new Fid(re, im, fid.dwellSeconds(), fid.startSeconds(), fid.carrierHertz());
  }
}
