package coilside.command;

import java.util.concurrent.CountDownLatch;
import java.util.concurrent.TimeUnit;

/**
 * Makes Ctrl-C, TERM and HUP stop the work before the program ends: the end of the program waits a
 * bounded time until the command has kept what was finished. The exit status is then that of the
 * signal, 130 for Ctrl-C.
 */
final class Interrupt implements AutoCloseable {
  private static final int LONGEST_SECONDS = 15;

  private final CountDownLatch finished = new CountDownLatch(1);
  private final Thread hook;
  private volatile boolean happened;

  private Interrupt(Runnable stop) {
    hook =
        new Thread(
            () -> {
              happened = true;
              stop.run();
              awaitTheCommand();
            },
            "interrupt");
    Runtime.getRuntime().addShutdownHook(hook);
  }

  /** From now on an interrupt calls {@code stop} and waits for {@link #close()}. */
  static Interrupt calls(Runnable stop) {
    return new Interrupt(stop);
  }

  private void awaitTheCommand() {
    try {
      finished.await(LONGEST_SECONDS, TimeUnit.SECONDS);
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
    }
  }

  boolean happened() {
    return happened;
  }

  @Override
  public void close() {
    finished.countDown();
    if (!happened) {
      try {
        Runtime.getRuntime().removeShutdownHook(hook);
      } catch (IllegalStateException e) {
        // The program is already on its way out: the hook has just begun.
      }
    }
  }
}
