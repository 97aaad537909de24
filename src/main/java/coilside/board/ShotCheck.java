package coilside.board;

import coilside.board.BoardException.OverLimit;
import coilside.board.BoardException.Refused;
import coilside.board.BoardLimits.Range;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Repeat;
import coilside.shot.Shot;
import coilside.shot.Step;
import coilside.shot.Wait;
import java.util.List;
import java.util.Locale;

/** Holds a shot against limits, all but the duty cycle. */
final class ShotCheck {
  /** Most steps a shot may have with its repeats written out, whatever the board allows. */
  static final long MOST_FLAT_STEPS = 2_000_000;

  private final BoardLimits limits;
  private long flatSteps;
  private long sentSteps;
  private long windows;
  private double receiveSeconds;

  private ShotCheck(BoardLimits limits) {
    this.limits = limits;
  }

  /** Throws for the first limit the shot breaks. */
  static void check(Shot shot, BoardLimits limits) throws BoardException {
    new ShotCheck(limits).run(shot);
  }

  private void run(Shot shot) throws BoardException {
    within("carrier", shot.carrierHertz(), limits.carrierHertz(), 1e-6, "MHz", "tune within it");
    within(
        "receiver gain", shot.gainDecibels(), limits.gainDecibels(), 1, "dB", "choose within it");
    if (shot.restSeconds() > 0) {
      within("rest", shot.restSeconds(), limits.restSeconds(), 1, "s", "choose within it");
    }
    steps(shot.steps(), 1);
    atMost("repeats written out make", flatSteps, MOST_FLAT_STEPS, "steps");
    atMost(
        "the shot has", limits.repeatLoops() ? sentSteps : flatSteps, limits.maxSteps(), "steps");
    atMost("the shot has", windows, limits.maxWindows(), "receive windows");
    if (receiveSeconds > limits.maxReceiveSeconds() * (1 + 1e-9)) {
      throw new OverLimit(
          String.format(
              Locale.ROOT,
              "receive time %s s is over the limit of %s s; take fewer points or a shorter dwell"
                  + " time. Nothing was sent.",
              text(receiveSeconds),
              text(limits.maxReceiveSeconds())));
    }
    if (windows == 0) {
      throw new Refused("the shot has no receive window, so nothing would come back; add one");
    }
    if (!limits.arbitraryShots()) {
      fixedShape(shot);
    }
  }

  private void steps(List<Step> steps, long times) throws BoardException {
    for (Step step : steps) {
      sentSteps++;
      if (step instanceof Repeat repeat) {
        sentSteps++;
        if (limits.repeatLoops()) {
          atMost("a repeat plays its steps", repeat.count(), limits.maxRepeats(), "times");
        }
        long inner = times * repeat.count();
        atMost("repeats written out make", inner, MOST_FLAT_STEPS, "steps");
        steps(repeat.steps(), inner);
      } else {
        flatSteps += times;
        one(step, times);
      }
    }
  }

  private void one(Step step, long times) throws OverLimit {
    if (step instanceof Pulse p) {
      within("pulse width", p.seconds(), limits.pulseSeconds(), 1e6, "us", "choose within it");
      within("pulse amplitude", p.amplitude(), limits.amplitude(), 1, "", "choose within it");
    } else if (step instanceof Wait w && w.seconds() > limits.waitSeconds().step() / 2) {
      within("wait", w.seconds(), limits.waitSeconds(), 1e6, "us", "choose within it");
    } else if (step instanceof Receive r) {
      within("dwell time", r.dwellSeconds(), limits.dwellSeconds(), 1e6, "us", "choose within it");
      if (r.points() < limits.minPoints() || r.points() > limits.maxPoints()) {
        throw new OverLimit(
            "a receive window of "
                + r.points()
                + " points is outside "
                + limits.minPoints()
                + " to "
                + limits.maxPoints()
                + " points; choose within it. Nothing was sent.");
      }
      windows += times;
      receiveSeconds += times * r.seconds();
    }
  }

  private void fixedShape(Shot shot) throws Refused {
    List<Step> steps = shot.flat();
    int at = 0;
    if (at < steps.size() && steps.get(at) instanceof Pulse) {
      at++;
    }
    if (at < steps.size() && steps.get(at) instanceof Wait) {
      at++;
    }
    boolean fits = at == steps.size() - 1 && steps.get(at) instanceof Receive;
    if (!fits) {
      long pulses = steps.stream().filter(Pulse.class::isInstance).count();
      throw new Refused(
          "this board plays only one pulse, a wait and one receive window; a shot with "
              + pulses
              + " pulses and "
              + windows
              + " receive windows needs a board that builds shots (T1 and T2 do). Nothing was"
              + " sent.");
    }
  }

  private static void within(
      String what, double value, Range range, double perUnit, String unit, String todo)
      throws OverLimit {
    if (range.contains(value)) {
      return;
    }
    String u = unit.isEmpty() ? "" : " " + unit;
    throw new OverLimit(
        what
            + " "
            + text(value * perUnit)
            + u
            + " is outside "
            + text(range.min() * perUnit)
            + u
            + " to "
            + text(range.max() * perUnit)
            + u
            + "; "
            + todo
            + ". Nothing was sent.");
  }

  private static void atMost(String what, long value, long limit, String unit) throws OverLimit {
    if (value > limit) {
      throw new OverLimit(
          what + " " + value + " " + unit + ", over the limit of " + limit + ". Nothing was sent.");
    }
  }

  /** At most ten significant digits, no trailing zeros. */
  static String text(double x) {
    return new java.math.BigDecimal(x)
        .round(new java.math.MathContext(10))
        .stripTrailingZeros()
        .toPlainString();
  }
}
