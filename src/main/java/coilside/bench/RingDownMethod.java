package coilside.bench;

import coilside.board.BoardException;
import coilside.board.BoardLimits;
import coilside.fit.NotDetermined;
import coilside.fit.RingDownFit;
import coilside.quantity.Measured;
import coilside.quantity.Unit;
import coilside.shot.Shot;
import coilside.signal.Averager;
import coilside.signal.Fid;
import coilside.signal.Fourier;
import coilside.signal.Scan;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.Optional;

/**
 * The ring-down rung: pairs of scans with the pulse's phase turned by 180 degrees and the receiver
 * opened as early as it can be. What turns with the pulse is ring-down and signal; the signal is
 * fitted late, drawn back and taken off. The second pair is played a quarter turn from the first,
 * so that the mirror image which unequal receiver channels make drops out. On a board that knows no
 * pulse phase nothing can be turned: the DC offset is taken off as the receive-only scan has it,
 * and what remains counts as following.
 */
final class RingDownMethod implements Method {
  private static final int PAIRS = 2;
  private static final int POINTS = 8192;
  private static final double DWELL = 1e-6;
  private static final double PULSE = 20e-6;

  /** Ringing below this part of the noise counts as gone. */
  private static final double FRACTION = 0.5;

  /** Part of the largest level within which a sample counts as clipped. */
  private static final double NEAR = 0.02;

  /** So many samples of a ring-down at exactly one level are a flat top ... */
  private static final int FLAT_SAMPLES = 4;

  /** ... where they span more steps of the digitiser than this. */
  private static final int FEWEST_STEPS = 100;

  @Override
  public Rung rung() {
    return Rung.RINGDOWN;
  }

  @Override
  public void acquire(Acquisition a) throws BoardException, NotMeasurable {
    a.plan(2 * PAIRS + 1);
    BoardLimits limits = a.limits();
    Choices.Window window =
        new Choices.Window(Choices.points(limits, POINTS), limits.dwellSeconds().snap(DWELL));
    double rest = Choices.rest(a, GainMethod.RECOVERED * GainMethod.guessT1(a));
    double earliest = limits.waitSeconds().min();
    double pulse = Choices.pulse(limits, PULSE);
    for (int i = 0; i < 2 * PAIRS; i++) {
      double phase = BenchShots.phase(a, i % 2 * Math.PI + i / 2 % 2 * Math.PI / 2);
      Shot shot =
          BenchShots.single(
              a, Choices.carrier(a), Choices.gain(a), pulse, phase, rest, earliest, window);
      if (i == 0) {
        Quiet.play(a, shot);
      }
      a.play(shot);
    }
    a.note("shortest_delay", earliest);
    a.note("delay_step", limits.waitSeconds().step());
  }

  @Override
  public Reading read(Capture capture) throws NotMeasurable {
    Quiet quiet = Quiet.of(capture.shots(), capture.scans());
    Averager plus = new Averager();
    Averager minus = new Averager();
    int clippedUntil = 0;
    for (int i = 0; i < capture.shots().size(); i++) {
      Shot shot = capture.shots().get(i);
      if (shot.receiveOnly()) {
        continue;
      }
      Scan scan = capture.scans().get(i);
      double phase = BenchShots.firstPhase(shot);
      boolean turned = phase > Math.PI - 0.01;
      (turned ? minus : plus).add(quiet.strip(scan.fid()), turned ? phase - Math.PI : phase);
      clippedUntil = Math.max(clippedUntil, clippedUntil(scan));
    }
    double one = quiet.sigma();
    double sigma = one / Math.sqrt(plus.count() + minus.count());
    boolean turned = minus.count() > 0;
    Fid following =
        turned ? RingDownFit.separate(plus.mean(), minus.mean()).following() : plus.mean();
    double pulseHalf = pulseHalf(capture);
    RingDownFit.Result fit;
    try {
      fit = RingDownFit.fit(following, sigma, clippedUntil, FRACTION * one / sigma);
    } catch (NotDetermined e) {
      throw Readings.refused("the ring-down is not determined", e);
    }
    double shortest = Notes.number(capture, "shortest_delay");
    double delay = Math.max(shortest, fit.receiveDelaySeconds() - pulseHalf);
    double step = Notes.number(capture, "delay_step");
    if (step > 0) {
      delay = Math.ceil(delay / step - 1e-6) * step;
    }
    Map<String, Measured> values = new LinkedHashMap<>();
    values.put("ring_down_time", fit.timeConstant());
    values.put(
        "receive_delay",
        fit.clearSeconds().hasUncertainty()
            ? Measured.of(delay, fit.clearSeconds().u(), Unit.SECOND)
            : Measured.withoutUncertainty(
                delay, Unit.SECOND, fit.clearSeconds().whyNoUncertainty()));
    List<String> warnings = new ArrayList<>(fit.warnings());
    if (!turned) {
      warnings.add(
          "this board knows no pulse phase: the receiver's own recovery counts as ring-down");
    }
    if (clippedUntil > 0) {
      warnings.add(
          String.format(
              Locale.ROOT,
              "the receiver clips for %.0f us after the pulse",
              (following.time(clippedUntil) - pulseHalf) * 1e6));
    }
    if (fit.visible()) {
      offTune(following, clippedUntil, one, fit.timeConstant().value())
          .ifPresent(w -> warnings.add(0, w));
    }
    String caption =
        fit.visible()
            ? String.format(
                Locale.ROOT,
                "ring-down %.3g us, receive delay %.0f us",
                fit.timeConstant().value() * 1e6,
                delay * 1e6)
            : String.format(
                Locale.ROOT, "no ring-down stands out; receive delay %.0f us", delay * 1e6);
    int shown = Math.min(following.points(), Math.max(64, 4 * indexAt(following, delay)));
    Fid early = following.slice(0, shown);
    Optional<Fid> signal =
        fit.signal() == null ? Optional.empty() : Optional.of(fit.signal().model(early));
    Picture picture =
        new Picture.Trace(
            Rung.RINGDOWN,
            early,
            signal,
            indexAt(early, delay),
            Optional.of(Fourier.spectrum(following)),
            List.of(),
            caption);
    return new Reading(values, warnings, picture);
  }

  /**
   * Where the coil rings is where it is tuned: a warning when the carrier lies outside the half
   * width of its resonance, 1/(2 pi tau).
   */
  private static Optional<String> offTune(Fid ring, int from, double sigma, double tau) {
    double re = 0;
    double im = 0;
    for (int k = from; k + 1 < ring.points() && ring.magnitude(k + 1) > 10 * sigma; k++) {
      re += ring.re(k) * ring.re(k + 1) + ring.im(k) * ring.im(k + 1);
      im += ring.re(k) * ring.im(k + 1) - ring.im(k) * ring.re(k + 1);
    }
    double offset = Math.atan2(im, re) / (2 * Math.PI * ring.dwellSeconds());
    double halfWidth = 1 / (2 * Math.PI * tau);
    if (Math.hypot(re, im) < 100 * sigma * sigma || Math.abs(offset) < halfWidth) {
      return Optional.empty();
    }
    double response = 1 / Math.hypot(1, offset / halfWidth);
    return Optional.of(
        String.format(
            Locale.ROOT,
            "the coil is off tune: it rings at %.3f MHz, %+.0f kHz from the resonance, where its"
                + " response is about %.2f of the best; pulses are as much longer, signals as much"
                + " weaker: tune and match it",
            (ring.carrierHertz() + offset) * 1e-6,
            offset * 1e-3,
            response));
  }

  private static double pulseHalf(Capture capture) {
    return capture.shots().stream()
        .filter(s -> !s.receiveOnly())
        .findFirst()
        .map(s -> NutationMethod.pulse(s).seconds() / 2)
        .orElse(0.0);
  }

  private static int indexAt(Fid fid, double seconds) {
    int k = (int) Math.ceil((seconds - fid.startSeconds()) / fid.dwellSeconds());
    return Math.max(0, Math.min(fid.points() - 1, k));
  }

  /**
   * One past the last sample of the first half that stands at the level where a channel clips: the
   * digitiser's, or that of an amplifier before it, which shows as a flat top.
   */
  private static int clippedUntil(Scan scan) {
    Fid fid = scan.fid();
    double top = 0;
    for (int k = 0; k < fid.points(); k++) {
      top = Math.max(top, Math.max(Math.abs(fid.re(k)), Math.abs(fid.im(k))));
    }
    double rail = scan.clippedSamples() > 0 ? (1 - NEAR) * top : Double.POSITIVE_INFINITY;
    return Math.max(clippedUntil(fid.re(), rail), clippedUntil(fid.im(), rail));
  }

  private static int clippedUntil(double[] values, double rail) {
    double[] sorted = values.clone();
    Arrays.sort(sorted);
    double step = GainMethod.step(sorted);
    double low = flatLevel(values, sorted[0], step);
    double high = flatLevel(values, sorted[sorted.length - 1], step);
    int last = 0;
    for (int k = 0; k < values.length / 2; k++) {
      double v = values[k];
      if (Math.abs(v) > rail || v < -low || v > high) {
        last = k + 1;
      }
    }
    return last;
  }

  /** Size from which on a sample counts as cut off at this extreme; infinite where none is. */
  private static double flatLevel(double[] values, double extreme, double step) {
    double size = Math.abs(extreme);
    return size > FEWEST_STEPS * step && GainMethod.flat(values, extreme, step, FLAT_SAMPLES)
        ? (1 - NEAR) * size
        : Double.POSITIVE_INFINITY;
  }
}
