package coilside.bench;

import java.time.Duration;
import java.time.Instant;
import java.util.Optional;

/**
 * When the slots of a log are due: slot k at start + k * interval on the steady clock, whatever the
 * rows before it took. The wall clock only labels them; when it steps, the labels follow and the
 * distances stay.
 */
final class LogSchedule {
  /** A difference between the clocks that grew by more than this is a step, not a correction. */
  private static final Duration STEP = Duration.ofSeconds(1);

  private final long everyNanos;
  private final long startNanos;
  private Instant start;

  LogSchedule(Duration every, long startNanos, Instant start) {
    this.everyNanos = every.toNanos();
    this.startNanos = startNanos;
    this.start = start;
  }

  long dueNanos(long slot) {
    return startNanos + Math.multiplyExact(slot, everyNanos);
  }

  /** What the wall clock shows, or would have shown, when the slot is due. */
  Instant due(long slot) {
    return start.plusNanos(Math.multiplyExact(slot, everyNanos));
  }

  /**
   * The slot to be played after this one: the next that is not more than half an interval over.
   * What is more than that is missed.
   */
  long next(long slot, long nowNanos) {
    return Math.max(slot + 1, Math.floorDiv(nowNanos - startNanos + everyNanos / 2, everyNanos));
  }

  /** Compares the clocks; where the wall clock stepped, the labels follow it. */
  Optional<Duration> follow(long nowNanos, Instant now) {
    Duration off = Duration.between(start.plusNanos(nowNanos - startNanos), now);
    if (off.abs().compareTo(STEP) <= 0) {
      return Optional.empty();
    }
    start = start.plus(off);
    return Optional.of(off);
  }
}
