package coilside.spin;

/**
 * Trains of equal pulses at a constant repetition time, the transverse magnetisation gone before
 * each (R. R. Ernst and W. A. Anderson, Rev. Sci. Instrum. 37, 93-102, 1966).
 *
 * <p>With E1 = exp(-TR/T1) and flip angle a, the magnetisation before each pulse is (1 - E1)/(1 -
 * E1 cos a), the signal that times sin a.
 */
public final class SteadyState {
  private SteadyState() {}

  /** Longitudinal magnetisation right before a pulse of the train, 1 when fully recovered. */
  public static double longitudinal(
      double flipRadians, double repetitionSeconds, double t1Seconds) {
    // expm1 keeps the digits where the repetition time is short.
    double recovered = -Math.expm1(-repetitionSeconds / t1Seconds);
    return recovered / (1 - (1 - recovered) * Math.cos(flipRadians));
  }

  /** Signal of each pulse of the train, 1 for 90 degrees on recovered spins. */
  public static double signal(double flipRadians, double repetitionSeconds, double t1Seconds) {
    return Math.sin(flipRadians) * longitudinal(flipRadians, repetitionSeconds, t1Seconds);
  }

  /** The flip angle of the largest signal at this repetition time, rad: cos a = exp(-TR/T1). */
  public static double ernstAngle(double repetitionSeconds, double t1Seconds) {
    return Math.acos(Math.exp(-repetitionSeconds / t1Seconds));
  }

  /**
   * Longitudinal magnetisation right before pulse number {@code pulse} (from 0) of a train that
   * starts with {@code start}.
   */
  public static double approach(
      double start, int pulse, double flipRadians, double repetitionSeconds, double t1Seconds) {
    double settled = longitudinal(flipRadians, repetitionSeconds, t1Seconds);
    double factor = Math.cos(flipRadians) * Math.exp(-repetitionSeconds / t1Seconds);
    return settled + (start - settled) * Math.pow(factor, pulse);
  }
}
