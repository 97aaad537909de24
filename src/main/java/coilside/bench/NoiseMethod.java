package coilside.bench;

import coilside.board.BoardException;
import coilside.quantity.Measured;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.signal.Fid;
import coilside.signal.Fourier;
import coilside.signal.InterferenceLines;
import coilside.signal.NoiseEstimate;
import coilside.signal.Scan;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.Optional;

/** The noise rung: receive-only records at the highest gain that does not clip. */
final class NoiseMethod implements Method {
  private static final int RECORDS = 3;
  private static final int POINTS = 8192;
  private static final double TOO_FULL = 0.5;

  @Override
  public Rung rung() {
    return Rung.NOISE;
  }

  @Override
  public void acquire(Acquisition a) throws BoardException, NotMeasurable {
    a.plan(RECORDS);
    double gain = a.limits().gainDecibels().max();
    double dwell = Choices.wideDwell(a.limits());
    int points = Choices.points(a.limits(), POINTS);
    double carrier = Choices.carrier(a);
    double rest = Choices.rest(a, a.known().value(Rung.T1, "repetition_time").orElse(0.1));
    while (a.scans().size() < RECORDS) {
      Shot shot = new Shot(carrier, gain, rest, List.of(new Receive(points, dwell, 0)));
      Scan scan = a.play(shot);
      if (scan.peakFraction() > TOO_FULL) {
        double lower = a.limits().gainDecibels().snap(gain - 12);
        if (lower >= gain) {
          if (scan.clippedSamples() > points / 100) {
            throw new NotMeasurable(
                String.format(
                    Locale.ROOT,
                    "with the transmitter off the receiver clips at its lowest gain of %.0f dB:"
                        + " %d of %d samples stand at the rails",
                    gain,
                    scan.clippedSamples(),
                    2 * points),
                List.of(
                    "strong interference or a preamplifier that oscillates: look at the live noise"
                        + " picture, short the receiver input and look again",
                    "a DC fault at the digitiser's input"));
          }
        } else {
          a.say(
              String.format(
                  Locale.ROOT,
                  "noise alone fills %.0f %% of the digitiser at %.0f dB: trying %.0f dB",
                  100 * scan.peakFraction(),
                  gain,
                  lower));
          gain = lower;
          a.startAgain();
          continue;
        }
      }
      a.show(picture(a.scans(), Optional.empty()));
    }
  }

  @Override
  public Reading read(Capture capture) throws NotMeasurable {
    List<Fid> records = capture.scans().stream().map(Scan::fid).toList();
    NoiseEstimate noise;
    try {
      noise = NoiseEstimate.of(records);
    } catch (IllegalArgumentException e) {
      throw new NotMeasurable(
          "the noise record cannot be used: " + e.getMessage(),
          List.of(
              "the receiver is not sampling: cable, power, or sample format in the profile",
              "the gain is so low that noise stays below one step of the digitiser"));
    }
    Map<String, Measured> values = new LinkedHashMap<>();
    values.put("noise_density", noise.density());
    values.put("dc_offset", noise.offset());
    List<String> warnings = new ArrayList<>();
    for (InterferenceLines.Line line :
        noise.lines().subList(0, Math.min(3, noise.lines().size()))) {
      warnings.add(
          String.format(
              Locale.ROOT,
              "interference line at %.6f MHz (offset %+.0f Hz), %.3g uV, there with the"
                  + " transmitter off",
              (records.get(0).carrierHertz() + line.offsetHertz().value()) * 1e-6,
              line.offsetHertz().value(),
              line.amplitude().value() * 1e6));
    }
    if (noise.lines().size() > 3) {
      warnings.add((noise.lines().size() - 3) + " weaker interference lines besides");
    }
    return new Reading(values, warnings, picture(capture.scans(), Optional.of(noise)));
  }

  private static Picture picture(List<Scan> scans, Optional<NoiseEstimate> noise) {
    Fid last = scans.get(scans.size() - 1).fid();
    String caption =
        noise
            .map(
                n ->
                    String.format(
                        Locale.ROOT,
                        "noise density %.3g nV/Hz^0.5, %d lines",
                        n.density().value() * 1e9,
                        n.lines().size()))
            .orElse("noise, transmitter off");
    return new Picture.Trace(
        Rung.NOISE,
        last,
        Optional.empty(),
        0,
        Optional.of(Fourier.spectrum(last)),
        List.of(),
        caption);
  }
}
