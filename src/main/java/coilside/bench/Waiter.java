package coilside.bench;

import java.time.Duration;
import java.time.Instant;
import java.time.InstantSource;
import java.util.function.BooleanSupplier;

/** How the bench waits for a moment; injected, so that tests need not sleep. */
@FunctionalInterface
public interface Waiter {
  /** Returns at {@code due}, or soon after {@code stop} turned true. */
  void await(Instant due, BooleanSupplier stop) throws InterruptedException;

  /** Waits by this clock on the calling thread. */
  static Waiter by(InstantSource clock) {
    return (due, stop) -> {
      while (!stop.getAsBoolean()) {
        long left = Duration.between(clock.instant(), due).toMillis();
        if (left <= 0) {
          return;
        }
        Thread.sleep(Math.min(left, 50));
      }
    };
  }
}
