package coilside.bench;

import coilside.quantity.Measured;
import java.util.Optional;
import java.util.OptionalDouble;

/** What the ladder says now, as far as later rungs need it: newest good findings, SI units. */
final class Known {
  private final Ladder ladder;

  Known(Ladder ladder) {
    this.ladder = ladder;
  }

  Optional<Measured> measured(Rung rung, String name) {
    return ladder.value(rung, name);
  }

  OptionalDouble value(Rung rung, String name) {
    Optional<Measured> m = ladder.value(rung, name);
    return m.isPresent() ? OptionalDouble.of(m.get().value()) : OptionalDouble.empty();
  }

  /** A value a rung rests on; calling this before it was measured is our own mistake. */
  double need(Rung rung, String name) {
    return value(rung, name)
        .orElseThrow(
            () -> new IllegalStateException(rung.id() + " '" + name + "' is not known yet"));
  }

  /** Newest finding of the rung with values, where there is one. */
  Optional<Finding> finding(Rung rung) {
    return ladder.newestGood(rung);
  }

  /** All findings of the rung, oldest first. */
  java.util.List<Finding> history(Rung rung) {
    return ladder.history(rung);
  }
}
