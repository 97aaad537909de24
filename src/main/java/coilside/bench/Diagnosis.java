package coilside.bench;

import coilside.board.BoardException;
import coilside.signal.Scan;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;

/** Turns what was measured on the way to a refusal into likely causes, most likely first. */
final class Diagnosis {
  /** Ring-down counts as seen when the first samples stand this far above the noise. */
  private static final double RING_SIGMA = 8;

  private Diagnosis() {}

  /** The refusal of a search that found nothing. */
  static NotMeasurable noResonance(
      Acquisition a,
      double largest,
      double largestAt,
      double threshold,
      double pulse,
      List<Double> interference)
      throws BoardException {
    double low = a.settings().searchLowHertz();
    double high = a.settings().searchHighHertz();
    int scans = a.scansPlayed();
    Ring ring = ring(a, pulse);
    boolean clipping = a.scans().stream().anyMatch(s -> s.clippedSamples() > 0);
    List<String> causes = new ArrayList<>();
    if (!ring.seen()) {
      causes.add(
          String.format(
              Locale.ROOT,
              "the pulse does not reach the coil: no ring-down was seen right after a %.1f us pulse"
                  + " (%.1f sigma); look at the amplifier's supply, its gate, the cable to the"
                  + " coil, the amplitude setting",
              pulse * 1e6,
              ring.sigma()));
    }
    if (clipping) {
      causes.add(
          "the receiver clipped during the search, which hides small signals: lower the gain or"
              + " find the interference with the live noise picture");
    }
    if (!interference.isEmpty()) {
      causes.add(
          String.format(
              Locale.ROOT,
              "%d interference lines stay with the transmitter off (the first at %.6f MHz) and were"
                  + " left out: if the resonance lies under one, change the field a little",
              interference.size(),
              interference.get(0) * 1e-6));
    }
    causes.add("no sample in the coil, or it lies outside the coil or the homogeneous field");
    causes.add(
        String.format(
            Locale.ROOT,
            "the field is outside the range: %.6f MHz to %.6f MHz are %.2f mT to %.2f mT for %s;"
                + " measure the field with a Hall probe, or search wider with --search; only %s is looked"
                + " for, so another nucleus needs its own range",
            low * 1e-6,
            high * 1e-6,
            low / a.settings().nucleus().larmorHertzPerTesla() * 1e3,
            high / a.settings().nucleus().larmorHertzPerTesla() * 1e3,
            a.settings().nucleus().symbol(),
            a.settings().nucleus().symbol()));
    if (ring.seen()) {
      causes.add("the coil is tuned elsewhere: tune and match it at the expected resonance");
    }
    return new NotMeasurable(
        String.format(
            Locale.ROOT,
            "no resonance within %.6f-%.6f MHz above %.1f sigma (false-alarm rate %.0e for the whole"
                + " search) after %d scans; largest %.1f sigma at %.6f MHz",
            low * 1e-6,
            high * 1e-6,
            threshold,
            ResonanceMethod.FALSE_ALARM_PROBABILITY,
            scans,
            largest,
            largestAt * 1e-6),
        causes);
  }

  /** Whether ring-down is seen after a pulse, and how far above the noise. */
  record Ring(boolean seen, double sigma) {}

  private static Ring ring(Acquisition a, double pulse) throws BoardException {
    double dwell = a.limits().dwellSeconds().snap(1e-6);
    Choices.Window window = new Choices.Window(Choices.points(a.limits(), 512), dwell);
    Scan scan =
        a.play(
            BenchShots.single(
                a,
                Choices.carrier(a),
                Choices.gain(a),
                Choices.pulse(a.limits(), pulse),
                0,
                0.01,
                a.limits().waitSeconds().min(),
                window));
    int n = scan.fid().points();
    double noise = 0;
    for (int k = n / 2; k < n; k++) {
      noise += Math.pow(scan.fid().magnitude(k), 2);
    }
    double sigma = Math.sqrt(noise / (2.0 * (n - n / 2)));
    double first = 0;
    for (int k = 0; k < Math.min(16, n); k++) {
      first = Math.max(first, scan.fid().magnitude(k));
    }
    double ratio = first / sigma;
    return new Ring(ratio > RING_SIGMA, ratio);
  }
}
