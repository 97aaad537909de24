package coilside.bench;

import coilside.board.BoardException;
import coilside.board.BoardLimits;
import coilside.fit.EchoTrainFit;
import coilside.fit.NotDetermined;
import coilside.quantity.Measured;
import coilside.quantity.Unit;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Repeat;
import coilside.shot.Shot;
import coilside.shot.Step;
import coilside.shot.Wait;
import coilside.signal.Averager;
import coilside.signal.Fid;
import coilside.signal.MatchedProjection;
import coilside.signal.Scan;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;

/**
 * The T2 rung: an echo train with the refocusing pulses a quarter turn out of phase with the first
 * (Meiboom and Gill), one receive window an echo, the first pulse's phase alternating from scan to
 * scan so that the receiver's offset and what imperfect refocusing pulses make drop out. Boards
 * with too few receive windows get {@link SingleEchoes}.
 */
final class EchoTrainMethod implements Method {
  private static final int MOST_ECHOES = 256;
  private static final double LENGTH_IN_T1 = 2.5;
  private static final int WINDOW_POINTS = 64;
  private static final int PAIR = 2;

  /** Part of the allowed duty cycle that the train's own pulses may use. */
  private static final double DUTY_USED = 0.8;

  @Override
  public Rung rung() {
    return Rung.T2;
  }

  @Override
  public void acquire(Acquisition a) throws BoardException, NotMeasurable {
    if (mostEchoes(a.limits()) < Methods.FEWEST_ECHOES) {
      SingleEchoes.acquire(a);
      return;
    }
    double t1 = a.known().need(Rung.T1, "t1");
    Train train = train(a, t1);
    a.note("target", a.settings().t2Target());
    a.plan(2 * PAIR + 1);
    double rest = Choices.rest(a, GainMethod.RECOVERED * t1);
    Shot first = shot(a, train, 0, rest);
    Quiet.play(a, first);
    int wanted = PAIR;
    while (a.scans().size() - 1 < wanted && a.scansLeft() > 0) {
      int number = a.scans().size() - 1;
      a.play(shot(a, train, number % 2 * Math.PI, rest));
      if (a.scans().size() - 1 == wanted) {
        wanted = more(a, wanted);
      }
      a.step("T2", (a.scans().size() - 1) / (double) wanted);
    }
  }

  /** How many scans it takes in all, from what there is. */
  private int more(Acquisition a, int played) {
    try {
      Reading reading = read(a.capture(Rung.T2));
      a.show(reading.picture());
      double miss = reading.value("t2").relative() / a.settings().t2Target();
      double wanted = played * miss * miss;
      int most = played + a.scansLeft() / PAIR * PAIR;
      return miss <= 1 ? played : (int) Math.min(most, PAIR * Math.ceil(wanted / PAIR));
    } catch (NotMeasurable e) {
      return Math.min(2 * played, played + a.scansLeft() / PAIR * PAIR);
    }
  }

  /**
   * The train's timing, every part on the board's grain.
   *
   * @param echoes number of echoes
   * @param before wait between the first pulse and the first refocusing pulse, s
   * @param open wait between a refocusing pulse and its window, s
   * @param after wait between a window and the next refocusing pulse, s
   * @param window the receive window
   */
  private record Train(
      int echoes, double before, double open, double after, Choices.Window window) {}

  private static Train train(Acquisition a, double t1) throws NotMeasurable {
    BoardLimits limits = a.limits();
    double p90 = Choices.pulse90(a);
    double p180 = pulse180(a);
    double t2Star = a.known().value(Rung.T2STAR, "t2_star").orElse(2e-3);
    double seconds = Math.min(0.5e-3, t2Star / 2);
    double dwell =
        limits.dwellSeconds().snap(Math.max(1 / Choices.WIDE_HERTZ, seconds / WINDOW_POINTS));
    int points = Choices.points(limits, (int) Math.max(8, Math.rint(seconds / dwell)));
    double window = points * dwell;
    double delay = Choices.delay(a);
    double shortestHalf = p180 / 2 + delay + window / 2;
    int most = mostEchoes(limits);
    double wantedHalf = LENGTH_IN_T1 * t1 / most / 2;
    double byDuty = p180 / (DUTY_USED * limits.maxDutyCycle()) / 2;
    double half = Math.max(Math.max(shortestHalf, 0.5e-3), Math.max(wantedHalf, byDuty));
    int echoes = (int) Math.max(8, Math.min(most, Math.ceil(LENGTH_IN_T1 * t1 / (2 * half))));
    double open = limits.waitSeconds().snap(half - p180 / 2 - window / 2);
    double before = limits.waitSeconds().snap(open + window / 2 - p90 / 2);
    return new Train(echoes, before, open, open, new Choices.Window(points, dwell));
  }

  private static int mostEchoes(BoardLimits limits) {
    int byWindows = Math.min(MOST_ECHOES, limits.maxWindows());
    return limits.repeatLoops()
        ? Math.min(byWindows, limits.maxRepeats())
        : Math.min(byWindows, (limits.maxSteps() - 4) / 4);
  }

  private static double pulse180(Acquisition a) {
    return Choices.pulse(a.limits(), a.known().need(Rung.NUTATION, "pulse_180"));
  }

  private static Shot shot(Acquisition a, Train train, double phase, double rest) {
    double amplitude = Choices.amplitude(a);
    Receive receive = new Receive(train.window().points(), train.window().dwellSeconds(), 0);
    List<Step> loop =
        List.of(
            new Pulse(pulse180(a), Math.PI / 2, amplitude),
            new Wait(train.open()),
            receive,
            new Wait(train.after()));
    return new Shot(
        Choices.carrier(a),
        Choices.gain(a),
        rest,
        List.of(
            new Pulse(Choices.pulse90(a), phase, amplitude),
            new Wait(train.before()),
            new Repeat(train.echoes(), loop)));
  }

  @Override
  public Reading read(Capture capture) throws NotMeasurable {
    if (capture.settings().containsKey(SingleEchoes.NOTE)) {
      return SingleEchoes.read(capture);
    }
    Shot shot = capture.shots().stream().filter(s -> !s.receiveOnly()).findFirst().orElseThrow();
    List<Averager> sums = new ArrayList<>();
    int scans = 0;
    for (int i = 0; i < capture.shots().size(); i++) {
      if (capture.shots().get(i).receiveOnly()) {
        continue;
      }
      scans++;
      Scan scan = capture.scans().get(i);
      double phase = BenchShots.firstPhase(capture.shots().get(i));
      for (int w = 0; w < scan.windows().size(); w++) {
        if (sums.size() <= w) {
          sums.add(new Averager());
        }
        sums.get(w).add(scan.windows().get(w), phase);
      }
    }
    List<Fid> echoes = sums.stream().map(Averager::mean).toList();
    double sigma = Quiet.of(capture.shots(), capture.scans()).sigma() / Math.sqrt(scans);
    double spacing = spacing(shot);
    MatchedProjection p = MatchedProjection.onShape(echoes, shape(echoes), sigma);
    double[] t = new double[echoes.size()];
    double[] re = new double[t.length];
    double[] im = new double[t.length];
    for (int j = 0; j < t.length; j++) {
      t[j] = (j + 1) * spacing;
      re[j] = p.re(j);
      im[j] = p.im(j);
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
        "echo_spacing", Measured.withoutUncertainty(spacing, Unit.SECOND, "a setting of the shot"));
    List<String> warnings = new ArrayList<>(fit.warnings());
    warnings.add(
        "diffusion in a field gradient shortens T2 measured this way: a shorter echo spacing that"
            + " gives a longer T2 shows it");
    Readings.missedTarget("T2", fit.t2(), Notes.number(capture, "target", Double.NaN))
        .ifPresent(warnings::add);
    return new Reading(values, warnings, picture(t, p, fit, spacing));
  }

  /** The echo that all windows share: the mean of the first quarter, which is strongest. */
  private static Fid shape(List<Fid> echoes) {
    Averager average = new Averager();
    for (int j = 0; j < Math.max(2, echoes.size() / 4); j++) {
      average.add(echoes.get(j));
    }
    Fid mean = average.mean();
    double top = 0;
    for (int k = 0; k < mean.points(); k++) {
      top = Math.max(top, mean.magnitude(k));
    }
    double[] re = new double[mean.points()];
    double[] im = new double[mean.points()];
    for (int k = 0; k < re.length; k++) {
      re[k] = mean.re(k) / top;
      im[k] = mean.im(k) / top;
    }
    return new Fid(re, im, mean.dwellSeconds(), mean.startSeconds(), mean.carrierHertz());
  }

  /** From the centre of one refocusing pulse to that of the next, s. */
  private static double spacing(Shot shot) {
    for (Step step : shot.steps()) {
      if (step instanceof Repeat repeat) {
        return repeat.seconds() / repeat.count();
      }
    }
    throw new IllegalArgumentException("the capture's shot holds no echo train");
  }

  private static Picture picture(
      double[] t, MatchedProjection p, EchoTrainFit.Result fit, double spacing) {
    double[] y = new double[t.length];
    double[] u = new double[t.length];
    double phase = fit.phaseRadians().value();
    for (int j = 0; j < t.length; j++) {
      y[j] = p.re(j) * Math.cos(phase) + p.im(j) * Math.sin(phase);
      u[j] = p.uncertainty();
    }
    String caption =
        String.format(
            Locale.ROOT,
            "T2 %.4g ms, %d echoes %.3g ms apart",
            fit.t2().value() * 1e3,
            t.length,
            spacing * 1e3);
    return new Picture.Curve(
        Rung.T2, "echo time", "s", "echo", "V", t, y, u, t, fit.curve(t), new double[0], caption);
  }
}
