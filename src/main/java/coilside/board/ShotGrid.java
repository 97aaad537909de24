package coilside.board;

import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Repeat;
import coilside.shot.Shot;
import coilside.shot.Step;
import coilside.shot.Wait;
import java.util.ArrayList;
import java.util.List;

/**
 * Puts a shot on the board's grain: every carrier, gain, width, amplitude, wait and dwell time
 * becomes the nearest value the board can play. Waits of no length disappear. Values outside a
 * range stay outside, for the guard to refuse.
 */
public final class ShotGrid {
  private ShotGrid() {}

  /** The shot as the board will play it. */
  public static Shot onGrid(Shot shot, BoardLimits limits) {
    return new Shot(
        round(shot.carrierHertz(), limits.carrierHertz().step()),
        round(shot.gainDecibels(), limits.gainDecibels().step()),
        round(shot.restSeconds(), limits.restSeconds().step()),
        steps(shot.steps(), limits));
  }

  private static List<Step> steps(List<Step> steps, BoardLimits limits) {
    List<Step> out = new ArrayList<>(steps.size());
    for (Step step : steps) {
      if (step instanceof Pulse p) {
        double width = round(p.seconds(), limits.pulseSeconds().step());
        out.add(
            new Pulse(
                width > 0 ? width : p.seconds(),
                p.phaseRadians(),
                Math.min(1, round(p.amplitude(), limits.amplitude().step()))));
      } else if (step instanceof Wait w) {
        double wait = round(w.seconds(), limits.waitSeconds().step());
        if (wait > 0) {
          out.add(new Wait(wait));
        }
      } else if (step instanceof Receive r) {
        double dwell = round(r.dwellSeconds(), limits.dwellSeconds().step());
        out.add(new Receive(r.points(), dwell > 0 ? dwell : r.dwellSeconds(), r.phaseRadians()));
      } else if (step instanceof Repeat repeat) {
        List<Step> inner = steps(repeat.steps(), limits);
        if (!inner.isEmpty()) {
          out.add(new Repeat(repeat.count(), inner));
        }
      }
    }
    return out.isEmpty() ? steps : out;
  }

  /** Dividing by the whole number of steps in one unit avoids 1.0000000000000001e-5. */
  private static double round(double x, double step) {
    if (!(step > 0)) {
      return x;
    }
    double n = Math.rint(x / step);
    double perUnit = Math.rint(1 / step);
    return perUnit >= 1 && Math.abs(perUnit * step - 1) < 1e-9 ? n / perUnit : n * step;
  }
}
