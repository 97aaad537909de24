package coilside.bench;

import coilside.board.BoardLimits;

/** Settings chosen for a measurement from what is known, always within the board's grain. */
final class Choices {
  /** Receive delay while the ring-down is unknown, s: common practice, no source. */
  static final double CAUTIOUS_DELAY = 150e-6;

  /** Spectral width looked at while searching, Hz. */
  static final double WIDE_HERTZ = 200e3;

  private static final double GUESSED_PULSE = 15e-6;

  private Choices() {}

  static double carrier(Acquisition a) {
    return a.limits()
        .carrierHertz()
        .snap(
            a.known()
                .value(Rung.RESONANCE, "larmor_frequency")
                .orElse((a.settings().searchLowHertz() + a.settings().searchHighHertz()) / 2));
  }

  static double gain(Acquisition a) {
    BoardLimits.Range range = a.limits().gainDecibels();
    return range.snap(
        a.known()
            .value(Rung.GAIN, "receiver_gain")
            .orElse(range.min() + 0.6 * (range.max() - range.min())));
  }

  static double delay(Acquisition a) {
    return a.limits()
        .waitSeconds()
        .snap(a.known().value(Rung.RINGDOWN, "receive_delay").orElse(CAUTIOUS_DELAY));
  }

  /** A dwell time for a wide spectrum. */
  static double wideDwell(BoardLimits limits) {
    return limits.dwellSeconds().snap(1 / WIDE_HERTZ);
  }

  /** As many points as wanted, or as the board takes. */
  static int points(BoardLimits limits, int wanted) {
    return Math.max(limits.minPoints(), Math.min(limits.maxPoints(), wanted));
  }

  /** Points and dwell for a window of this length, with at most so many points. */
  static Window window(BoardLimits limits, double seconds, int mostPoints) {
    int most = Math.min(mostPoints, limits.maxPoints());
    double dwell = limits.dwellSeconds().snap(Math.max(1 / WIDE_HERTZ, seconds / most));
    while (seconds / dwell > most && dwell < limits.dwellSeconds().max()) {
      dwell =
          limits.dwellSeconds().snap(dwell + Math.max(limits.dwellSeconds().step(), dwell * 0.05));
    }
    int points = points(limits, (int) Math.ceil(seconds / dwell));
    return new Window(points, dwell);
  }

  /** A receive window's points and dwell time, s. */
  record Window(int points, double dwellSeconds) {}

  static double pulse(BoardLimits limits, double seconds) {
    return limits.pulseSeconds().snap(seconds);
  }

  /** The 90-degree pulse as the ladder knows it, on the board's grain, s. */
  static double pulse90(Acquisition a) {
    return pulse(a.limits(), a.known().need(Rung.NUTATION, "pulse_90"));
  }

  /** The same for live running, which may start on a cold bench: a useful flip for most coils. */
  static double pulse90OrGuess(Acquisition a) {
    return pulse(a.limits(), a.known().value(Rung.NUTATION, "pulse_90").orElse(GUESSED_PULSE));
  }

  static double amplitude(Acquisition a) {
    return a.limits().amplitude().snap(a.settings().amplitude());
  }

  static double rest(Acquisition a, double seconds) {
    return a.limits().waitSeconds().snap(seconds);
  }
}
