package coilside.bench;

import coilside.quantity.Unit;
import java.util.List;
import java.util.Map;
import java.util.Optional;

/**
 * How fast the value of a rung moves, as its history says, and how long that leaves the newest
 * finding standing: what staleness goes by.
 *
 * @param valueName which value
 * @param perSecond slope, in {@code unit} a second
 * @param u its standard uncertainty
 * @param unit unit of the value
 * @param findings how many findings it was learned from
 * @param trustedSeconds how long a finding is trusted at this drift, s
 */
public record LearnedDrift(
    String valueName, double perSecond, double u, Unit unit, int findings, double trustedSeconds) {
  /**
   * What was learned of a rung; empty with too few comparable findings, or for a rung whose age
   * alone counts.
   *
   * @param findings by rung, oldest first
   */
  public static Optional<LearnedDrift> of(Map<Rung, List<Finding>> findings, Rung rung) {
    Ladder ladder = new Ladder();
    findings.values().forEach(list -> list.forEach(ladder::add));
    Optional<Finding> newest = ladder.newestGood(rung);
    if (newest.isEmpty()) {
      return Optional.empty();
    }
    Staleness.Ageing ageing = Staleness.ageing(newest.get(), ladder);
    if (ageing.valueName().isEmpty()) {
      return Optional.empty();
    }
    List<Finding> comparable =
        ladder.history(rung).stream()
            .filter(f -> Staleness.changedConditions(f, newest.get().conditions()).isEmpty())
            .toList();
    return Drift.learn(comparable, ageing.valueName())
        .map(
            d ->
                new LearnedDrift(
                    ageing.valueName(),
                    d.perSecond(),
                    d.u(),
                    newest.get().value(ageing.valueName()).unit(),
                    d.findings(),
                    Math.min(
                        ageing.tolerance() / d.reach(1),
                        Math.max(ageing.lifetimeSeconds(), Drift.FAR * d.spanSeconds()))));
  }

  /** How long a finding of this rung is trusted while no drift is learned, s; empty without one. */
  public static Optional<Double> trustedWithoutSeconds(
      Map<Rung, List<Finding>> findings, Rung rung) {
    Ladder ladder = new Ladder();
    findings.values().forEach(list -> list.forEach(ladder::add));
    return ladder.newestGood(rung).map(f -> Staleness.ageing(f, ladder).lifetimeSeconds());
  }
}
