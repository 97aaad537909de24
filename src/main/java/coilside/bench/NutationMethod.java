package coilside.bench;

import coilside.board.BoardException;
import coilside.fit.NotDetermined;
import coilside.fit.NutationFit;
import coilside.fit.NutationPlan;
import coilside.fit.NutationPoint;
import coilside.fit.NutationResult;
import coilside.quantity.Measured;
import coilside.quantity.Nucleus;
import coilside.quantity.Unit;
import coilside.shot.Pulse;
import coilside.shot.Shot;
import coilside.signal.Scan;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;

/**
 * The nutation rung: signal against pulse width at this amplitude, each width chosen by what it
 * would tell, until the 90-degree pulse is known well enough.
 */
final class NutationMethod implements Method {
  private static final double SHORTEST_90 = 2e-6;
  private static final double LONGEST_90 = 200e-6;
  private static final int FEWEST = 4;

  /** Scans after which a decay must show, or the rung is refused. */
  private static final int PATIENCE = 16;

  /** Scans after which points that scatter this much (reduced chi-square) will not come right. */
  private static final int HOPELESS = 24;

  private static final double SCATTER = 25;

  @Override
  public Rung rung() {
    return Rung.NUTATION;
  }

  @Override
  public void acquire(Acquisition a) throws BoardException, NotMeasurable {
    double rest = Choices.rest(a, GainMethod.RECOVERED * GainMethod.guessT1(a));
    double gain = Choices.gain(a);
    double shortest = a.limits().pulseSeconds().min();
    double longest = a.limits().pulseSeconds().max();
    double shortest90 = Math.max(SHORTEST_90, shortest / 2);
    double longest90 = Math.min(LONGEST_90, longest / 1.5);
    a.note("shortest_90", shortest90);
    a.note("longest_90", longest90);
    a.note("target", a.settings().pulse90Target());
    NutationFit.Options options = NutationFit.Options.between(shortest90, longest90);
    Quiet.play(a, BenchShots.single(a, gain, longest, 0, rest));
    double width = Choices.pulse(a.limits(), Math.sqrt(shortest90 * longest90) / 2);
    while (a.scansLeft() > 0) {
      Scan scan = a.play(BenchShots.single(a, gain, width, BenchShots.alternate(a), rest));
      if (scan.clippedSamples() > 0 && a.limits().gainDecibels().snap(gain - 6) < gain) {
        gain = a.limits().gainDecibels().snap(gain - 6);
        a.say(
            String.format(
                Locale.ROOT, "the signal clips: measuring again at a gain of %.0f dB", gain));
        a.startAgain();
        Quiet.play(a, BenchShots.single(a, gain, longest, 0, rest));
        continue;
      }
      NutationPlan.Advice advice = advice(a, options, shortest, longest, width);
      if (advice.enough() || a.scans().size() > HOPELESS && scatters(advice)) {
        break;
      }
      width = Choices.pulse(a.limits(), advice.pulseSeconds());
      a.step("nutation", Math.min(0.95, a.settings().pulse90Target() / advice.relative()));
    }
  }

  private static boolean scatters(NutationPlan.Advice advice) {
    return advice.result().map(r -> r.reducedChiSquare() > SCATTER).orElse(false);
  }

  /** Ever longer pulses, then again from shorter ones, while there is too little to choose by. */
  private static NutationPlan.Advice lookingAround(Acquisition a, double width) {
    double next = width * 2.2;
    return new NutationPlan.Advice(
        false,
        next < a.limits().pulseSeconds().max() ? next : width / 9,
        "looking around",
        java.util.Optional.empty(),
        1);
  }

  private static NutationPlan.Advice advice(
      Acquisition a, NutationFit.Options options, double shortest, double longest, double width)
      throws NotMeasurable {
    int pulses = a.shots().size() - 1;
    if (pulses < FEWEST) {
      return lookingAround(a, width);
    }
    CommonShape shape;
    try {
      shape = CommonShape.of(a.shots(), a.scans());
    } catch (NotMeasurable e) {
      if (pulses < PATIENCE) {
        return lookingAround(a, width);
      }
      throw e;
    }
    List<NutationPoint> points = points(a.shots(), a.scans(), shape);
    NutationPlan.Advice advice =
        new NutationPlan(
                options.withDecayRate(Math.max(0, shape.decayRate())),
                a.settings().pulse90Target(),
                shortest,
                longest)
            .next(points);
    a.show(picture(points, advice.result(), new double[] {advice.pulseSeconds()}));
    return advice;
  }

  private static List<NutationPoint> points(List<Shot> shots, List<Scan> scans, CommonShape shape) {
    List<NutationPoint> points = new ArrayList<>();
    for (int j = 0; j < shape.indices().size(); j++) {
      int i = shape.indices().get(j);
      Pulse pulse = pulse(shots.get(i));
      points.add(
          new NutationPoint(
              pulse.seconds(),
              shape.re()[j],
              shape.im()[j],
              shape.u()[j],
              sincePulse(shots, scans, i),
              shape.decay().offsetHertz().value()));
    }
    return points;
  }

  private static double shortestRest(Capture capture) {
    double shortest = Double.POSITIVE_INFINITY;
    for (int i = 0; i < capture.scans().size(); i++) {
      if (!capture.shots().get(i).receiveOnly()) {
        shortest = Math.min(shortest, capture.scans().get(i).restSeconds());
      }
    }
    return shortest;
  }

  static Pulse pulse(Shot shot) {
    return (Pulse) shot.flat().stream().filter(Pulse.class::isInstance).findFirst().orElseThrow();
  }

  /** From the end of the pulse before to the first pulse of scan i, s; infinite for the first. */
  static double sincePulse(List<Shot> shots, List<Scan> scans, int i) {
    double passed = scans.get(i).restSeconds();
    for (int k = i - 1; k >= 0; k--) {
      if (shots.get(k).receiveOnly()) {
        passed += scans.get(k).restSeconds() + shots.get(k).playedSeconds();
      } else {
        return passed + shots.get(k).playedSeconds() - pulse(shots.get(k)).seconds();
      }
    }
    return Double.POSITIVE_INFINITY;
  }

  @Override
  public Reading read(Capture capture) throws NotMeasurable {
    CommonShape shape = CommonShape.of(capture.shots(), capture.scans());
    List<NutationPoint> points = points(capture.shots(), capture.scans(), shape);
    NutationFit.Options options =
        NutationFit.Options.between(
                Notes.number(capture, "shortest_90"), Notes.number(capture, "longest_90"))
            .withDecayRate(Math.max(0, shape.decayRate()));
    NutationResult fit;
    try {
      fit = NutationFit.fit(points, options);
    } catch (NotDetermined e) {
      throw shape.track().named(refused(e, points));
    }
    Map<String, Measured> values = new LinkedHashMap<>();
    values.put("pulse_90", fit.pulse90());
    values.put("pulse_180", fit.pulse180());
    values.put("nutation_rate", fit.nutationRate());
    values.put("b1", b1(fit.nutationRate()));
    values.put("b1_spread", fit.spread());
    values.put(
        "rest",
        Measured.withoutUncertainty(
            shortestRest(capture), Unit.SECOND, "as it was before the shots, by the clock"));
    List<String> warnings = new ArrayList<>(fit.warnings());
    double target = Notes.number(capture, "target");
    double reached = fit.pulse90().relative();
    if (reached > target) {
      warnings.add(
          String.format(
              Locale.ROOT,
              "the 90-degree pulse is known to %.1f %%, not to the wanted %.1f %%: about %.0f scans"
                  + " would do",
              100 * reached,
              100 * target,
              points.size() * Math.pow(reached / target, 2)));
    }
    double offset = Math.abs(shape.decay().offsetHertz().value());
    if (offset > 0.3 * fit.nutationRate().value()) {
      warnings.add(
          String.format(
              Locale.ROOT,
              "the line stands %.0f Hz off the carrier, %.2f of the nutation rate: measure the"
                  + " resonance again",
              offset,
              offset / fit.nutationRate().value()));
    }
    return new Reading(
        values, warnings, picture(points, java.util.Optional.of(fit), new double[0]));
  }

  private static NotMeasurable refused(NotDetermined e, List<NutationPoint> points) {
    NotMeasurable plain = Readings.refused("the 90-degree pulse is not determined", e);
    List<String> causes = new ArrayList<>();
    double longest = points.stream().mapToDouble(NutationPoint::pulseSeconds).max().orElse(0);
    if (e.reason() == NotDetermined.Reason.TOO_SHORT
        || e.reason() == NotDetermined.Reason.AMBIGUOUS) {
      causes.add(
          String.format(
              Locale.ROOT,
              "the nutation is so slow that pulses up to %.0f us do not show it: coil off tune,"
                  + " amplifier weak, or amplitude too low",
              longest * 1e6));
    }
    causes.addAll(plain.refusal().likelyCauses());
    return new NotMeasurable(plain.refusal().reason(), causes);
  }

  /** B1 of a nutation rate: rate over gamma/2 pi, T. */
  private static Measured b1(Measured rate) {
    double gamma = Nucleus.HYDROGEN_1.larmorHertzPerTesla();
    return Measured.of(rate.value() / gamma, rate.u() / gamma, Unit.TESLA);
  }

  private static Picture picture(
      List<NutationPoint> points, java.util.Optional<NutationResult> fit, double[] next) {
    int n = points.size();
    double[] x = new double[n];
    double[] y = new double[n];
    double[] u = new double[n];
    double longest = 0;
    for (int j = 0; j < n; j++) {
      NutationPoint p = points.get(j);
      x[j] = p.pulseSeconds();
      y[j] = fit.isPresent() ? fit.get().along(p) : p.re();
      u[j] = p.u();
      longest = Math.max(longest, x[j]);
    }
    double[] fitX = new double[fit.isPresent() ? 200 : 0];
    for (int i = 0; i < fitX.length; i++) {
      fitX[i] = longest * 1.05 * i / (fitX.length - 1.0);
    }
    double[] fitY = fit.isPresent() ? fit.get().curve(fitX) : new double[0];
    String caption =
        fit.map(
                f ->
                    String.format(
                        Locale.ROOT,
                        "90-degree pulse %.2f us, nutation rate %.4g kHz, B1 spread %.1f %%",
                        f.pulse90().value() * 1e6,
                        f.nutationRate().value() * 1e-3,
                        100 * f.spread().value()))
            .orElse("looking for the nutation");
    return new Picture.Curve(
        Rung.NUTATION, "pulse width", "s", "signal", "V", x, y, u, fitX, fitY, next, caption);
  }
}
