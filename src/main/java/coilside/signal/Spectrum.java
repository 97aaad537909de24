package coilside.signal;

/**
 * A complex spectrum, zero frequency in the middle: point k stands at offset {@code (k - n/2) *
 * stepHertz} from the carrier. Values in V s / s = V (the sum of the samples, not scaled by dwell).
 *
 * <p>The arrays are handed over by whoever made them and must not be changed afterwards.
 */
public final class Spectrum {
  private final double[] re;
  private final double[] im;
  private final double stepHertz;
  private final double carrierHertz;

  /**
   * @param re real part, length n &gt;= 1
   * @param im imaginary part, length n
   * @param stepHertz distance of two points, Hz
   * @param carrierHertz frequency of point n/2, Hz
   */
  public Spectrum(double[] re, double[] im, double stepHertz, double carrierHertz) {
    if (re.length != im.length || re.length == 0) {
      throw new IllegalArgumentException(
          "real and imaginary parts have " + re.length + " and " + im.length + " points");
    }
    this.re = re;
    this.im = im;
    this.stepHertz = stepHertz;
    this.carrierHertz = carrierHertz;
  }

  public int points() {
    return re.length;
  }

  public double[] re() {
    return re;
  }

  public double[] im() {
    return im;
  }

  public double magnitude(int k) {
    return Math.hypot(re[k], im[k]);
  }

  public double stepHertz() {
    return stepHertz;
  }

  public double carrierHertz() {
    return carrierHertz;
  }

  /** Offset of point k from the carrier, Hz. */
  public double offsetHertz(int k) {
    return (k - re.length / 2) * stepHertz;
  }
}
