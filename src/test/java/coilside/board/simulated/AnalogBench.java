package coilside.board.simulated;

import coilside.shot.Shot;
import java.util.List;

/**
 * What stands between a board's outputs and its ADC: spins, coil, duplexer, preamplifier. Signals
 * are voltages at the receiver input, noise included, before gain.
 */
public interface AnalogBench {
  /**
   * Plays one scan, rest included.
   *
   * @return one entry a receive window of the flat shot, in order
   */
  List<Trace> play(Shot shot);

  /** Lets time pass in which nothing is played, s. */
  void idle(double seconds);

  /** Temperature of the magnet, degree Celsius. */
  double temperatureCelsius();

  /**
   * Complex samples of one window, V, in the convention of the signal package.
   *
   * @param re real part, one a point of the window
   * @param im imaginary part, same length
   */
  record Trace(double[] re, double[] im) {
    public Trace {
      if (re.length != im.length) {
        throw new IllegalArgumentException(re.length + " real and " + im.length + " imaginary");
      }
    }
  }
}
