package coilside.signal;

import java.util.concurrent.atomic.AtomicReferenceArray;
import org.jtransforms.fft.DoubleFFT_1D;
import pl.edu.icm.jlargearrays.ConcurrencyUtils;

/**
 * The discrete Fourier transform in this program's one convention: X_k = sum over n of s_n exp(-2
 * pi i k n/N), not scaled, N a power of two, zero frequency in the middle.
 *
 * <p>The first sample counts half by default (the trapezoidal rule, so that a decay's line stands
 * on a baseline of zero). Sample 0 is taken as the origin of time: a window that opens later leaves
 * a first-order phase of {@code exp(2 pi i f startSeconds)}, which {@link Phasing#forStart} undoes.
 *
 * <p>One thread: the library's own threads cost more than they bring below about 262144 points and
 * keep the program alive. Plans are kept by length. Safe for use from many threads.
 */
public final class Fourier {
  static {
    ConcurrencyUtils.setNumberOfThreads(1);
  }

  /** How the first sample is weighted. */
  public enum FirstPoint {
    /** One half: the sum approximates the integral from the first sample on. */
    HALVED,
    /** As it is: the plain sum. */
    WHOLE
  }

  private static final int MOST_BITS = 26;
  private static final AtomicReferenceArray<DoubleFFT_1D> PLANS =
      new AtomicReferenceArray<>(MOST_BITS + 1);

  private Fourier() {}

  /** The smallest power of two that is at least n. */
  public static int powerOfTwoAtLeast(int n) {
    if (n < 1 || n > 1 << MOST_BITS) {
      throw new IllegalArgumentException(
          n + " points cannot be transformed: 1 to " + (1 << MOST_BITS) + " can");
    }
    int p = Integer.highestOneBit(n);
    return p == n ? p : p << 1;
  }

  /** The spectrum with zeros appended up to a power of two, the first point halved. */
  public static Spectrum spectrum(Fid fid) {
    return spectrum(fid, powerOfTwoAtLeast(fid.points()), FirstPoint.HALVED);
  }

  /**
   * The spectrum on a grid of {@code points}.
   *
   * @param points a power of two, at least the FID's length; the rest is filled with zeros
   */
  public static Spectrum spectrum(Fid fid, int points, FirstPoint first) {
    int n = fid.points();
    if (points < n || Integer.bitCount(points) != 1) {
      throw new IllegalArgumentException(
          "a spectrum of "
              + points
              + " points cannot hold an FID of "
              + n
              + ": give a power of two of at least "
              + powerOfTwoAtLeast(n));
    }
    double[] z = new double[2 * points];
    double[] re = fid.re();
    double[] im = fid.im();
    for (int k = 0; k < n; k++) {
      z[2 * k] = re[k];
      z[2 * k + 1] = im[k];
    }
    if (first == FirstPoint.HALVED) {
      z[0] *= 0.5;
      z[1] *= 0.5;
    }
    transform(z, points);
    double[] outRe = new double[points];
    double[] outIm = new double[points];
    int half = points / 2;
    for (int k = 0; k < points; k++) {
      int to = (k + half) & (points - 1);
      outRe[to] = z[2 * k];
      outIm[to] = z[2 * k + 1];
    }
    return new Spectrum(outRe, outIm, 1 / (points * fid.dwellSeconds()), fid.carrierHertz());
  }

  /**
   * Transforms in place, forward, zero frequency first.
   *
   * @param interleaved re, im, re, im ...; at least 2 n long
   * @param n a power of two
   */
  public static void transform(double[] interleaved, int n) {
    plan(n).complexForward(interleaved);
  }

  private static DoubleFFT_1D plan(int n) {
    if (n < 1 || Integer.bitCount(n) != 1 || n > 1 << MOST_BITS) {
      throw new IllegalArgumentException(
          n + " points are not a power of two within 2^" + MOST_BITS);
    }
    int bits = Integer.numberOfTrailingZeros(n);
    DoubleFFT_1D plan = PLANS.get(bits);
    if (plan == null) {
      plan = new DoubleFFT_1D(n);
      PLANS.compareAndSet(bits, null, plan);
    }
    return plan;
  }
}
