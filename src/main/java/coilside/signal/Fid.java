package coilside.signal;

/**
 * Complex samples of one receive window, in volts at the receiver input.
 *
 * <p>Sample k was taken at {@code startSeconds + k * dwellSeconds} after time zero (the centre of
 * the last pulse before the window, or the start of the window where there was none). The sign
 * convention is that of the package: s(t) = A exp(i(phi + 2 pi f t)) exp(-t/T2*), f &gt; 0 when the
 * Larmor frequency lies above the carrier.
 *
 * <p>The arrays are shared, not copied: they are handed over by whoever made them and must not be
 * changed afterwards.
 */
public final class Fid {
  private final double[] re;
  private final double[] im;
  private final double dwellSeconds;
  private final double startSeconds;
  private final double carrierHertz;

  /**
   * @param re real part, V, length n &gt;= 1
   * @param im imaginary part, V, length n
   * @param dwellSeconds dwell time, s
   * @param startSeconds time of the first sample after time zero, s
   * @param carrierHertz frequency at which offset 0 stands, Hz
   */
  public Fid(
      double[] re, double[] im, double dwellSeconds, double startSeconds, double carrierHertz) {
    if (re.length != im.length || re.length == 0) {
      throw new IllegalArgumentException(
          "real and imaginary parts have " + re.length + " and " + im.length + " samples");
    }
    if (!(dwellSeconds > 0)) {
      throw new IllegalArgumentException("dwell time " + dwellSeconds + " s must be above 0 s");
    }
    this.re = re;
    this.im = im;
    this.dwellSeconds = dwellSeconds;
    this.startSeconds = startSeconds;
    this.carrierHertz = carrierHertz;
  }

  public int points() {
    return re.length;
  }

  /** The real parts, V; do not change. */
  public double[] re() {
    return re;
  }

  /** The imaginary parts, V; do not change. */
  public double[] im() {
    return im;
  }

  public double re(int k) {
    return re[k];
  }

  public double im(int k) {
    return im[k];
  }

  public double magnitude(int k) {
    return Math.hypot(re[k], im[k]);
  }

  public double dwellSeconds() {
    return dwellSeconds;
  }

  public double startSeconds() {
    return startSeconds;
  }

  public double carrierHertz() {
    return carrierHertz;
  }

  /** Time of sample k after time zero, s. */
  public double time(int k) {
    return startSeconds + k * dwellSeconds;
  }

  /** 1/dwell, Hz: the width of the complex spectrum. */
  public double widthHertz() {
    return 1 / dwellSeconds;
  }

  /** Samples {@code from} (inclusive) to {@code to} (exclusive) with the start time moved along. */
  public Fid slice(int from, int to) {
    if (from < 0 || to > re.length || from >= to) {
      throw new IllegalArgumentException(
          "samples " + from + ".." + to + " are not within 0.." + re.length);
    }
    double[] r = java.util.Arrays.copyOfRange(re, from, to);
    double[] i = java.util.Arrays.copyOfRange(im, from, to);
    return new Fid(r, i, dwellSeconds, time(from), carrierHertz);
  }
}
