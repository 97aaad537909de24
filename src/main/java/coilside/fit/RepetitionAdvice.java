package coilside.fit;

/**
 * Which repetition time and flip angle give the best SNR for the time spent, and how long a wanted
 * SNR takes.
 *
 * <p>Steady state with no transverse magnetisation left at the next pulse: signal = sin(a) (1 -
 * E)/(1 - E cos(a)), E = exp(-TR/T1); largest at the Ernst angle cos(a) = E (Ernst and Anderson,
 * Rev. Sci. Instrum. 37, 93-102, 1966). With 90-degree pulses the SNR per root time is largest at
 * TR = 1.2564 T1.
 */
public final class RepetitionAdvice {
  /** TR/T1 that gives 90-degree pulses their best SNR per root time: e^x = 1 + 2 x. */
  public static final double BEST_REPETITION_90 = 1.2564312086261697;

  private RepetitionAdvice() {}

  /** The Ernst angle, rad. */
  public static double ernstAngle(double repetitionSeconds, double t1Seconds) {
    check(repetitionSeconds, t1Seconds);
    return Math.acos(Math.exp(-repetitionSeconds / t1Seconds));
  }

  /** Signal in the steady state over that of one 90-degree pulse on rested spins. */
  public static double signal(double repetitionSeconds, double t1Seconds, double flipRadians) {
    check(repetitionSeconds, t1Seconds);
    double e = Math.exp(-repetitionSeconds / t1Seconds);
    return Math.sin(flipRadians) * (1 - e) / (1 - e * Math.cos(flipRadians));
  }

  /**
   * What it takes.
   *
   * @param flipRadians flip angle, rad
   * @param repetitionSeconds repetition time, s
   * @param signal steady-state signal over that of rested spins
   * @param scans scans that reach the wanted SNR
   * @param seconds how long they take, s
   * @param gainOverFullRecovery SNR per root time over that of 90-degree pulses every 5 T1
   */
  public record Advice(
      double flipRadians,
      double repetitionSeconds,
      double signal,
      long scans,
      double seconds,
      double gainOverFullRecovery) {}

  /**
   * The best flip angle for a shot of a given length, and the time to a wanted SNR.
   *
   * @param shortestRepetitionSeconds the receive window and all else that a scan needs, s
   * @param t1Seconds T1, s
   * @param snrRested SNR of one scan with a 90-degree pulse on rested spins
   * @param wantedSnr the SNR wanted
   */
  public static Advice ernst(
      double shortestRepetitionSeconds, double t1Seconds, double snrRested, double wantedSnr) {
    return at(
        shortestRepetitionSeconds,
        ernstAngle(shortestRepetitionSeconds, t1Seconds),
        t1Seconds,
        snrRested,
        wantedSnr);
  }

  /** The best repetition time for 90-degree pulses, no shorter than given. */
  public static Advice ninety(
      double shortestRepetitionSeconds, double t1Seconds, double snrRested, double wantedSnr) {
    double repetition = Math.max(shortestRepetitionSeconds, BEST_REPETITION_90 * t1Seconds);
    return at(repetition, Math.PI / 2, t1Seconds, snrRested, wantedSnr);
  }

  /** What a given repetition time and flip angle take. */
  public static Advice at(
      double repetitionSeconds,
      double flipRadians,
      double t1Seconds,
      double snrRested,
      double wantedSnr) {
    if (!(snrRested > 0) || !(wantedSnr > 0)) {
      throw new IllegalArgumentException(
          "SNR " + snrRested + " and wanted SNR " + wantedSnr + " must be above 0");
    }
    double s = signal(repetitionSeconds, t1Seconds, flipRadians);
    double perScan = snrRested * s;
    double ratio = wantedSnr / perScan;
    long scans = (long) Math.max(1, Math.ceil(ratio * ratio - 1e-9));
    double full = signal(5 * t1Seconds, t1Seconds, Math.PI / 2) / Math.sqrt(5 * t1Seconds);
    return new Advice(
        flipRadians,
        repetitionSeconds,
        s,
        scans,
        scans * repetitionSeconds,
        s / Math.sqrt(repetitionSeconds) / full);
  }

  private static void check(double repetitionSeconds, double t1Seconds) {
    if (!(repetitionSeconds > 0) || !(t1Seconds > 0)) {
      throw new IllegalArgumentException(
          "repetition time "
              + repetitionSeconds
              + " s and T1 "
              + t1Seconds
              + " s must be above 0 s");
    }
  }
}
