package coilside.bench;

import coilside.board.BoardException;
import coilside.board.BoardLimits;
import coilside.fit.EchoTrainFit;
import coilside.fit.NotDetermined;
import coilside.quantity.Measured;
import coilside.quantity.Unit;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.shot.Step;
import coilside.shot.Wait;
import coilside.signal.Averager;
import coilside.signal.Fid;
import coilside.signal.MatchedProjection;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.TreeMap;

/**
 * T2 by single echoes, for boards with too few receive windows for a train: one echo a scan, the
 * echo time different from scan to scan, the first pulse's phase alternating so that what an
 * imperfect refocusing pulse excites drops out.
 */
final class SingleEchoes {
  static final String NOTE = "single_echoes";
  private static final int TIMES = 10;

  /** Rest before a scan in T1: what is missing to recovery differs with the echo time. */
  private static final double REST_IN_T1 = 9;

  private static final double LONGEST_IN_T1 = 1.5;
  private static final double SHORTEST_IN_T2STAR = 6;
  private static final double HALF_WINDOW_IN_T2STAR = 2;
  private static final int MOST_POINTS = 2048;

  private SingleEchoes() {}

  static void acquire(Acquisition a) throws BoardException, NotMeasurable {
    double t1 = a.known().need(Rung.T1, "t1");
    double t2Star = a.known().value(Rung.T2STAR, "t2_star").orElse(2e-3);
    double target = a.settings().t2Target();
    a.note(NOTE, 1);
    a.note("target", target);
    a.plan(2 * TIMES + 1);
    double rest = Choices.rest(a, REST_IN_T1 * t1);
    double low = SHORTEST_IN_T2STAR * t2Star;
    double high = Math.max(2 * low, LONGEST_IN_T1 * t1);
    Quiet.play(a, shot(a, low, t2Star, 0, rest));
    do {
      for (int k = 0; k < TIMES; k++) {
        double echo = low * Math.pow(high / low, k / (TIMES - 1.0));
        for (int turn = 0; turn < 2; turn++) {
          double phase = BenchShots.phase(a, turn * Math.PI);
          a.play(shot(a, echo, t2Star, phase, rest));
          a.step("T2", Math.min(0.95, (a.scans().size() - 1) / (2.0 * TIMES)));
        }
      }
    } while (a.scansLeft() >= 2 * TIMES && !reached(a, target));
  }

  private static boolean reached(Acquisition a, double target) {
    try {
      Reading reading = read(a.capture(Rung.T2));
      a.show(reading.picture());
      return reading.value("t2").relative() <= target;
    } catch (NotMeasurable e) {
      return false;
    }
  }

  /** 90 degrees, half the echo time, 180 degrees, and a window with the echo in its middle. */
  private static Shot shot(Acquisition a, double echo, double t2Star, double phase, double rest) {
    BoardLimits limits = a.limits();
    double p90 = Choices.pulse90(a);
    double p180 = Choices.pulse(limits, a.known().need(Rung.NUTATION, "pulse_180"));
    Choices.Window w = Choices.window(limits, 2 * HALF_WINDOW_IN_T2STAR * t2Star, MOST_POINTS);
    double half = w.points() * w.dwellSeconds() / 2;
    double open = Choices.rest(a, Math.max(Choices.delay(a), echo / 2 - p180 / 2 - half));
    double before = Choices.rest(a, open + half + p180 / 2 - (p90 + p180) / 2);
    double amplitude = Choices.amplitude(a);
    return new Shot(
        Choices.carrier(a),
        Choices.gain(a),
        rest,
        List.of(
            new Pulse(p90, phase, amplitude),
            new Wait(before),
            new Pulse(p180, BenchShots.phase(a, Math.PI / 2), amplitude),
            new Wait(open),
            new Receive(w.points(), w.dwellSeconds(), 0)));
  }

  /** From the first pulse's centre to the echo: twice the time between the pulses' centres, s. */
  private static double echoSeconds(Shot shot) {
    List<Step> steps = shot.flat();
    return 2 * (steps.get(0).seconds() / 2 + steps.get(1).seconds() + steps.get(2).seconds() / 2);
  }

  static Reading read(Capture capture) throws NotMeasurable {
    Quiet quiet = Quiet.of(capture.shots(), capture.scans());
    Map<Double, Averager> byTime = new TreeMap<>();
    for (int i = 0; i < capture.shots().size(); i++) {
      Shot shot = capture.shots().get(i);
      if (!shot.receiveOnly()) {
        byTime
            .computeIfAbsent(echoSeconds(shot), t -> new Averager())
            .add(quiet.strip(capture.scans().get(i).fid()), BenchShots.firstPhase(shot));
      }
    }
    List<Fid> echoes = byTime.values().stream().map(Averager::mean).toList();
    double sigma = quiet.sigma() / Math.sqrt(byTime.values().iterator().next().count());
    MatchedProjection p = MatchedProjection.bySingularVector(echoes, sigma);
    double[] t = byTime.keySet().stream().mapToDouble(Double::doubleValue).toArray();
    double[] re = new double[t.length];
    double[] im = new double[t.length];
    double[] y = new double[t.length];
    double[] u = new double[t.length];
    for (int j = 0; j < t.length; j++) {
      re[j] = p.re(j);
      im[j] = p.im(j);
      y[j] = p.amplitude(j).value();
      u[j] = p.uncertainty();
    }
    EchoTrainFit.Result fit;
    try {
      fit = EchoTrainFit.fit(EchoTrainFit.Echoes.of(t, re, im, p.uncertainty()));
    } catch (NotDetermined e) {
      throw Readings.refused("T2 is not determined", e);
    }
    Map<String, Measured> values = new LinkedHashMap<>();
    values.put("t2", fit.t2());
    values.put(
        "echo_spacing", Measured.withoutUncertainty(t[0], Unit.SECOND, "the shortest echo time"));
    List<String> warnings = new ArrayList<>(fit.warnings());
    warnings.removeIf(w -> w.startsWith("odd and even"));
    warnings.add(
        "measured by single echoes, one a scan: diffusion in a field gradient and a field that moves"
            + " within an echo time shorten it more than an echo train");
    Readings.missedTarget("T2", fit.t2(), Notes.number(capture, "target", Double.NaN))
        .ifPresent(warnings::add);
    String caption =
        String.format(
            Locale.ROOT, "T2 %.4g ms by %d single echoes", fit.t2().value() * 1e3, t.length);
    return new Reading(
        values,
        warnings,
        new Picture.Curve(
            Rung.T2,
            "echo time",
            "s",
            "echo",
            "V",
            t,
            y,
            u,
            t,
            fit.curve(t),
            new double[0],
            caption));
  }
}
