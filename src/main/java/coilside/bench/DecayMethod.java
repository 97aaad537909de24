package coilside.bench;

import coilside.board.BoardException;
import coilside.fit.DecayFit;
import coilside.fit.DecayResult;
import coilside.fit.NotDetermined;
import coilside.quantity.Measured;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.shot.Wait;
import coilside.signal.Averager;
import coilside.signal.Fid;
import coilside.signal.Scan;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalDouble;

/**
 * The T2* rung, and every averaged FID: 90-degree pulses with the four-step quadrature phase cycle,
 * averaged until the decay time is known well enough, fitted in the time domain.
 */
final class DecayMethod implements Method {
  private static final int MOST_POINTS = 8192;

  /** Record length in T2*: longer adds no information, only noise (bound within 0.1 %). */
  private static final double RECORD = 5;

  private static final int CYCLE = 4;

  @Override
  public Rung rung() {
    return Rung.T2STAR;
  }

  @Override
  public void acquire(Acquisition a) throws BoardException, NotMeasurable {
    double target = a.settings().t2Target();
    Choices.Window window = window(a);
    int wanted = CYCLE;
    while (a.scans().size() < wanted) {
      int left = Math.min(wanted - a.scans().size(), a.scansLeft());
      a.plan(a.scansPlayed() + left);
      for (int i = 0; i < left; i++) {
        a.play(
            shot(
                a,
                a.scans().size(),
                "",
                window.points(),
                window.dwellSeconds(),
                OptionalDouble.empty()));
        a.step("T2*", a.scans().size() / (double) wanted);
        show(a);
      }
      if (a.scansLeft() < CYCLE) {
        break;
      }
      try {
        DecayResult fit = DecayFit.fit(mean(a.shots(), a.scans()));
        double miss = fit.t2Star().relative() / target;
        if (miss > 1) {
          double more = a.scans().size() * miss * miss;
          wanted = (int) Math.min(1e6, CYCLE * Math.ceil(more / CYCLE));
        }
      } catch (NotDetermined e) {
        wanted = 2 * a.scans().size();
      }
      if (wanted > a.scans().size() + a.scansLeft()) {
        wanted = CYCLE * ((a.scans().size() + a.scansLeft()) / CYCLE);
      }
    }
    if (Quiet.needed(a)) {
      Quiet.play(a, a.shots().get(0));
    }
    a.known()
        .value(Rung.T1, "t1")
        .ifPresent(t1 -> a.note("unrecovered", Math.exp(-repetition(a) / t1)));
    a.note("target", target);
    Readings.noteComponents(a);
  }

  private static void show(Acquisition a) {
    try {
      a.show(
          Readings.decay(mean(a.shots(), a.scans()), a.shots(), a.scans(), Double.NaN, false)
              .picture());
    } catch (NotMeasurable e) {
      a.say(e.getMessage());
    }
  }

  /** The window that T2* advises, from a scan of its own where T2* is not known yet. */
  private static Choices.Window window(Acquisition a) throws BoardException {
    double t2Star = a.known().value(Rung.T2STAR, "t2_star").orElse(Double.NaN);
    Choices.Window first = Choices.window(a.limits(), BenchShots.FIRST_SECONDS, MOST_POINTS);
    if (Double.isNaN(t2Star)) {
      Scan scan =
          a.playAside(shot(a, 0, "", first.points(), first.dwellSeconds(), OptionalDouble.empty()));
      try {
        t2Star = DecayFit.fit(scan.fid()).t2Star().value();
      } catch (NotDetermined e) {
        return first;
      }
    }
    double longest = 0.9 * a.limits().maxReceiveSeconds();
    return Choices.window(a.limits(), Math.min(longest, RECORD * t2Star), MOST_POINTS);
  }

  /**
   * Plays an averaged FID as the ladder stands: zero or empty stands for what the ladder advises.
   */
  static void play(
      Acquisition a, int scans, int points, double dwell, String cycle, OptionalDouble carrier)
      throws BoardException, NotMeasurable {
    if (a.known().value(Rung.NUTATION, "pulse_90").isEmpty()) {
      throw new NotMeasurable(
          "the 90-degree pulse is not known yet, so an FID would be of an unknown flip angle",
          List.of("climb the ladder first: coilside ready"));
    }
    int n = points;
    double d = dwell;
    if (n == 0 || d == 0) {
      Choices.Window advised = window(a);
      n = n == 0 ? advised.points() : n;
      d = d == 0 ? advised.dwellSeconds() : d;
    }
    a.plan(a.scansPlayed() + scans);
    Readings.noteComponents(a);
    for (int i = 0; i < scans; i++) {
      a.play(shot(a, i, cycle, n, d, carrier));
      a.step("FID", (i + 1) / (double) scans);
      if ((i & (i + 1)) == 0) {
        show(a);
      }
    }
  }

  /**
   * Scan {@code number} of an FID: its phase follows from its place in the phase cycle. The
   * receiver side of the cycle is done on the samples, where it turns the receiver's own errors
   * away.
   */
  static Shot shot(
      Acquisition a, int number, String cycle, int points, double dwell, OptionalDouble carrier) {
    double phase = cycle.equals("none") ? 0 : number % CYCLE * Math.PI / 2;
    Choices.Window w =
        points > 0 && dwell > 0
            ? new Choices.Window(points, dwell)
            : Choices.window(a.limits(), BenchShots.FIRST_SECONDS, MOST_POINTS);
    double f =
        carrier.isPresent()
            ? a.limits().carrierHertz().snap(carrier.getAsDouble())
            : Choices.carrier(a);
    return new Shot(
        f,
        Choices.gain(a),
        Choices.rest(a, repetition(a)),
        List.of(
            new Pulse(Choices.pulse90OrGuess(a), phase, Choices.amplitude(a)),
            new Wait(Choices.delay(a)),
            new Receive(w.points(), w.dwellSeconds(), 0)));
  }

  private static double repetition(Acquisition a) {
    return a.known()
        .value(Rung.T1, "repetition_time")
        .orElse(GainMethod.RECOVERED * a.guesses().t1Seconds().orElse(0.3));
  }

  /**
   * The average of scans, each turned back by the phase of its first pulse, without the
   * interference that a receive-only scan among them shows.
   */
  static Fid mean(List<Shot> shots, List<Scan> scans) {
    Optional<Quiet> quiet = Quiet.find(shots, scans);
    Averager average = new Averager();
    for (int i = 0; i < scans.size(); i++) {
      if (!shots.get(i).receiveOnly()) {
        Fid fid = scans.get(i).fid();
        average.add(
            quiet.isPresent() ? quiet.get().strip(fid) : fid, BenchShots.firstPhase(shots.get(i)));
      }
    }
    return average.mean();
  }

  @Override
  public Reading read(Capture capture) throws NotMeasurable {
    Reading reading =
        Readings.decay(
            mean(capture.shots(), capture.scans()),
            capture.shots(),
            capture.scans(),
            Notes.number(capture, "target", Double.NaN),
            Readings.twoComponents(capture));
    return withHonestAmplitude(reading, capture);
  }

  /**
   * The amplitude stands for what a perfect 90-degree pulse on recovered spins would give, drawn
   * back to the pulse's centre. Its uncertainty takes in what the repetition time leaves
   * unrecovered and that a strong pulse holds the spins together, so that the decay starts 2/pi of
   * the pulse before its end and not half of it.
   */
  private static Reading withHonestAmplitude(Reading reading, Capture capture) {
    Measured amplitude = reading.values().get("amplitude");
    Measured t2Star = reading.values().get("t2_star");
    double pulse =
        capture.shots().stream()
            .filter(s -> !s.receiveOnly())
            .mapToDouble(s -> NutationMethod.pulse(s).seconds())
            .findFirst()
            .orElse(0);
    double held = (2 / Math.PI - 0.5) * pulse / t2Star.value();
    double unrecovered = Notes.number(capture, "unrecovered", 0);
    Map<String, Measured> values = new LinkedHashMap<>(reading.values());
    values.put(
        "amplitude",
        Measured.of(
            amplitude.value(),
            Math.hypot(amplitude.u(), amplitude.value() * Math.hypot(held, unrecovered)),
            amplitude.unit()));
    return new Reading(values, reading.warnings(), reading.picture());
  }
}
