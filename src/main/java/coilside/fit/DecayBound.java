package coilside.fit;

/**
 * The Cramer-Rao bound for one decaying exponential in complex white noise: no unbiased estimator
 * does better.
 *
 * <p>s_n = A exp(i phi) exp((i omega - alpha) t_n), t_n = n dwell, alpha = 1/T2*, noise sigma in
 * each real channel. With w_n = exp(-2 alpha t_n), S_k = sum t_n^k w_n, D = S0 S2 - S1^2: var alpha
 * = var omega = sigma^2 S0/(A^2 D), var A = sigma^2 S2/D, sd phi = sd A/A (A at the first sample).
 * Source: Yao and Pandit, "Cramer-Rao lower bounds for a damped sinusoidal process", IEEE Trans.
 * Signal Process. 43, 878-885 (1995).
 *
 * @param t2Star standard deviation of T2*, over T2*
 * @param offsetHertz standard deviation of the frequency, Hz
 * @param amplitude standard deviation of A, over A
 * @param phaseRadians standard deviation of the phase at the first sample, rad
 */
public record DecayBound(double t2Star, double offsetHertz, double amplitude, double phaseRadians) {

  /**
   * The exact bound, by the sums over all samples.
   *
   * @param snr A/sigma, A at the first sample
   */
  public static DecayBound exact(
      double snr, double t2StarSeconds, double dwellSeconds, int points) {
    check(snr, t2StarSeconds, dwellSeconds);
    double a = dwellSeconds / t2StarSeconds;
    double s0 = 0;
    double s1 = 0;
    double s2 = 0;
    for (int n = 0; n < points; n++) {
      double w = Math.exp(-2 * a * n);
      s0 += w;
      s1 += n * w;
      s2 += (double) n * n * w;
    }
    double d = s0 * s2 - s1 * s1;
    double rate = Math.sqrt(s0 / d) / (snr * dwellSeconds);
    double amplitude = Math.sqrt(s2 / d) / snr;
    return new DecayBound(rate * t2StarSeconds, rate / (2 * Math.PI), amplitude, amplitude);
  }

  /**
   * sd(T2*)/T2* in closed form for a dwell time much shorter than T2*: sqrt(8 dwell/T2*)/SNR times
   * {@link #recordFactor}.
   */
  public static double relativeT2Star(
      double snr, double t2StarSeconds, double dwellSeconds, double recordSeconds) {
    check(snr, t2StarSeconds, dwellSeconds);
    return Math.sqrt(8 * dwellSeconds / t2StarSeconds)
        / snr
        * recordFactor(recordSeconds / t2StarSeconds);
  }

  /** What a record of this many T2* costs over an endless one, &gt;= 1. */
  public static double recordFactor(double recordOverT2Star) {
    double u = 2 * recordOverT2Star;
    if (!(u > 0)) {
      throw new IllegalArgumentException(
          "a record of " + recordOverT2Star + " T2* must be longer than 0");
    }
    if (u > 200) {
      return 1;
    }
    if (u < 0.02) {
      // Series of numerator u and denominator u^4/12, which cancel badly in the closed form.
      return Math.sqrt(12 / (u * u * u));
    }
    double e = Math.exp(-u);
    return Math.sqrt((1 - e) / (1 - (2 + u * u) * e + e * e));
  }

  /**
   * Scans that bring sd(T2*)/T2* to a target, from the SNR of one scan; at least 1.
   *
   * @param snr A/sigma of one scan
   */
  public static long scansFor(
      double target, double snr, double t2StarSeconds, double dwellSeconds, double recordSeconds) {
    double one = relativeT2Star(snr, t2StarSeconds, dwellSeconds, recordSeconds);
    return Math.max(1, (long) Math.ceil(one * one / (target * target)));
  }

  private static void check(double snr, double t2StarSeconds, double dwellSeconds) {
    if (!(snr > 0) || !(t2StarSeconds > 0) || !(dwellSeconds > 0)) {
      throw new IllegalArgumentException(
          "SNR "
              + snr
              + ", T2* "
              + t2StarSeconds
              + " s and dwell time "
              + dwellSeconds
              + " s must all be above 0");
    }
  }
}
