package coilside.shot;

/**
 * A receive window: {@code points} complex samples, one every {@code dwellSeconds}. The first
 * sample is taken at the start of the window.
 *
 * @param points number of complex samples, &gt;= 1
 * @param dwellSeconds dwell time, s
 * @param phaseRadians receiver reference phase, rad; the signal is multiplied by exp(-i phase)
 */
public record Receive(int points, double dwellSeconds, double phaseRadians) implements Step {
  public Receive {
    if (points < 1) {
      throw new IllegalArgumentException("a receive window of " + points + " points is empty");
    }
    if (!(dwellSeconds > 0) || !Double.isFinite(dwellSeconds)) {
      throw new IllegalArgumentException("dwell time " + dwellSeconds + " s must be above 0 s");
    }
    if (!Double.isFinite(phaseRadians)) {
      throw new IllegalArgumentException("receiver phase " + phaseRadians + " is not a number");
    }
  }

  @Override
  public double seconds() {
    return points * dwellSeconds;
  }
}
