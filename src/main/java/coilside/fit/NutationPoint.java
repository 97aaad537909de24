package coilside.fit;

/**
 * The complex amplitude of one scan (or the mean of several) after a pulse of one width.
 *
 * @param pulseSeconds pulse width, s
 * @param re real part of the amplitude at the pulse's centre, V
 * @param im imaginary part, V
 * @param u standard uncertainty of each part, V; infinite for a scan that was played but whose
 *     amplitude is not used
 * @param recoverySeconds from the end of the pulse before to this pulse, s; infinite when the spins
 *     had recovered wholly
 * @param offsetHertz Larmor frequency less carrier, as read off the FIDs, Hz
 */
public record NutationPoint(
    double pulseSeconds,
    double re,
    double im,
    double u,
    double recoverySeconds,
    double offsetHertz) {

  /** A signed amplitude on resonance. */
  public static NutationPoint signed(
      double pulseSeconds, double amplitude, double u, double recoverySeconds) {
    return new NutationPoint(pulseSeconds, amplitude, 0, u, recoverySeconds, 0);
  }

  boolean usable() {
    return pulseSeconds > 0
        && Double.isFinite(pulseSeconds)
        && u > 0
        && recoverySeconds >= 0
        && Double.isFinite(offsetHertz)
        && (Double.isInfinite(u) || Double.isFinite(re) && Double.isFinite(im));
  }

  boolean counted() {
    return !Double.isInfinite(u);
  }
}
