package coilside.signal;

/**
 * From real samples of a direct-sampling board to a complex FID: mixing with exp(-2 pi i f t), a
 * linear-phase low-pass filter, keeping one sample in so many.
 *
 * <p>The filter is a windowed sinc (Kaiser, 80 dB stop band), its cut-off at half the new rate with
 * a transition of a fifth of it. Only outputs whose whole filter lies within the record are kept,
 * and the delay is in the new start time: a real A cos(2 pi f t + phi) becomes A exp(i phi) exp(2
 * pi i (f - mix) t) at the same t.
 */
public final class DownConversion {
  private final double sampleSeconds;
  private final double mixHertz;
  private final int keepOneIn;
  private final double[] taps;

  /**
   * @param sampleSeconds time between real samples, s
   * @param mixHertz frequency moved to zero, Hz (an alias of the carrier where it is undersampled)
   * @param keepOneIn decimation, &gt;= 2
   */
  public DownConversion(double sampleSeconds, double mixHertz, int keepOneIn) {
    if (!(sampleSeconds > 0) || !Double.isFinite(mixHertz) || keepOneIn < 2) {
      throw new IllegalArgumentException(
          "down-conversion of samples every "
              + sampleSeconds
              + " s at "
              + mixHertz
              + " Hz keeping one in "
              + keepOneIn
              + ": the interval must be above 0 s and the factor at least 2");
    }
    this.sampleSeconds = sampleSeconds;
    this.mixHertz = mixHertz;
    this.keepOneIn = keepOneIn;
    this.taps = lowPass(keepOneIn);
  }

  private static double[] lowPass(int factor) {
    double attenuation = 80;
    double transition = 0.2 / factor;
    int length = (int) Math.ceil((attenuation - 7.95) / (14.36 * transition)) | 1;
    double beta = 0.1102 * (attenuation - 8.7);
    double cut = 0.45 / factor;
    double[] h = new double[length];
    double middle = (length - 1) / 2.0;
    double sum = 0;
    for (int k = 0; k < length; k++) {
      double x = k - middle;
      double sinc = x == 0 ? 2 * cut : Math.sin(2 * Math.PI * cut * x) / (Math.PI * x);
      double r = x / middle;
      h[k] = sinc * bessel(beta * Math.sqrt(Math.max(0, 1 - r * r))) / bessel(beta);
      sum += h[k];
    }
    for (int k = 0; k < length; k++) {
      h[k] /= sum;
    }
    return h;
  }

  /** The modified Bessel function of order zero, by its series. */
  private static double bessel(double x) {
    double term = 1;
    double sum = 1;
    for (int k = 1; k < 60; k++) {
      term *= x * x / (4.0 * k * k);
      sum += term;
    }
    return sum;
  }

  /** How many real samples {@code points} complex ones need. */
  public int samplesNeeded(int points) {
    return (points - 1) * keepOneIn + taps.length;
  }

  /** Time by which the first kept sample lies after the first real one, s. */
  public double delaySeconds() {
    return (taps.length - 1) / 2.0 * sampleSeconds;
  }

  /** Dwell time of the complex samples, s. */
  public double dwellSeconds() {
    return keepOneIn * sampleSeconds;
  }

  /** Two-sided noise bandwidth of the complex samples, Hz. */
  public double noiseBandwidthHertz() {
    double sum = 0;
    for (double h : taps) {
      sum += h * h;
    }
    return sum / sampleSeconds;
  }

  /**
   * Converts one record.
   *
   * @param samples real samples, V
   * @param startSeconds time of the first real sample after time zero, s
   * @param carrierHertz frequency at which offset 0 stands, Hz
   * @throws IllegalArgumentException when the record is shorter than the filter
   */
  public Fid convert(double[] samples, double startSeconds, double carrierHertz) {
    int points = (samples.length - taps.length) / keepOneIn + 1;
    if (samples.length < taps.length) {
      throw new IllegalArgumentException(
          samples.length
              + " real samples are fewer than the filter's "
              + taps.length
              + ": receive longer");
    }
    double[] mixedRe = new double[samples.length];
    double[] mixedIm = new double[samples.length];
    double turnsPerSample = mixHertz * sampleSeconds;
    double turnsAtStart = mixHertz * startSeconds;
    for (int k = 0; k < samples.length; k++) {
      double turns = turnsAtStart + k * turnsPerSample;
      double angle = -2 * Math.PI * (turns - Math.rint(turns));
      mixedRe[k] = 2 * samples[k] * Math.cos(angle);
      mixedIm[k] = 2 * samples[k] * Math.sin(angle);
    }
    double[] re = new double[points];
    double[] im = new double[points];
    for (int p = 0; p < points; p++) {
      double r = 0;
      double i = 0;
      int from = p * keepOneIn;
      for (int j = 0; j < taps.length; j++) {
        r += taps[j] * mixedRe[from + j];
        i += taps[j] * mixedIm[from + j];
      }
      re[p] = r;
      im[p] = i;
    }
    return new Fid(re, im, dwellSeconds(), startSeconds + delaySeconds(), carrierHertz);
  }
}
