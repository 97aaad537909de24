package coilside.bench;

import coilside.board.BoardException;
import coilside.board.BoardLimits;
import coilside.quantity.Measured;
import coilside.quantity.Unit;
import coilside.shot.Shot;
import coilside.signal.Averager;
import coilside.signal.Fid;
import coilside.signal.Fourier;
import coilside.signal.MatchedProjection;
import coilside.signal.Scan;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.Optional;

/**
 * The gain rung: the highest receiver gain at which the largest signal of a few pulse widths leaves
 * headroom at the digitiser. It first guesses T1, so that the signal it looks at is a recovered
 * one.
 */
final class GainMethod implements Method {
  /** Largest part of full scale that the signal may fill: headroom of 6 dB. */
  static final double TARGET = 0.5;

  private static final double[] GUESS_RESTS = {0.02, 0.06, 0.2, 0.6, 2, 6};
  private static final double[] WIDTHS = {10e-6, 25e-6, 60e-6};
  private static final double GUESS_WIDTH = 15e-6;

  /** T1, flip angle, amplitude and what stood before the first scan are unknown. */
  private static final int FEWEST_FOR_GUESS = 4;

  /** The longest T1 that fits is taken this much longer. */
  private static final double MARGIN = 1.1;

  /** So many samples at exactly the largest value are a flat top. */
  private static final int FLAT_SAMPLES = 12;

  /**
   * ... and this many times as many as stand one step lower. The crest of a slow signal is
   * parabolic: so many steps of the digitiser down it takes the root of their number, at most 1 :
   * (root 2 - 1) = 2.4 times as many samples in its top step as in the next.
   */
  private static final double FLATNESS = 3;

  /** ... where the signal spans more steps of the digitiser than this. */
  private static final int FEWEST_STEPS = 100;

  /** Rest after which the magnetisation counts as recovered, in T1: 99.3 %, common practice. */
  static final double RECOVERED = 5;

  @Override
  public Rung rung() {
    return Rung.GAIN;
  }

  @Override
  public void acquire(Acquisition a) throws BoardException, NotMeasurable {
    a.plan(GUESS_RESTS.length + WIDTHS.length + 1);
    double rest = Choices.rest(a, RECOVERED * guessT1(a));
    double gain = Choices.gain(a);
    double bestWidth = 0;
    double bestPeak = 0;
    for (double wanted : WIDTHS) {
      double width = Choices.pulse(a.limits(), wanted);
      Scan scan = a.playAside(BenchShots.single(a, gain, width, 0, rest));
      while (scan.clippedSamples() > 0 && lower(a, gain, 10) < gain) {
        gain = lower(a, gain, 10);
        bestPeak = 0;
        scan = a.playAside(BenchShots.single(a, gain, width, 0, rest));
      }
      double atUnity = scan.peakFraction() / Math.pow(10, gain / 20);
      if (atUnity > bestPeak) {
        bestPeak = atUnity;
        bestWidth = width;
      }
    }
    BoardLimits.Range range = a.limits().gainDecibels();
    double wanted = 20 * Math.log10(TARGET / bestPeak);
    gain = floor(range, Math.min(range.max(), Math.max(range.min(), wanted)));
    double rail = Double.NaN;
    for (int turn = 0; turn < 12; turn++) {
      a.startAgain();
      Shot shot = BenchShots.single(a, gain, bestWidth, 0, rest);
      Scan scan = a.play(shot);
      boolean flat = flatTopped(scan);
      if (flat) {
        rail = scan.peakFraction();
      }
      boolean lowEnough = scan.peakFraction() <= (Double.isNaN(rail) ? 1.2 * TARGET : rail / 1.4);
      if (!flat && lowEnough || lower(a, gain, 3) >= gain) {
        break;
      }
      gain = lower(a, gain, 3);
    }
    if (!Double.isNaN(rail)) {
      a.note("rail_fraction", rail);
    }
    a.note("noise_density", a.known().need(Rung.NOISE, "noise_density"));
    a.note("highest_gain", range.max());
    a.note("lowest_gain", range.min());
  }

  /**
   * A phase that grows quadratically with the number of the scan, in quarter turns, so that echoes
   * of earlier pulses do not add up (Zur, Wood and Neuringer, Magn. Reson. Med. 21, 251, 1991).
   */
  static double spoiling(int scan) {
    return scan * (scan + 1) / 2 % 4 * Math.PI / 2;
  }

  /** The receiver's DC offset at this gain, by a scan without a pulse. */
  private static Quiet quiet(Acquisition a, double gain) throws BoardException {
    Shot like = BenchShots.single(a, gain, Choices.pulse(a.limits(), GUESS_WIDTH), 0, 0);
    Shot shot =
        new Shot(
            like.carrierHertz(),
            gain,
            Choices.rest(a, GUESS_RESTS[0]),
            List.of(like.steps().get(like.steps().size() - 1)));
    Fid fid = a.playAside(shot).fid();
    double re = 0;
    double im = 0;
    for (int k = 0; k < fid.points(); k++) {
      re += fid.re(k) / fid.points();
      im += fid.im(k) / fid.points();
    }
    return new Quiet(0, re, im, 0);
  }

  private static Fid turned(Fid fid, double phase) {
    Averager one = new Averager();
    one.add(fid, phase);
    return one.mean();
  }

  /**
   * Whether the signal is cut off before the digitiser: many samples stand at exactly the same
   * largest value and few just below it.
   */
  static boolean flatTopped(Scan scan) {
    Fid fid = scan.fid();
    return flatTopped(fid.re()) || flatTopped(fid.im());
  }

  private static boolean flatTopped(double[] values) {
    double[] sorted = values.clone();
    java.util.Arrays.sort(sorted);
    int n = sorted.length;
    double step = step(sorted);
    double size = Math.max(sorted[n - 1], -sorted[0]);
    return size > FEWEST_STEPS * step
        && (flat(values, sorted[n - 1], step, FLAT_SAMPLES)
            || flat(values, sorted[0], step, FLAT_SAMPLES));
  }

  /** The smallest step between sorted values, which the digitiser makes. */
  static double step(double[] sorted) {
    double step = Double.POSITIVE_INFINITY;
    for (int k = 1; k < sorted.length; k++) {
      double d = sorted[k] - sorted[k - 1];
      if (d > 0) {
        step = Math.min(step, d);
      }
    }
    return step;
  }

  /** Whether so many samples stand at this extreme, and few one step of the digitiser inside it. */
  static boolean flat(double[] values, double extreme, double step, int fewest) {
    int at = 0;
    int beside = 0;
    for (double v : values) {
      double steps = Math.abs(v - extreme) / step;
      at += steps < 0.5 ? 1 : 0;
      beside += steps >= 0.5 && steps < 1.5 ? 1 : 0;
    }
    return at >= fewest && at >= FLATNESS * beside;
  }

  private static double floor(BoardLimits.Range range, double x) {
    double snapped = range.snap(x);
    return snapped > x + 1e-9 && snapped - range.step() >= range.min()
        ? snapped - range.step()
        : snapped;
  }

  private static double lower(Acquisition a, double gain, double decibels) {
    return a.limits().gainDecibels().snap(gain - decibels);
  }

  /** T1 as it may be at the longest, from what is known, told, or a few scans with rising rests. */
  static double guessT1(Acquisition a) throws BoardException {
    if (a.known().finding(Rung.T1).isPresent()
        && a.known().finding(Rung.T1).get().conditions().sample().equals(a.settings().sample())) {
      return 1.1 * a.known().need(Rung.T1, "t1");
    }
    if (a.settings().expectedT1Seconds().isPresent()) {
      return a.settings().expectedT1Seconds().getAsDouble();
    }
    if (a.guesses().t1Seconds().isPresent()) {
      return a.guesses().t1Seconds().getAsDouble();
    }
    List<Fid> fids = new ArrayList<>();
    List<Double> rests = new ArrayList<>();
    double gain = Choices.gain(a);
    double guess = 0;
    Quiet quiet = quiet(a, gain);
    double played =
        BenchShots.single(a, gain, Choices.pulse(a.limits(), GUESS_WIDTH), 0, 0).playedSeconds();
    for (int next = 0; next < GUESS_RESTS.length; ) {
      double rest = GUESS_RESTS[next++];
      double width = Choices.pulse(a.limits(), GUESS_WIDTH);
      double phase = BenchShots.phase(a, spoiling(a.scansPlayed()));
      Scan scan = a.playAside(BenchShots.single(a, gain, width, phase, Choices.rest(a, rest)));
      if ((scan.clippedSamples() > 0 || flatTopped(scan)) && lower(a, gain, 10) < gain) {
        gain = lower(a, gain, 10);
        fids.clear();
        rests.clear();
        quiet = quiet(a, gain);
        next = 0;
        continue;
      }
      fids.add(turned(quiet.strip(scan.fid()), phase));
      rests.add(scan.restSeconds() + played);
      if (fids.size() < FEWEST_FOR_GUESS) {
        continue;
      }
      MatchedProjection p =
          MatchedProjection.bySingularVector(fids, ResonanceMethod.sigma(a, scan.fid()));
      double[] amplitudes = new double[fids.size()];
      double[] r = new double[fids.size()];
      for (int k = 0; k < r.length; k++) {
        amplitudes[k] = p.amplitude(k).value();
        r[k] = rests.get(k);
      }
      guess = MARGIN * RecoveryGuess.longest(r, amplitudes, p.uncertainty());
      if (guess < rest) {
        break;
      }
    }
    a.guesses().rememberT1(guess);
    a.say(String.format(Locale.ROOT, "T1 is surely below %.3g s: rests follow from that", guess));
    return guess;
  }

  @Override
  public Reading read(Capture capture) {
    Shot shot = capture.shots().get(capture.shots().size() - 1);
    Scan scan = capture.scans().get(capture.scans().size() - 1);
    Fid fid = scan.fid();
    double largest = 0;
    for (int k = 0; k < fid.points(); k++) {
      largest = Math.max(largest, Math.max(Math.abs(fid.re(k)), Math.abs(fid.im(k))));
    }
    double sigma = Notes.number(capture, "noise_density") / Math.sqrt(fid.dwellSeconds());
    Map<String, Measured> values = new LinkedHashMap<>();
    values.put(
        "receiver_gain",
        Measured.withoutUncertainty(
            shot.gainDecibels(), Unit.DECIBEL, "a setting of the board, nominal"));
    values.put(
        "peak_fraction",
        Measured.of(scan.peakFraction(), scan.peakFraction() * sigma / largest, Unit.ONE));
    List<String> warnings = new ArrayList<>();
    if (scan.clippedSamples() > 0) {
      warnings.add(
          String.format(
              Locale.ROOT,
              "%d samples clip at the lowest gain of %.0f dB: put an attenuator before the"
                  + " receiver or use a smaller sample",
              scan.clippedSamples(),
              shot.gainDecibels()));
    } else if (!Double.isNaN(Notes.number(capture, "rail_fraction", Double.NaN))) {
      warnings.add(
          String.format(
              Locale.ROOT,
              "the receiver clips before the digitiser: from %.1f %% of the digitiser's range on the"
                  + " signal is cut off flat; an amplifier in front of it gives out. The gain was"
                  + " lowered to %.0f dB to stay clear of that",
              100 * Notes.number(capture, "rail_fraction", Double.NaN),
              shot.gainDecibels()));
    } else if (scan.peakFraction() < 0.1
        && shot.gainDecibels() >= Notes.number(capture, "highest_gain") - 1e-9) {
      warnings.add(
          String.format(
              Locale.ROOT,
              "at the highest gain of %.0f dB the signal fills only %.1f %% of the digitiser",
              shot.gainDecibels(),
              100 * scan.peakFraction()));
    }
    Picture picture =
        new Picture.Trace(
            Rung.GAIN,
            fid,
            Optional.empty(),
            0,
            Optional.of(Fourier.spectrum(fid)),
            List.of(),
            String.format(
                Locale.ROOT,
                "gain %.0f dB, the largest signal fills %.0f %% of the digitiser",
                shot.gainDecibels(),
                100 * scan.peakFraction()));
    return new Reading(values, warnings, picture);
  }
}
