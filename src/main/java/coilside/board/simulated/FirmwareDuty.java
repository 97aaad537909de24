package coilside.board.simulated;

import coilside.board.BoardLimits;
import coilside.shot.Pulse;
import coilside.shot.Shot;
import coilside.shot.Step;
import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Deque;
import java.util.List;
import java.util.Locale;

/**
 * The board's own watch over its transmitter: a run that would keep it on for more than the board's
 * share of any window of time is refused. Its time is the clock's or, where the board has played
 * ahead of the clock, that of what it has played.
 */
final class FirmwareDuty {
  private final double share;
  private final double windowSeconds;

  /** Start and end of each pulse that may still matter, s. */
  private final Deque<double[]> pulses = new ArrayDeque<>();

  private double free = Double.NEGATIVE_INFINITY;

  FirmwareDuty(BoardLimits limits) {
    this.share = limits.maxDutyCycle();
    this.windowSeconds = limits.dutyWindowSeconds();
  }

  /**
   * Takes a run or refuses it whole.
   *
   * @param nowSeconds the clock
   */
  void admit(Shot shot, long scans, double nowSeconds) throws FirmwareRefusal {
    double start = Math.max(nowSeconds, free);
    // The first window full of scans holds every way in which they can follow each other.
    long looked = Math.min(scans, 1 + (long) Math.ceil(windowSeconds / shot.seconds()));
    List<double[]> all = new ArrayList<>(pulses);
    for (long k = 0; k < looked; k++) {
      add(all, shot, start + k * shot.seconds());
    }
    double whole = 0;
    int oldest = 0;
    for (int i = 0; i < all.size(); i++) {
      whole += all.get(i)[1] - all.get(i)[0];
      double from = all.get(i)[1] - windowSeconds;
      for (; all.get(oldest)[1] <= from; oldest++) {
        whole -= all.get(oldest)[1] - all.get(oldest)[0];
      }
      double on = whole - Math.max(0, from - all.get(oldest)[0]);
      if (i >= pulses.size() && on > share * windowSeconds * (1 + 1e-6)) {
        throw FirmwareRefusal.conflict(
            String.format(
                Locale.ROOT,
                "transmitter on for %.4g %% of %.4g s, limit %.4g %%",
                100 * on / windowSeconds,
                windowSeconds,
                100 * share));
      }
    }
    for (long k = scans - looked; k < scans; k++) {
      List<double[]> one = new ArrayList<>();
      add(one, shot, start + k * shot.seconds());
      pulses.addAll(one);
    }
    free = start + scans * shot.seconds();
    while (!pulses.isEmpty() && pulses.peekFirst()[1] < free - windowSeconds) {
      pulses.removeFirst();
    }
  }

  /** A run was stopped: what it had not played yet does not count. */
  void stopped(double nowSeconds) {
    pulses.removeIf(p -> p[0] > nowSeconds);
    free = Math.min(free, nowSeconds);
  }

  private static void add(List<double[]> to, Shot shot, double start) {
    double t = start + shot.restSeconds();
    for (Step step : shot.flat()) {
      if (step instanceof Pulse pulse && pulse.amplitude() > 0) {
        to.add(new double[] {t, t + pulse.seconds()});
      }
      t += step.seconds();
    }
  }
}
