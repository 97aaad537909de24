package coilside.board.wire;

/**
 * Mixes real samples down to complex ones at zero frequency, filters and decimates them.
 *
 * <p>Input sample n is Re(s exp(2 pi i f n / r)) with s the complex signal, f the intermediate
 * frequency and r the rate; output is s, one point every {@code decimation} samples. The filter is
 * a root-raised-cosine of roll-off 0.5 that is 8 output points long: its autocorrelation is zero at
 * whole output points, so that white noise stays white and keeps its density - the noise bandwidth
 * is the width of the output spectrum, 1/dwell, within a percent - and its passband is flat over
 * the middle half of that width.
 *
 * <p>The filter is symmetric, so its delay is exactly 4 output points; only points that see the
 * whole filter are given out, so that a window of n points yields n - 7, the first of them at
 * {@link #firstSample()}.
 *
 * <p>Source of the filter's impulse response: the inverse transform of the square root of the
 * raised-cosine spectrum, as in J. G. Proakis, Digital Communications (from memory); checked by its
 * Nyquist property.
 */
public final class DownConversion {
  private static final double ROLL_OFF = 0.5;
  private static final int HALF_SPAN = 4;

  private final int decimation;
  private final double turnsPerSample;
  private final boolean inverted;
  private final double[] taps;

  /**
   * @param rateHertz real samples a second
   * @param intermediateHertz where the carrier appears, Hz; above half the rate it is folded back
   * @param decimation real samples an output point, &gt;= 2
   */
  public DownConversion(double rateHertz, double intermediateHertz, int decimation) {
    if (decimation < 2) {
      throw new IllegalArgumentException(
          "a dwell time of " + decimation + " real samples; at least 2 are needed");
    }
    this.decimation = decimation;
    double turns = intermediateHertz / rateHertz;
    double folded = turns - Math.floor(turns);
    this.inverted = folded > 0.5;
    this.turnsPerSample = inverted ? 1 - folded : folded;
    this.taps = taps(decimation);
  }

  /** How many points come out of a window of this many output points' length. */
  public static int pointsOut(int windowPoints) {
    return Math.max(0, windowPoints - 2 * HALF_SPAN + 1);
  }

  /** The input sample (not always a whole one) at whose time the first output point stands. */
  public double firstSample() {
    return (taps.length - 1) / 2.0;
  }

  /** Bandwidth of white noise that the output holds, Hz. */
  public double noiseBandwidthHertz(double rateHertz) {
    double sum = 0;
    double squares = 0;
    for (double tap : taps) {
      sum += tap;
      squares += tap * tap;
    }
    return rateHertz * squares / (sum * sum);
  }

  /**
   * Converts one window.
   *
   * @param samples real samples
   * @param count how many of them
   * @param re gets the real parts
   * @param im gets the imaginary parts
   * @return how many points came out
   */
  public int convert(double[] samples, int count, double[] re, double[] im) {
    double[] mixedRe = new double[count];
    double[] mixedIm = new double[count];
    for (int n = 0; n < count; n++) {
      double turns = turnsPerSample * n;
      double angle = 2 * Math.PI * (turns - Math.rint(turns));
      mixedRe[n] = 2 * samples[n] * Math.cos(angle);
      mixedIm[n] = -2 * samples[n] * Math.sin(angle);
    }
    int out = 0;
    for (int from = 0; from + taps.length <= count && out < re.length; from += decimation) {
      double a = 0;
      double b = 0;
      for (int k = 0; k < taps.length; k++) {
        a += taps[k] * mixedRe[from + k];
        b += taps[k] * mixedIm[from + k];
      }
      re[out] = a;
      im[out] = inverted ? -b : b;
      out++;
    }
    return out;
  }

  private static double[] taps(int decimation) {
    double[] out = new double[2 * HALF_SPAN * decimation];
    double middle = (out.length - 1) / 2.0;
    double sum = 0;
    for (int k = 0; k < out.length; k++) {
      out[k] = rootRaisedCosine((k - middle) / decimation);
      sum += out[k];
    }
    for (int k = 0; k < out.length; k++) {
      out[k] /= sum;
    }
    return out;
  }

  /** Impulse response at time t in output points. */
  private static double rootRaisedCosine(double t) {
    double b = ROLL_OFF;
    if (Math.abs(t) < 1e-9) {
      return 1 - b + 4 * b / Math.PI;
    }
    if (Math.abs(Math.abs(4 * b * t) - 1) < 1e-9) {
      double x = Math.PI / (4 * b);
      return b / Math.sqrt(2) * ((1 + 2 / Math.PI) * Math.sin(x) + (1 - 2 / Math.PI) * Math.cos(x));
    }
    double top = Math.sin(Math.PI * t * (1 - b)) + 4 * b * t * Math.cos(Math.PI * t * (1 + b));
    return top / (Math.PI * t * (1 - 16 * b * b * t * t));
  }
}
