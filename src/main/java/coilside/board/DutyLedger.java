package coilside.board;

import coilside.shot.Pulse;
import coilside.shot.Shot;
import coilside.shot.Step;
import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Deque;
import java.util.List;

/**
 * When the transmitter was on, as far back as the duty window reaches.
 *
 * <p>Time is the later of the clock and the end of what has been played: a board that plays faster
 * than the clock (a simulated one) is charged by its own time, a real one by the clock.
 */
final class DutyLedger {
  private record On(double from, double to) {}

  private final double windowSeconds;
  private final Deque<On> played = new ArrayDeque<>();
  private double endSeconds = Double.NEGATIVE_INFINITY;

  DutyLedger(double windowSeconds) {
    this.windowSeconds = windowSeconds;
  }

  /**
   * The largest share of any window ending in this shot during which the transmitter would be on.
   *
   * @param nowSeconds the clock, s
   */
  double worstShare(Shot shot, double nowSeconds) {
    double start = start(nowSeconds);
    List<On> all = new ArrayList<>(played);
    all.removeIf(on -> on.to() < start - windowSeconds);
    int first = all.size();
    all.addAll(pulses(shot, start));
    double worst = 0;
    double sum = 0;
    int oldest = 0;
    for (int i = 0; i < all.size(); i++) {
      On on = all.get(i);
      sum += on.to() - on.from();
      double from = on.to() - windowSeconds;
      while (all.get(oldest).to() <= from) {
        sum -= all.get(oldest).to() - all.get(oldest).from();
        oldest++;
      }
      if (i >= first) {
        double cut = Math.max(0, from - all.get(oldest).from());
        worst = Math.max(worst, (sum - cut) / windowSeconds);
      }
    }
    return worst;
  }

  /** Charges a shot that is about to be played. */
  void charge(Shot shot, double nowSeconds) {
    double start = start(nowSeconds);
    played.addAll(pulses(shot, start));
    endSeconds = start + shot.seconds();
    while (!played.isEmpty() && played.peekFirst().to() < endSeconds - windowSeconds) {
      played.removeFirst();
    }
  }

  private double start(double nowSeconds) {
    return Math.max(nowSeconds, endSeconds);
  }

  private static List<On> pulses(Shot shot, double start) {
    List<On> out = new ArrayList<>();
    double t = start + shot.restSeconds();
    for (Step step : shot.flat()) {
      if (step instanceof Pulse p && p.amplitude() > 0) {
        out.add(new On(t, t + p.seconds()));
      }
      t += step.seconds();
    }
    return out;
  }
}
