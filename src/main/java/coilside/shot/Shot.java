package coilside.shot;

import java.util.ArrayList;
import java.util.List;

/**
 * What a board plays for one scan, with the settings it is played at: pure data.
 *
 * <p>The scan starts with {@code restSeconds} in which the spins recover, then come the steps in
 * order, each starting where the one before it ended. The repetition time of back-to-back scans is
 * therefore {@link #seconds()}.
 *
 * @param carrierHertz carrier frequency, Hz
 * @param gainDecibels receiver gain, dB
 * @param restSeconds wait before the first step, s
 * @param steps pulses, waits, receive windows and repeats
 */
public record Shot(double carrierHertz, double gainDecibels, double restSeconds, List<Step> steps) {
  public Shot {
    if (!(carrierHertz > 0) || !Double.isFinite(carrierHertz)) {
      throw new IllegalArgumentException("carrier " + carrierHertz + " Hz must be above 0 Hz");
    }
    if (!Double.isFinite(gainDecibels)) {
      throw new IllegalArgumentException("receiver gain " + gainDecibels + " dB is not a number");
    }
    if (!(restSeconds >= 0) || !Double.isFinite(restSeconds)) {
      throw new IllegalArgumentException("rest of " + restSeconds + " s must be 0 s or more");
    }
    steps = List.copyOf(steps);
    if (steps.isEmpty()) {
      throw new IllegalArgumentException("a shot needs at least one step");
    }
  }

  /** The whole length of the scan, rest included, s. */
  public double seconds() {
    return restSeconds + playedSeconds();
  }

  /** The length of the steps without the rest, s. */
  public double playedSeconds() {
    return steps.stream().mapToDouble(Step::seconds).sum();
  }

  /** The steps with every repeat written out. */
  public List<Step> flat() {
    List<Step> out = new ArrayList<>();
    flatten(steps, out);
    return out;
  }

  private static void flatten(List<Step> steps, List<Step> out) {
    for (Step step : steps) {
      if (step instanceof Repeat repeat) {
        for (int i = 0; i < repeat.count(); i++) {
          flatten(repeat.steps(), out);
        }
      } else {
        out.add(step);
      }
    }
  }

  /** True when nothing is transmitted. */
  public boolean receiveOnly() {
    return flat().stream().noneMatch(Pulse.class::isInstance);
  }

  public Shot withRest(double seconds) {
    return new Shot(carrierHertz, gainDecibels, seconds, steps);
  }

  public Shot withCarrier(double hertz) {
    return new Shot(hertz, gainDecibels, restSeconds, steps);
  }

  public Shot withGain(double decibels) {
    return new Shot(carrierHertz, decibels, restSeconds, steps);
  }
}
