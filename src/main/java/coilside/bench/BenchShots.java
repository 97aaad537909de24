package coilside.bench;

import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.shot.Wait;
import java.util.List;

/** The shots of the ladder with the bench's settings filled in. */
final class BenchShots {
  /** Record length while T2* is unknown, s. */
  static final double FIRST_SECONDS = 15e-3;

  static final int FIRST_POINTS = 4096;

  private BenchShots() {}

  /** One pulse on the resonance as it is known, and a window as T2* advises. */
  static Shot single(Acquisition a, double gain, double pulse, double phase, double rest) {
    return single(a, Choices.carrier(a), gain, pulse, phase, rest);
  }

  static Shot single(
      Acquisition a, double carrier, double gain, double pulse, double phase, double rest) {
    Choices.Window w = Choices.window(a.limits(), FIRST_SECONDS, FIRST_POINTS);
    return single(a, carrier, gain, pulse, phase, rest, Choices.delay(a), w);
  }

  static Shot single(
      Acquisition a,
      double carrier,
      double gain,
      double pulse,
      double phase,
      double rest,
      double delay,
      Choices.Window window) {
    return new Shot(
        carrier,
        gain,
        rest,
        List.of(
            new Pulse(pulse, phase, Choices.amplitude(a)),
            new Wait(delay),
            new Receive(window.points(), window.dwellSeconds(), 0)));
  }

  /**
   * The phase of the next scan of a run whose pulses alternate: an error of the DC offset then
   * changes its sign from scan to scan instead of passing for signal.
   */
  static double alternate(Acquisition a) {
    return a.scans().size() % 2 * Math.PI;
  }

  /** The phase of the last pulse of a shot, the one that is read, rad. */
  static double readingPhase(Shot shot) {
    double phase = 0;
    for (coilside.shot.Step step : shot.flat()) {
      if (step instanceof Pulse pulse) {
        phase = pulse.phaseRadians();
      }
    }
    return phase;
  }

  /** The phase of the first pulse of a shot, rad. */
  static double firstPhase(Shot shot) {
    return shot.flat().stream()
        .filter(Pulse.class::isInstance)
        .mapToDouble(s -> ((Pulse) s).phaseRadians())
        .findFirst()
        .orElse(0);
  }
}
