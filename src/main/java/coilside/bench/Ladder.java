package coilside.bench;

import coilside.quantity.AgeFormat;
import coilside.quantity.Measured;
import java.time.Duration;
import java.time.Instant;
import java.util.ArrayList;
import java.util.EnumMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.Optional;

/**
 * The ladder as computed from what was found, how the bench stands now, and what time it is: pure.
 *
 * <p>A finding goes stale when a condition that matters to it changed, when a rung beneath was
 * measured again and moved by more than its effect allows, or when drift has eaten the tolerance.
 */
final class Ladder {
  private final Map<Rung, List<Finding>> history = new EnumMap<>(Rung.class);

  /** An empty ladder: everything is missing. */
  Ladder() {
    for (Rung rung : Rung.values()) {
      history.put(rung, new ArrayList<>());
    }
  }

  void add(Finding finding) {
    history.get(finding.rung()).add(finding);
  }

  List<Finding> history(Rung rung) {
    return List.copyOf(history.get(rung));
  }

  /** The newest finding, refused ones too. */
  Optional<Finding> newest(Rung rung) {
    List<Finding> all = history.get(rung);
    return all.isEmpty() ? Optional.empty() : Optional.of(all.get(all.size() - 1));
  }

  /** The newest finding that has values. */
  Optional<Finding> newestGood(Rung rung) {
    List<Finding> all = history.get(rung);
    for (int i = all.size() - 1; i >= 0; i--) {
      if (!all.get(i).refused()) {
        return Optional.of(all.get(i));
      }
    }
    return Optional.empty();
  }

  /** A value of the newest good finding of a rung. */
  Optional<Measured> value(Rung rung, String name) {
    return newestGood(rung).map(f -> f.values().get(name));
  }

  List<RungStatus> states(Conditions now, Instant when) {
    List<RungStatus> out = new ArrayList<>();
    for (Rung rung : Rung.values()) {
      out.add(state(rung, now, when));
    }
    return out;
  }

  RungStatus state(Rung rung, Conditions now, Instant when) {
    Optional<Finding> newest = newest(rung);
    if (newest.isEmpty()) {
      return new RungStatus(
          rung, RungStatus.State.MISSING, newest, List.of("not measured on this bench yet"));
    }
    Finding finding = newest.get();
    List<String> reasons = new ArrayList<>(Staleness.changedConditions(finding, now));
    reasons.addAll(movedBeneath(finding));
    reasons.addAll(aged(finding, when));
    if (finding.refused()) {
      List<String> why = new ArrayList<>();
      why.add(finding.refusal().get().reason());
      why.addAll(reasons);
      return new RungStatus(rung, RungStatus.State.REFUSED, newest, why);
    }
    RungStatus.State state = reasons.isEmpty() ? RungStatus.State.FRESH : RungStatus.State.STALE;
    return new RungStatus(rung, state, newest, reasons);
  }

  private List<String> movedBeneath(Finding finding) {
    List<String> reasons = new ArrayList<>();
    for (Rung beneath : finding.rung().restsOn()) {
      Optional<Finding> now = newest(beneath);
      if (now.isEmpty()) {
        continue;
      }
      if (now.get().refused()) {
        if (now.get().started().isAfter(finding.started())) {
          reasons.add("it rests on " + beneath.id() + ", which was refused since");
        }
        continue;
      }
      String id = finding.restedOn().get(beneath);
      if (id == null || id.equals(now.get().id())) {
        continue;
      }
      history.get(beneath).stream()
          .filter(f -> f.id().equals(id))
          .findFirst()
          .flatMap(then -> Staleness.moved(finding, then, now.get()))
          .ifPresent(reasons::add);
    }
    return reasons;
  }

  private List<String> aged(Finding finding, Instant when) {
    double age = Math.max(0, Duration.between(finding.started(), when).toNanos() * 1e-9);
    Staleness.Ageing ageing = Staleness.ageing(finding, this);
    List<Finding> comparable =
        history.get(finding.rung()).stream()
            .filter(f -> Staleness.changedConditions(f, finding.conditions()).isEmpty())
            .toList();
    Optional<Drift> drift =
        ageing.valueName().isEmpty()
            ? Optional.empty()
            : Drift.learn(comparable, ageing.valueName());
    if (drift.isPresent()) {
      double reach = drift.get().reach(age);
      if (reach > ageing.tolerance()) {
        return List.of(
            String.format(
                Locale.ROOT,
                "measured %s ago; at the drift learned from %d findings it may have moved by"
                    + " %.3g %s, more than the %.3g %s it may",
                AgeFormat.text(age),
                drift.get().findings(),
                reach,
                ageing.unit(),
                ageing.tolerance(),
                ageing.unit()));
      }
      double span = drift.get().spanSeconds();
      if (age > Math.max(ageing.lifetimeSeconds(), Drift.FAR * span)) {
        return List.of(
            "measured "
                + AgeFormat.text(age)
                + " ago; its drift was learned over no more than "
                + AgeFormat.text(span));
      }
      return List.of();
    }
    if (age > ageing.lifetimeSeconds()) {
      return List.of(
          "measured "
              + AgeFormat.text(age)
              + " ago; with no drift learned yet it is trusted for "
              + AgeFormat.text(ageing.lifetimeSeconds()));
    }
    return List.of();
  }
}
