package coilside.bench;

import coilside.quantity.Measured;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Optional;

/** The rules by which findings go stale, one place for all of them. */
final class Staleness {
  /** Relative change of the 90-degree pulse that leaves what rests on it standing. */
  static final double PULSE_TOLERANCE = 0.03;

  /** Offset over nutation rate that leaves a nutation curve standing (0.5 % at 0.1). */
  static final double OFFSET_TOLERANCE = 0.1;

  /** Change of the magnet's or sample's temperature that leaves relaxation times standing, K. */
  static final double TEMPERATURE_TOLERANCE = 2;

  private Staleness() {}

  /**
   * How a rung ages.
   *
   * @param valueName the value whose drift counts; empty where none does
   * @param tolerance how far it may move, in its unit
   * @param unit the unit for people
   * @param lifetimeSeconds how long it is trusted while no drift is learned, s
   */
  record Ageing(String valueName, double tolerance, String unit, double lifetimeSeconds) {}

  /** What changed since the finding that matters to it, one sentence each. */
  static List<String> changedConditions(Finding finding, Conditions now) {
    Conditions then = finding.conditions();
    List<String> out = new ArrayList<>();
    Rung rung = finding.rung();
    if (!then.board().equals(now.board())) {
      out.add("the board was '" + then.board() + "', now it is '" + now.board() + "'");
    }
    if (!then.profileDigest().equals(now.profileDigest())) {
      out.add("the device profile was changed");
    }
    if (!then.coil().equals(now.coil()) && rung != Rung.T1 && rung != Rung.T2) {
      out.add("the coil note was '" + then.coil() + "', now it is '" + now.coil() + "'");
    }
    boolean sampleMatters = rung != Rung.NOISE && rung != Rung.RINGDOWN;
    if (sampleMatters && !then.sample().equals(now.sample())) {
      out.add("the sample was '" + then.sample() + "', now it is '" + now.sample() + "'");
    }
    boolean amplitudeMatters = rung == Rung.GAIN || rung == Rung.RINGDOWN || rung == Rung.NUTATION;
    if (amplitudeMatters && Math.abs(then.amplitude() - now.amplitude()) > 1e-9) {
      out.add(
          String.format(
              Locale.ROOT,
              "the transmit amplitude was %.4g, now it is %.4g",
              then.amplitude(),
              now.amplitude()));
    }
    boolean warmthMatters = rung == Rung.T1 || rung == Rung.T2;
    if (warmthMatters
        && then.temperatureCelsius().isPresent()
        && now.temperatureCelsius().isPresent()) {
      double moved =
          now.temperatureCelsius().getAsDouble() - then.temperatureCelsius().getAsDouble();
      if (Math.abs(moved) > TEMPERATURE_TOLERANCE) {
        out.add(
            String.format(
                Locale.ROOT,
                "the temperature moved by %+.1f K, more than the %.0f K relaxation times bear",
                moved,
                TEMPERATURE_TOLERANCE));
      }
    }
    return out;
  }

  /** Whether a rung beneath moved by more than its effect allows; the reason in words. */
  static Optional<String> moved(Finding above, Finding then, Finding now) {
    return switch (then.rung()) {
      case RESONANCE -> resonanceMoved(above, then, now);
      case NUTATION -> pulseMoved(then, now);
      case T1 -> recoveryGotSlower(then, now);
      case RINGDOWN -> delayGrew(then, now);
      case NOISE, GAIN, T2STAR, T2 -> Optional.empty();
    };
  }

  private static Optional<String> resonanceMoved(Finding above, Finding then, Finding now) {
    if (above.rung() != Rung.NUTATION) {
      return Optional.empty();
    }
    double moved = now.value("larmor_frequency").value() - then.value("larmor_frequency").value();
    Measured rate = above.values().get("nutation_rate");
    if (rate == null || Math.abs(moved) <= OFFSET_TOLERANCE * rate.value()) {
      return Optional.empty();
    }
    return Optional.of(
        String.format(
            Locale.ROOT,
            "the resonance moved by %+.0f Hz, more than a tenth of the nutation rate of %.0f Hz",
            moved,
            rate.value()));
  }

  private static Optional<String> pulseMoved(Finding then, Finding now) {
    double ratio = now.value("pulse_90").value() / then.value("pulse_90").value();
    if (Math.abs(ratio - 1) <= PULSE_TOLERANCE) {
      return Optional.empty();
    }
    return Optional.of(
        String.format(
            Locale.ROOT,
            "the 90-degree pulse moved by %+.1f %%, more than the %.0f %% it may",
            100 * (ratio - 1),
            100 * PULSE_TOLERANCE));
  }

  private static Optional<String> recoveryGotSlower(Finding then, Finding now) {
    double used = then.value("repetition_time").value();
    double needed = 3.5 * now.value("t1").value();
    if (used >= needed) {
      return Optional.empty();
    }
    return Optional.of(
        String.format(
            Locale.ROOT,
            "T1 is now %.3g s, and the repetition time of %.3g s it was measured with is less than"
                + " 3.5 of it",
            now.value("t1").value(),
            used));
  }

  private static Optional<String> delayGrew(Finding then, Finding now) {
    double before = then.value("receive_delay").value();
    double after = now.value("receive_delay").value();
    if (after <= 1.5 * before) {
      return Optional.empty();
    }
    return Optional.of(
        String.format(
            Locale.ROOT,
            "the coil now rings until %.0f us, it was measured from %.0f us on",
            after * 1e6,
            before * 1e6));
  }

  /** How a finding ages. */
  static Ageing ageing(Finding finding, Ladder ladder) {
    double hour = 3600;
    return switch (finding.rung()) {
      case NOISE -> new Ageing("", 0, "", 24 * hour);
      case RESONANCE ->
          new Ageing(
              "larmor_frequency",
              ladder
                  .value(Rung.NUTATION, "nutation_rate")
                  .map(r -> OFFSET_TOLERANCE * r.value())
                  .orElse(1000.0),
              "Hz",
              0.5 * hour);
      case GAIN -> new Ageing("", 0, "", 24 * hour);
      case RINGDOWN -> new Ageing("", 0, "", 7 * 24 * hour);
      case NUTATION ->
          new Ageing("pulse_90", PULSE_TOLERANCE * of(finding, "pulse_90"), "s", 12 * hour);
      case T1 -> new Ageing("t1", 0.1 * of(finding, "t1"), "s", 12 * hour);
      case T2STAR -> new Ageing("t2_star", 0.1 * of(finding, "t2_star"), "s", 2 * hour);
      case T2 -> new Ageing("t2", 0.1 * of(finding, "t2"), "s", 12 * hour);
    };
  }

  private static double of(Finding finding, String name) {
    Measured m = finding.values().get(name);
    return m == null ? Double.POSITIVE_INFINITY : Math.abs(m.value());
  }
}
