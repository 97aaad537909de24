package coilside.bench;

import coilside.board.BoardException;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.signal.Averager;
import coilside.signal.Detection;
import coilside.signal.Fid;
import coilside.signal.Scan;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.Locale;
import java.util.Optional;

/**
 * The resonance rung: a search over the range, coarse to fine, then a decay fitted on resonance.
 *
 * <p>Each carrier is a question of its own; the threshold is set so that the whole search raises a
 * false alarm with the stated probability. A candidate counts only when a receive-only record at
 * the same carrier does not show it.
 */
final class ResonanceMethod implements Method {
  static final double FALSE_ALARM_PROBABILITY = 1e-4;

  /** A pulse that is a useful flip for any 90-degree pulse from 6 us to 80 us. */
  private static final double SEARCH_PULSE = 10e-6;

  /** How far beside the line the carrier is set to look at it, Hz. */
  private static final double BESIDE = 3000;

  private static final double SEARCH_REST = 0.15;
  private static final int FINAL_SCANS = 4;

  /** By how much the rests before the final scans differ, s: a third of a mains period. */
  private static final double REST_STEP = 6.3e-3;

  /** How much beside an interference line is left out with it, Hz. */
  private static final double LINE_HALF_WIDTH = 500;

  private static final int MOST_PASSES = 6;
  private static final int PULSES = 3;

  /** The part of the spectral width, each side of the carrier, that a step of the search covers. */
  private static final double COVERED = 0.3;

  @Override
  public Rung rung() {
    return Rung.RESONANCE;
  }

  @Override
  public void acquire(Acquisition a) throws BoardException, NotMeasurable {
    Seen first = new Search(a).find();
    settle(a, first);
  }

  /** A line seen at an offset from a carrier, Hz. */
  private record Seen(double carrierHertz, double offsetHertz) {
    double lineHertz() {
      return carrierHertz + offsetHertz;
    }

    /** Where the line is if the spectrum is mirrored. */
    double mirroredHertz() {
      return carrierHertz - offsetHertz;
    }
  }

  /**
   * Looks at the line from a little beside it, clear of the receiver's DC offset, then plays the
   * scans that count with the carrier on it, on all four phases of the pulse in an order that
   * spoils echoes of earlier pulses, and after different rests, so that DC offset, the receiver's
   * mirror image, the mains and echoes of earlier pulses do not all pull the same way.
   */
  private static void settle(Acquisition a, Seen first) throws BoardException, NotMeasurable {
    a.startAgain();
    Readings.noteComponents(a);
    double side = first.offsetHertz() > 0 ? 1 : -1;
    double beside = a.limits().carrierHertz().snap(first.lineHertz() + side * BESIDE);
    Scan scan = a.playAside(shot(a, beside, Choices.gain(a), SEARCH_PULSE, 0, SEARCH_REST));
    Detection d = detectBeside(a, scan.fid());
    double expected = first.lineHertz() - beside;
    if (!d.found() || Math.abs(d.offsetHertz() - expected) > BESIDE) {
      checkMirrored(a, first, beside, d);
      throw new NotMeasurable(
          String.format(
              Locale.ROOT,
              "a line was seen at %.6f MHz, but with the carrier moved there it was gone: %.1f sigma"
                  + " at %.6f MHz against a threshold of %.1f",
              first.lineHertz() * 1e-6,
              d.statisticSigma(),
              (beside + d.offsetHertz()) * 1e-6,
              d.thresholdSigma()),
          List.of(
              "interference that is not there all the time: look at the live noise picture",
              "the field moves faster than the search: let the magnet settle"));
    }
    double carrier = a.limits().carrierHertz().snap(beside + d.offsetHertz());
    double gain = Choices.gain(a);
    while (scan.clippedSamples() > 0 && a.limits().gainDecibels().snap(gain - 10) < gain) {
      gain = a.limits().gainDecibels().snap(gain - 10);
      scan = a.playAside(shot(a, carrier, gain, SEARCH_PULSE, 0, SEARCH_REST));
    }
    for (int i = 0; i < FINAL_SCANS; i++) {
      double rest = SEARCH_REST + REST_STEP * i;
      double phase = BenchShots.phase(a, GainMethod.spoiling(i));
      a.play(shot(a, carrier, gain, SEARCH_PULSE, phase, rest));
    }
    if (Quiet.needed(a)) {
      Quiet.play(a, a.shots().get(0));
    }
  }

  /** The DC offset, and interference that earlier looks without a pulse have shown. */
  private static List<Detection.Excluded> excluded(Acquisition a, double carrier) {
    List<Detection.Excluded> out = new ArrayList<>();
    out.add(new Detection.Excluded(0, BESIDE / 2));
    for (double f : a.guesses().interferenceHertz()) {
      out.add(new Detection.Excluded(f - carrier, LINE_HALF_WIDTH));
    }
    return out;
  }

  private static Detection detectBeside(Acquisition a, Fid raw) {
    Fid fid = withoutOffset(raw);
    return Detection.of(
        fid, sigma(a, fid), excluded(a, raw.carrierHertz()), 1, FALSE_ALARM_PROBABILITY);
  }

  /**
   * Refuses when the line moved up with the carrier, or is found where a mirrored spectrum would
   * have it: with f the offset shown, a true line keeps carrier + f, a mirrored one carrier - f.
   */
  private static void checkMirrored(Acquisition a, Seen first, double moved, Detection atMoved)
      throws BoardException, NotMeasurable {
    double line = first.mirroredHertz();
    double carrier = moved;
    Detection d = atMoved;
    if (!d.found() || Math.abs(carrier - d.offsetHertz() - line) > BESIDE) {
      carrier = a.limits().carrierHertz().snap(line - BESIDE);
      d =
          detectBeside(
              a,
              a.playAside(shot(a, carrier, Choices.gain(a), SEARCH_PULSE, 0, SEARCH_REST)).fid());
      if (!d.found() || Math.abs(carrier - d.offsetHertz() - line) > BESIDE) {
        return;
      }
    }
    throw new NotMeasurable(
        String.format(
            Locale.ROOT,
            "the spectrum is mirrored: with the carrier moved by %+.1f kHz the line moved by %+.1f"
                + " kHz, and it should move by as much the other way; the resonance is at about"
                + " %.6f MHz",
            (carrier - first.carrierHertz()) * 1e-3,
            (d.offsetHertz() - first.offsetHertz()) * 1e-3,
            line * 1e-6),
        List.of(
            "I and Q are exchanged or the board delivers the conjugate: in the [samples] part of the"
                + " device profile turn 'layout' (iq to qi or back) or 'conjugated' (false to true"
                + " or back), one of the two",
            "the two receiver cables are exchanged",
            "the mixer takes the other sideband"));
  }

  private static Shot shot(
      Acquisition a, double carrier, double gain, double pulse, double phase, double rest) {
    return BenchShots.single(
        a, carrier, gain, Choices.pulse(a.limits(), pulse), phase, Choices.rest(a, rest));
  }

  /**
   * The FID without the receiver's DC offset, taken from its second half: the offset would spread
   * into every short window of the detection.
   */
  private static Fid withoutOffset(Fid fid) {
    int n = fid.points();
    double re = 0;
    double im = 0;
    for (int k = n / 2; k < n; k++) {
      re += fid.re(k) / (n - n / 2);
      im += fid.im(k) / (n - n / 2);
    }
    return new Quiet(0, re, im, 0).strip(fid);
  }

  /** The noise of one sample as the noise rung found it, for this dwell time, V. */
  static double sigma(Acquisition a, Fid fid) {
    return a.known().need(Rung.NOISE, "noise_density") / Math.sqrt(fid.dwellSeconds());
  }

  @Override
  public Reading read(Capture capture) throws NotMeasurable {
    Fid fid = DecayMethod.mean(capture.shots(), capture.scans());
    return Readings.resonance(fid, capture);
  }

  /** The coarse search. */
  private static final class Search {
    private final Acquisition a;
    private final double step;
    private final List<Double> carriers;
    private final List<Double> seenAt = new ArrayList<>();
    private final List<Double> seen = new ArrayList<>();
    private final List<Double> interference = new ArrayList<>();
    private double largest;
    private double largestAt;
    private double threshold;

    Search(Acquisition a) {
      this.a = a;
      double width = 1 / Choices.window(a.limits(), BenchShots.FIRST_SECONDS, 4096).dwellSeconds();
      this.step = Math.min(2 * COVERED * width, 0.6 / SEARCH_PULSE);
      this.carriers = carriers();
    }

    private List<Double> carriers() {
      double low = a.settings().searchLowHertz();
      double high = a.settings().searchHighHertz();
      double first =
          Math.min(
              high,
              Math.max(
                  low,
                  a.known().value(Rung.RESONANCE, "larmor_frequency").orElse((low + high) / 2)));
      List<Double> out = new ArrayList<>();
      for (double c = first; c <= high + step / 2; c += step) {
        out.add(Math.min(c, high));
      }
      for (double c = first - step; c >= low - step / 2; c -= step) {
        out.add(Math.max(c, low));
      }
      out.sort(Comparator.comparingDouble(c -> Math.abs(c - first)));
      return out;
    }

    Seen find() throws BoardException, NotMeasurable {
      double longest = SEARCH_PULSE;
      a.plan(0);
      for (int pass = 0; pass < MOST_PASSES; pass++) {
        int averaged = pass == 0 ? 1 : 1 << (pass - 1);
        if (pass > 0 && a.scansLeft() < averaged * carriers.size() + 4) {
          break;
        }
        double pulse = SEARCH_PULSE * Math.pow(2.3, pass % PULSES);
        longest = Math.max(longest, Choices.pulse(a.limits(), pulse));
        for (double c : carriers) {
          Optional<Seen> line = look(c, pulse, averaged);
          if (line.isPresent()) {
            return line.get();
          }
        }
      }
      throw Diagnosis.noResonance(a, largest, largestAt, threshold, longest, interference);
    }

    private Optional<Seen> look(double wanted, double pulse, int averaged)
        throws BoardException, NotMeasurable {
      double carrier = a.limits().carrierHertz().snap(wanted);
      Averager average = new Averager();
      for (int i = 0; i < averaged; i++) {
        double phase = BenchShots.phase(a, i % 2 * Math.PI);
        average.add(
            a.play(shot(a, carrier, Choices.gain(a), pulse, phase, SEARCH_REST)).fid(), phase);
      }
      Shot shot = shot(a, carrier, Choices.gain(a), pulse, 0, SEARCH_REST);
      Fid fid = withoutOffset(average.mean());
      double sigma = sigma(a, fid) / Math.sqrt(averaged);
      Detection d = detect(fid, sigma, carrier);
      threshold = d.thresholdSigma();
      if (d.statisticSigma() > largest) {
        largest = d.statisticSigma();
        largestAt = carrier + d.offsetHertz();
      }
      seenAt.add(carrier);
      seen.add(d.statisticSigma());
      picture(d);
      if (!d.found()) {
        return Optional.empty();
      }
      if (isThereWithoutPulse(shot, d)) {
        interference.add(carrier + d.offsetHertz());
        a.guesses().rememberInterference(carrier + d.offsetHertz());
        a.say(
            String.format(
                Locale.ROOT,
                "the line at %.6f MHz stays with the transmitter off: interference, left out",
                (carrier + d.offsetHertz()) * 1e-6));
        Detection again = detect(fid, sigma, carrier);
        return again.found() && !isThereWithoutPulse(shot, again)
            ? Optional.of(new Seen(carrier, again.offsetHertz()))
            : Optional.empty();
      }
      return Optional.of(new Seen(carrier, d.offsetHertz()));
    }

    private Detection detect(Fid fid, double sigma, double carrier) {
      List<Detection.Excluded> out = new ArrayList<>();
      out.add(new Detection.Excluded(0, 2 / (fid.points() * fid.dwellSeconds())));
      for (double f : interference) {
        if (Math.abs(f - carrier) < fid.widthHertz() / 2) {
          out.add(new Detection.Excluded(f - carrier, LINE_HALF_WIDTH));
        }
      }
      return Detection.of(fid, sigma, out, carriers.size() * MOST_PASSES, FALSE_ALARM_PROBABILITY);
    }

    private boolean isThereWithoutPulse(Shot shot, Detection d) throws BoardException {
      Receive receive = (Receive) shot.steps().get(shot.steps().size() - 1);
      Shot quiet = new Shot(shot.carrierHertz(), shot.gainDecibels(), 0, List.of(receive));
      Fid fid = withoutOffset(a.playAside(quiet).fid());
      Detection without = Detection.of(fid, sigma(a, fid), List.of(), 1, FALSE_ALARM_PROBABILITY);
      return without.found()
          && Math.abs(without.offsetHertz() - d.offsetHertz()) < 200
          && without.statisticSigma() > 0.5 * d.statisticSigma();
    }

    private void picture(Detection d) {
      double[] x = seenAt.stream().mapToDouble(Double::doubleValue).toArray();
      double[] y = seen.stream().mapToDouble(Double::doubleValue).toArray();
      a.show(
          new Picture.Curve(
              Rung.RESONANCE,
              "carrier",
              "Hz",
              "largest peak",
              "sigma",
              x,
              y,
              new double[x.length],
              new double[] {a.settings().searchLowHertz(), a.settings().searchHighHertz()},
              new double[] {d.thresholdSigma(), d.thresholdSigma()},
              new double[0],
              String.format(
                  Locale.ROOT,
                  "%d of %d carriers; threshold %.1f sigma (false alarm %.0e)",
                  x.length,
                  carriers.size(),
                  d.thresholdSigma(),
                  FALSE_ALARM_PROBABILITY)));
    }
  }
}
