package coilside.shot;

/**
 * A time in which nothing is sent or received.
 *
 * @param seconds length, s, &gt;= 0
 */
public record Wait(double seconds) implements Step {
  public Wait {
    if (!(seconds >= 0) || !Double.isFinite(seconds)) {
      throw new IllegalArgumentException("wait of " + seconds + " s must be 0 s or more");
    }
  }
}
