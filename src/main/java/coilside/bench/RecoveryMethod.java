package coilside.bench;

import coilside.board.BoardException;
import coilside.fit.NotDetermined;
import coilside.fit.RecoveryFit;
import coilside.fit.RecoveryPlan;
import coilside.fit.RecoveryPoint;
import coilside.quantity.Measured;
import coilside.quantity.Unit;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.shot.Wait;
import coilside.signal.Scan;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.Optional;

/**
 * The T1 rung: inversion recovery, or on boards that play only "pulse then receive" saturation
 * recovery by 90-degree pulses with different rests; recovery times chosen by what they would tell.
 *
 * <p>Saturation goes in pairs: a pulse after a long rest, which saturates and is itself a point
 * near full recovery, and the pulse that reads. Short rests in a row would let each pulse refocus
 * what the ones before left across the field, and echoes would pass for recovery.
 */
final class RecoveryMethod implements Method {
  private static final double REST_IN_T1 = 3;
  private static final double SHORTEST_T1 = 1e-3;

  /** Scans after which points that scatter without measure will not come right. */
  private static final int HOPELESS = 24;

  /** Reduced chi-square of points that scatter without measure. */
  private static final double SCATTER = 25;

  /** Scans spent on telling two T1 from one. */
  private static final int MOST_FOR_TWO = 16;

  /** Steps of the golden section fill an interval evenly, however many there are. */
  private static final double GOLDEN = 0.6180339887;

  @Override
  public Rung rung() {
    return Rung.T1;
  }

  @Override
  public void acquire(Acquisition a) throws BoardException, NotMeasurable {
    boolean inversion = a.limits().arbitraryShots();
    double guess = GainMethod.guessT1(a);
    RecoveryFit.Options options = options(inversion, guess);
    a.note("inversion", inversion ? 1 : 0);
    a.note("guess", guess);
    a.note("target", a.settings().t1Target());
    RecoveryPlan plan = new RecoveryPlan(options, a.settings().t1Target(), Double.NaN, REST_IN_T1);
    double longRest = Choices.rest(a, GainMethod.RECOVERED * guess);
    Quiet.play(a, single(a, longRest));
    a.play(inversion ? inversion(a, GainMethod.RECOVERED * guess, longRest) : single(a, longRest));
    double time = (inversion ? 0.2 : 0.4) * guess;
    double rest = longRest;
    double shortest = 0;
    int fewest = 3;
    boolean saturated = true;
    while (a.scansLeft() > 0) {
      if (inversion) {
        a.play(inversion(a, time, rest));
      } else {
        if (!saturated) {
          a.play(single(a, Choices.rest(a, REST_IN_T1 * guess)));
        }
        a.play(single(a, Choices.rest(a, Math.max(0, time - played(a)))));
        saturated = false;
      }
      if (a.scans().size() < fewest + 1) {
        time = (inversion ? 0.4 : 1) * guess;
        continue;
      }
      CommonShape shape = CommonShape.of(a.shots(), a.scans());
      shortest = inversion ? shortest(a, shape, guess) : afterEcho(a, shape, guess);
      List<RecoveryPoint> points = points(a.shots(), a.scans(), shape, inversion);
      RecoveryPlan.Advice advice = plan.next(points, shortest);
      a.show(picture(points, advice.result(), new double[] {advice.recoverySeconds()}));
      boolean scatters =
          advice
                  .result()
                  .map(RecoveryFit.Result::reducedChiSquare)
                  .orElseGet(() -> RecoveryFit.reducedChiSquare(points, options))
              > SCATTER;
      boolean another = advice.enough() && advice.result().get().scatters();
      if (advice.enough() && (!another || points.size() >= MOST_FOR_TWO)
          || a.scans().size() > HOPELESS && scatters) {
        break;
      }
      // Points all over the recovery show whether it is another T1 that makes them scatter.
      double spread = 0.1 * Math.pow(50, points.size() * GOLDEN % 1);
      time =
          Math.max(
              another ? spread * advice.result().get().t1().value() : advice.recoverySeconds(),
              shortest);
      rest = Choices.rest(a, inversion ? advice.restSeconds() : 0);
      advice
          .result()
          .ifPresent(
              r -> a.step("T1", Math.min(0.95, a.settings().t1Target() / r.t1().relative())));
    }
  }

  /**
   * The shortest recovery time: what an imperfect inversion leaves across the field must have
   * decayed before the reading pulse, as far as T1 allows the wait.
   */
  private static double shortest(Acquisition a, CommonShape shape, double guess) {
    double across = Math.min(5 * shape.decay().t2Star().value(), 0.2 * guess);
    return Math.max(across, 3 * Choices.pulse90(a) + a.limits().waitSeconds().min());
  }

  /**
   * The shortest recovery time of saturation: the echo of the two pulses comes after as long again,
   * and must rise only when the window is over, as far as T1 allows the wait.
   */
  private static double afterEcho(Acquisition a, CommonShape shape, double guess) {
    double t2Star = shape.decay().t2Star().value();
    return Math.min(played(a) + 5 * t2Star, 0.6 * guess);
  }

  /** From the start of a reading pulse to the end of its window, s. */
  private static double played(Acquisition a) {
    return single(a, 0).playedSeconds();
  }

  private static RecoveryFit.Options options(boolean inversion, double guess) {
    return RecoveryFit.Options.of(
        inversion ? RecoveryFit.Kind.INVERSION : RecoveryFit.Kind.SATURATION,
        Math.min(SHORTEST_T1, guess / 10),
        3 * guess);
  }

  private static Shot single(Acquisition a, double rest) {
    return BenchShots.single(a, Choices.gain(a), Choices.pulse90(a), BenchShots.alternate(a), rest);
  }

  /**
   * 180 degrees, the recovery time from centre to centre, 90 degrees, receive. Both phases
   * alternate, the second every scan, the first every other: an error of the DC offset and what the
   * first pulse leaves across the field then do not pile up.
   */
  private static Shot inversion(Acquisition a, double recovery, double rest) {
    double p90 = Choices.pulse90(a);
    double p180 = Choices.pulse(a.limits(), a.known().need(Rung.NUTATION, "pulse_180"));
    double wait = Choices.rest(a, Math.max(0, recovery - (p90 + p180) / 2));
    Choices.Window w =
        Choices.window(a.limits(), BenchShots.FIRST_SECONDS, BenchShots.FIRST_POINTS);
    double amplitude = Choices.amplitude(a);
    double inverting = BenchShots.phase(a, a.scans().size() / 2 % 2 * Math.PI);
    return new Shot(
        Choices.carrier(a),
        Choices.gain(a),
        rest,
        List.of(
            new Pulse(p180, inverting, amplitude),
            new Wait(wait),
            new Pulse(p90, BenchShots.alternate(a), amplitude),
            new Wait(Choices.delay(a)),
            new Receive(w.points(), w.dwellSeconds(), 0)));
  }

  private static List<RecoveryPoint> points(
      List<Shot> shots, List<Scan> scans, CommonShape shape, boolean inversion) {
    int first = 0;
    double phase = Math.atan2(shape.im()[first], shape.re()[first]);
    List<RecoveryPoint> points = new ArrayList<>();
    for (int j = 0; j < shape.indices().size(); j++) {
      int i = shape.indices().get(j);
      double along = shape.re()[j] * Math.cos(phase) + shape.im()[j] * Math.sin(phase);
      double since = sinceReading(shots, scans, i);
      if (inversion) {
        points.add(new RecoveryPoint(recovery(shots.get(i)), along, shape.u()[j], since));
      } else {
        double longest = scans.get(i).restSeconds();
        points.add(
            new RecoveryPoint(
                Double.isInfinite(since) ? Math.max(longest, 1e3) : since, along, shape.u()[j], 0));
      }
    }
    return points;
  }

  /** From the centre of the first pulse to that of the second, s. */
  private static double recovery(Shot shot) {
    List<coilside.shot.Step> steps = shot.flat();
    return steps.get(0).seconds() / 2 + steps.get(1).seconds() + steps.get(2).seconds() / 2;
  }

  /** From the last pulse before scan i to its first pulse, s; infinite for the first scan. */
  private static double sinceReading(List<Shot> shots, List<Scan> scans, int i) {
    double passed = scans.get(i).restSeconds();
    for (int k = i - 1; k >= 0; k--) {
      List<coilside.shot.Step> steps = shots.get(k).flat();
      if (shots.get(k).receiveOnly()) {
        passed += scans.get(k).restSeconds() + shots.get(k).playedSeconds();
        continue;
      }
      for (int s = steps.size() - 1; !(steps.get(s) instanceof Pulse); s--) {
        passed += steps.get(s).seconds();
      }
      return passed;
    }
    return Double.POSITIVE_INFINITY;
  }

  @Override
  public Reading read(Capture capture) throws NotMeasurable {
    boolean inversion = Notes.number(capture, "inversion") != 0;
    double guess = Notes.number(capture, "guess");
    CommonShape shape = CommonShape.of(capture.shots(), capture.scans());
    List<RecoveryPoint> points = points(capture.shots(), capture.scans(), shape, inversion);
    RecoveryFit.Result fit;
    try {
      fit = RecoveryFit.fit(points, options(inversion, guess));
    } catch (NotDetermined e) {
      throw shape.track().named(Readings.refused("T1 is not determined", e));
    }
    Map<String, Measured> values = new LinkedHashMap<>();
    values.put("t1", fit.t1());
    values.put(
        "repetition_time",
        Measured.of(
            GainMethod.RECOVERED * fit.longestT1Seconds(),
            GainMethod.RECOVERED * fit.longestT1Seconds() * fit.t1().relative(),
            Unit.SECOND));
    List<String> warnings = new ArrayList<>(fit.warnings());
    shape.track().cause().ifPresent(warnings::add);
    Readings.missedTarget("T1", fit.t1(), Notes.number(capture, "target")).ifPresent(warnings::add);
    return new Reading(values, warnings, picture(points, Optional.of(fit), new double[0]));
  }

  private static Picture picture(
      List<RecoveryPoint> points, Optional<RecoveryFit.Result> fit, double[] next) {
    List<RecoveryPoint> shown = points.stream().filter(p -> p.recoverySeconds() < 500).toList();
    int n = shown.size();
    double[] x = new double[n];
    double[] y = new double[n];
    double[] u = new double[n];
    double longest = 0;
    for (int j = 0; j < n; j++) {
      x[j] = shown.get(j).recoverySeconds();
      y[j] = shown.get(j).amplitude();
      u[j] = shown.get(j).u();
      longest = Math.max(longest, x[j]);
    }
    double[] fitX = new double[fit.isPresent() ? 160 : 0];
    for (int i = 0; i < fitX.length; i++) {
      fitX[i] = longest * 1.05 * i / (fitX.length - 1.0);
    }
    double[] fitY = fit.isPresent() ? fit.get().curve(fitX) : new double[0];
    String caption =
        fit.map(
                f ->
                    String.format(
                        Locale.ROOT,
                        "T1 %.4g ms by %s recovery",
                        f.t1().value() * 1e3,
                        f.kind() == RecoveryFit.Kind.INVERSION ? "inversion" : "saturation"))
            .orElse("looking for T1");
    return new Picture.Curve(
        Rung.T1, "recovery time", "s", "signal", "V", x, y, u, fitX, fitY, next, caption);
  }
}
