package coilside.board.simulated;

import coilside.shot.Shot;
import java.util.List;

/**
 * What the firmware plays a shot on: whatever stands behind the board's own logic, up to and
 * including its ADC.
 */
public interface FirmwareReceiver {
  /**
   * Plays one scan, rest included.
   *
   * @return one entry a receive window of the flat shot, in order
   */
  List<Counts> play(Shot shot);

  /** Lets time pass in which nothing is played, s. */
  void idle(double seconds);

  /** What the board's thermometer shows, degree Celsius. */
  double temperatureCelsius();

  /**
   * ADC counts of one window in the convention of the signal package, I + iQ, not yet rounded or
   * clipped. A board with real samples gives its real samples in {@code i} and an empty {@code q}.
   *
   * @param i in-phase counts
   * @param q quadrature counts, same length; empty for real samples
   */
  record Counts(double[] i, double[] q) {
    public Counts {
      if (q.length != i.length && q.length != 0) {
        throw new IllegalArgumentException(i.length + " in-phase and " + q.length + " quadrature");
      }
    }
  }
}
