package coilside.signal;

import coilside.quantity.Measured;
import coilside.quantity.Unit;
import java.util.Arrays;
import java.util.List;

/**
 * The amplitude of each scan of a run, as the projection on the shape that all its scans share: the
 * first singular vector of the scans' matrix, or a given shape such as the fitted decay.
 *
 * <p>Amplitudes are complex, and signed along the run's common phase. The common phase leaves the
 * overall sign open; it is chosen so that the largest amplitude is positive. For a decay the
 * projection is sqrt(T2*&#47;(2 dwell)) times better than one sample.
 */
public final class MatchedProjection {
  private final double[] re;
  private final double[] im;
  private final double u;
  private final double phase;
  private final Fid shape;

  private MatchedProjection(double[] re, double[] im, double u, double phase, Fid shape) {
    this.re = re;
    this.im = im;
    this.u = u;
    this.phase = phase;
    this.shape = shape;
  }

  /**
   * Projects each scan on a known shape: c = sum conj(shape) s / sum |shape|^2. With a shape that
   * is 1 at time zero the amplitude is that at time zero.
   *
   * @param sigma noise of one real channel, one sample, V
   */
  public static MatchedProjection onShape(List<Fid> scans, Fid shape, double sigma) {
    int m = scans.size();
    double norm = 0;
    for (int k = 0; k < shape.points(); k++) {
      norm += shape.re(k) * shape.re(k) + shape.im(k) * shape.im(k);
    }
    if (!(norm > 0) || !Double.isFinite(norm)) {
      throw new IllegalArgumentException("the common shape is empty");
    }
    double[] re = new double[m];
    double[] im = new double[m];
    for (int j = 0; j < m; j++) {
      Fid fid = scans.get(j);
      if (fid.points() != shape.points()) {
        throw new IllegalArgumentException(
            "a scan of " + fid.points() + " points does not fit a shape of " + shape.points());
      }
      double r = 0;
      double i = 0;
      for (int k = 0; k < fid.points(); k++) {
        r += shape.re(k) * fid.re(k) + shape.im(k) * fid.im(k);
        i += shape.re(k) * fid.im(k) - shape.im(k) * fid.re(k);
      }
      re[j] = r / norm;
      im[j] = i / norm;
    }
    return new MatchedProjection(re, im, sigma / Math.sqrt(norm), commonPhase(re, im), shape);
  }

  /**
   * Projects each scan on the run's first singular vector, found in the band of the spectrum in
   * which the scans' mean power stands out. The shape is scaled to 1 at its largest sample, so the
   * amplitude is about that of the first samples.
   *
   * <p>The shape carries some noise of its own: a known decay is better where the SNR is low.
   *
   * @param sigma noise of one real channel, one sample, V
   */
  public static MatchedProjection bySingularVector(List<Fid> scans, double sigma) {
    return onShape(scans, singularShape(scans), sigma);
  }

  private static Fid singularShape(List<Fid> scans) {
    int m = scans.size();
    Fid one = scans.get(0);
    int n = one.points();
    int points = Fourier.powerOfTwoAtLeast(n);
    double[][] spectra = new double[m][];
    double[] power = new double[points];
    for (int j = 0; j < m; j++) {
      Fid fid = scans.get(j);
      double[] z = new double[2 * points];
      for (int k = 0; k < n; k++) {
        z[2 * k] = fid.re(k);
        z[2 * k + 1] = fid.im(k);
      }
      Fourier.transform(z, points);
      spectra[j] = z;
      for (int k = 0; k < points; k++) {
        power[k] += z[2 * k] * z[2 * k] + z[2 * k + 1] * z[2 * k + 1];
      }
    }
    boolean[] band = band(power, m);
    double[] vr = new double[m];
    double[] vi = new double[m];
    double[][] gr = new double[m][m];
    double[][] gi = new double[m][m];
    int loudest = 0;
    for (int a = 0; a < m; a++) {
      for (int b = 0; b <= a; b++) {
        double r = 0;
        double i = 0;
        for (int k = 0; k < points; k++) {
          if (band[k]) {
            double ar = spectra[a][2 * k];
            double ai = spectra[a][2 * k + 1];
            double br = spectra[b][2 * k];
            double bi = spectra[b][2 * k + 1];
            r += ar * br + ai * bi;
            i += ai * br - ar * bi;
          }
        }
        gr[a][b] = r;
        gi[a][b] = i;
        gr[b][a] = r;
        gi[b][a] = -i;
      }
      if (gr[a][a] > gr[loudest][loudest]) {
        loudest = a;
      }
    }
    for (int a = 0; a < m; a++) {
      vr[a] = gr[a][loudest];
      vi[a] = gi[a][loudest];
    }
    powerIteration(gr, gi, vr, vi);
    double[] z = new double[2 * points];
    for (int k = 0; k < points; k++) {
      if (band[k]) {
        double r = 0;
        double i = 0;
        for (int a = 0; a < m; a++) {
          r += vr[a] * spectra[a][2 * k] + vi[a] * spectra[a][2 * k + 1];
          i += vr[a] * spectra[a][2 * k + 1] - vi[a] * spectra[a][2 * k];
        }
        z[2 * k] = r;
        z[2 * k + 1] = -i;
      }
    }
    Fourier.transform(z, points);
    double[] re = new double[n];
    double[] im = new double[n];
    double top = 0;
    for (int k = 0; k < n; k++) {
      re[k] = z[2 * k];
      im[k] = -z[2 * k + 1];
      top = Math.max(top, Math.hypot(re[k], im[k]));
    }
    for (int k = 0; k < n; k++) {
      re[k] /= top;
      im[k] /= top;
    }
    return new Fid(re, im, one.dwellSeconds(), one.startSeconds(), one.carrierHertz());
  }

  private static void powerIteration(double[][] gr, double[][] gi, double[] vr, double[] vi) {
    int m = vr.length;
    double[] wr = new double[m];
    double[] wi = new double[m];
    for (int pass = 0; pass < 60; pass++) {
      double norm = 0;
      for (int a = 0; a < m; a++) {
        double r = 0;
        double i = 0;
        for (int b = 0; b < m; b++) {
          r += gr[a][b] * vr[b] - gi[a][b] * vi[b];
          i += gr[a][b] * vi[b] + gi[a][b] * vr[b];
        }
        wr[a] = r;
        wi[a] = i;
        norm += r * r + i * i;
      }
      norm = Math.sqrt(norm);
      if (!(norm > 0) || !Double.isFinite(norm)) {
        throw new IllegalArgumentException(
            "the scans hold nothing, or samples that are not finite numbers");
      }
      for (int a = 0; a < m; a++) {
        vr[a] = wr[a] / norm;
        vi[a] = wi[a] / norm;
      }
    }
  }

  /** The bins around the strongest one whose power, smoothed over three, stands above the noise. */
  private static boolean[] band(double[] power, int scans) {
    int points = power.length;
    int mask = points - 1;
    double[] smooth = new double[points];
    int peak = 0;
    for (int k = 0; k < points; k++) {
      smooth[k] = (power[(k - 1) & mask] + power[k] + power[(k + 1) & mask]) / 3;
      if (smooth[k] > smooth[peak]) {
        peak = k;
      }
    }
    double[] sorted = smooth.clone();
    Arrays.sort(sorted);
    double floor = sorted[points / 2] * (1 + 2 / Math.sqrt(3.0 * scans));
    boolean[] band = new boolean[points];
    for (int side = -1; side <= 1; side += 2) {
      for (int j = 0; j < points / 2; j++) {
        int k = (peak + side * j) & mask;
        if (j > 2 && smooth[k] < floor) {
          break;
        }
        band[k] = true;
      }
    }
    return band;
  }

  private static double commonPhase(double[] re, double[] im) {
    double r = 0;
    double i = 0;
    int largest = 0;
    for (int j = 0; j < re.length; j++) {
      r += re[j] * re[j] - im[j] * im[j];
      i += 2 * re[j] * im[j];
      if (Math.hypot(re[j], im[j]) > Math.hypot(re[largest], im[largest])) {
        largest = j;
      }
    }
    double phase = 0.5 * Math.atan2(i, r);
    if (re[largest] * Math.cos(phase) + im[largest] * Math.sin(phase) < 0) {
      phase += Math.PI;
    }
    return phase;
  }

  /** Number of scans. */
  public int scans() {
    return re.length;
  }

  /** Real part of the complex amplitude of scan j, V, no phase taken out. */
  public double re(int j) {
    return re[j];
  }

  /** Imaginary part of the complex amplitude of scan j, V. */
  public double im(int j) {
    return im[j];
  }

  /** Amplitude of scan j along the common phase, with its sign. */
  public Measured amplitude(int j) {
    return Measured.of(re[j] * Math.cos(phase) + im[j] * Math.sin(phase), u, Unit.VOLT);
  }

  /** What scan j holds across the common phase: noise only, when all scans share one phase, V. */
  public double across(int j) {
    return im[j] * Math.cos(phase) - re[j] * Math.sin(phase);
  }

  /** Standard uncertainty of re, im and amplitude of every scan, V. */
  public double uncertainty() {
    return u;
  }

  /** The common phase, rad. */
  public double phaseRadians() {
    return phase;
  }

  /** The shape projected on. */
  public Fid shape() {
    return shape;
  }
}
