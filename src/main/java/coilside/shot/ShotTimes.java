package coilside.shot;

import java.util.ArrayList;
import java.util.List;

/** When what happens in a shot, and how long the transmitter is on. */
public final class ShotTimes {
  private ShotTimes() {}

  /**
   * For each receive window in the order taken: the time of its first sample after time zero, which
   * is the centre of the last pulse before it, or the window's own start where there was none; s.
   */
  public static double[] receiveStarts(Shot shot) {
    List<Double> starts = new ArrayList<>();
    double sinceCentre = Double.NaN;
    for (Step step : shot.flat()) {
      if (step instanceof Pulse) {
        sinceCentre = step.seconds() / 2;
        continue;
      }
      if (step instanceof Receive) {
        starts.add(Double.isNaN(sinceCentre) ? 0 : sinceCentre);
      }
      sinceCentre += step.seconds();
    }
    return starts.stream().mapToDouble(Double::doubleValue).toArray();
  }

  /** How long the transmitter is on, s; not weighted with the amplitude. */
  public static double transmitSeconds(Shot shot) {
    return shot.flat().stream().filter(Pulse.class::isInstance).mapToDouble(Step::seconds).sum();
  }

  /** How many receive windows the shot has, repeats written out. */
  public static int windows(Shot shot) {
    return (int) shot.flat().stream().filter(Receive.class::isInstance).count();
  }
}
