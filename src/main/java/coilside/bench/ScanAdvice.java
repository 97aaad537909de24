package coilside.bench;

import coilside.fit.RepetitionAdvice;
import coilside.quantity.ConciseFormat;
import coilside.quantity.Measured;
import coilside.quantity.Unit;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Optional;

/**
 * Repetition time and flip angle for the sample as it was measured: for full recovery, for the best
 * SNR in a given time, and how long a wanted SNR takes. One sentence a line; empty until T1, the
 * 90-degree pulse and the SNR are known.
 *
 * <p>Formulas and their source: {@link RepetitionAdvice}.
 */
public final class ScanAdvice {
  /** What a scan needs besides its record, s: pulse, receive delay. */
  private static final double BESIDES = 1e-3;

  /** Record length in T2* that loses nothing. */
  private static final double RECORD = 5;

  private ScanAdvice() {}

  /** From the rungs as they stand. */
  public static List<String> lines(List<RungStatus> ladder) {
    return lines(ladder, Double.NaN);
  }

  /**
   * From the rungs as they stand.
   *
   * @param wantedSnr the SNR wanted; NaN for ten times that of one scan
   */
  public static List<String> lines(List<RungStatus> ladder, double wantedSnr) {
    Optional<Finding> pulse = good(ladder, Rung.NUTATION);
    Optional<Finding> t1 = good(ladder, Rung.T1);
    Optional<Finding> decay = good(ladder, Rung.T2STAR);
    if (pulse.isEmpty() || t1.isEmpty() || decay.isEmpty()) {
      return List.of();
    }
    return lines(
        pulse.get().value("pulse_90").value(),
        t1.get().value("t1").value(),
        decay.get().value("t2_star").value(),
        // The mean of n scans has root n times the SNR of one.
        decay.get().value("snr").value() / Math.sqrt(Math.max(1, decay.get().scans())),
        wantedSnr);
  }

  private static Optional<Finding> good(List<RungStatus> ladder, Rung rung) {
    return ladder.stream()
        .filter(s -> s.rung() == rung)
        .flatMap(s -> s.finding().stream())
        .filter(f -> !f.refused())
        .findFirst();
  }

  static List<String> lines(
      double pulse90, double t1, double t2Star, double snrOfOne, double wantedSnr) {
    double wanted = Double.isNaN(wantedSnr) ? 10 * snrOfOne : wantedSnr;
    double shortest = RECORD * t2Star + BESIDES;
    List<String> out = new ArrayList<>();
    out.add(
        String.format(
            Locale.ROOT,
            "amplitudes that must be true: 90-degree pulses every %s or more (5 T1, 99.3 %%"
                + " recovered)",
            seconds(GainMethod.RECOVERED * t1)));
    RepetitionAdvice.Advice ninety = RepetitionAdvice.ninety(shortest, t1, snrOfOne, wanted);
    out.add(
        String.format(
            Locale.ROOT,
            "best SNR with 90-degree pulses: every %s (%.2f T1); in the same time %.2f times the SNR"
                + " of 5 T1",
            seconds(ninety.repetitionSeconds()),
            ninety.repetitionSeconds() / t1,
            ninety.gainOverFullRecovery()));
    RepetitionAdvice.Advice ernst = RepetitionAdvice.ernst(shortest, t1, snrOfOne, wanted);
    out.add(
        String.format(
            Locale.ROOT,
            "best SNR at all: pulses of %.0f degrees (Ernst angle, %.3g us) every %s, as quick as"
                + " the record of 5 T2* allows; %.2f times the SNR of 5 T1",
            Math.toDegrees(ernst.flipRadians()),
            pulse90 * 1e6 * ernst.flipRadians() / (Math.PI / 2),
            seconds(ernst.repetitionSeconds()),
            ernst.gainOverFullRecovery()));
    RepetitionAdvice.Advice full =
        RepetitionAdvice.at(GainMethod.RECOVERED * t1, Math.PI / 2, t1, snrOfOne, wanted);
    out.add(
        String.format(
            Locale.ROOT,
            "an SNR of %.4g takes %d scans in %s with 5 T1, %d scans in %s at the Ernst angle",
            wanted,
            full.scans(),
            seconds(full.seconds()),
            ernst.scans(),
            seconds(ernst.seconds())));
    return out;
  }

  private static String seconds(double value) {
    return ConciseFormat.ascii(
        Measured.withoutUncertainty(
            Double.parseDouble(String.format(Locale.ROOT, "%.3g", value)), Unit.SECOND, "advice"));
  }
}
