package coilside.bench;

import java.util.function.BooleanSupplier;

/**
 * How the bench waits for a moment; injected, so that tests need not sleep. Moments are those of a
 * steady clock, so that a step of the computer's clock neither holds a run up nor hurries it.
 */
@FunctionalInterface
public interface Waiter {
  /** Returns at {@code dueNanos} of the steady clock, or soon after {@code stop} turned true. */
  void await(long dueNanos, BooleanSupplier stop) throws InterruptedException;

  /** The steady clock, ns from any origin. */
  default long nanos() {
    return System.nanoTime();
  }

  /** Waits on the calling thread, by the steady clock of this computer. */
  static Waiter steady() {
    return (due, stop) -> {
      while (!stop.getAsBoolean()) {
        long left = due - System.nanoTime();
        if (left <= 0) {
          return;
        }
        Thread.sleep(Math.max(1, Math.min(left / 1_000_000, 50)));
      }
    };
  }
}
