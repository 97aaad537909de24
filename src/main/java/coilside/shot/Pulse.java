package coilside.shot;

/**
 * A rectangular radio-frequency pulse.
 *
 * @param seconds width, s, &gt; 0
 * @param phaseRadians phase of the carrier during the pulse, rad
 * @param amplitude fraction of the board's full transmit amplitude, 0..1
 */
public record Pulse(double seconds, double phaseRadians, double amplitude) implements Step {
  public Pulse {
    if (!(seconds > 0) || !Double.isFinite(seconds)) {
      throw new IllegalArgumentException("pulse width " + seconds + " s must be above 0 s");
    }
    if (!Double.isFinite(phaseRadians)) {
      throw new IllegalArgumentException("pulse phase " + phaseRadians + " rad is not a number");
    }
    if (!(amplitude >= 0 && amplitude <= 1)) {
      throw new IllegalArgumentException("pulse amplitude " + amplitude + " must be 0..1");
    }
  }
}
