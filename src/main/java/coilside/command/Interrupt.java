package coilside.command;

import java.util.concurrent.CountDownLatch;
import java.util.concurrent.TimeUnit;

/**
 * Makes Ctrl-C, TERM and HUP stop the work instead of ending the program: the command keeps what
 * was finished, closes the board and returns. A second one, or a command that does not come to its
 * end within a bounded time, ends the program at once.
 */
final class Interrupt implements AutoCloseable {
  private static final int LONGEST_SECONDS = 15;

  private final Runnable stop;
  private final CountDownLatch finished = new CountDownLatch(1);
  private final CaughtSignals signals = new CaughtSignals();
  private final Thread hook = new Thread(this::programEnds, "end of the program");
  private volatile boolean happened;

  private Interrupt(Runnable stop, boolean survivesHangUp) {
    this.stop = stop;
    Runtime.getRuntime().addShutdownHook(hook);
    signals.add("INT", name -> arrived());
    signals.add("TERM", name -> arrived());
    signals.add(
        "HUP",
        name -> {
          if (!survivesHangUp) {
            arrived();
          }
        });
    if (!survivesHangUp) {
      LostTerminal.watch(this::hangUp, finished);
    }
  }

  /** The terminal went away, whether or not HUP told so. */
  private void hangUp() {
    if (!happened) {
      arrived();
    }
  }

  /** From now on an interrupt calls {@code stop}. */
  static Interrupt calls(Runnable stop) {
    return new Interrupt(stop, false);
  }

  /** The same, but a hang-up of the terminal is ignored. */
  static Interrupt ignoringHangUp(Runnable stop) {
    return new Interrupt(stop, true);
  }

  private void arrived() {
    if (happened) {
      Runtime.getRuntime().halt(ExitStatus.INTERRUPTED);
    }
    happened = true;
    Thread watchdog =
        new Thread(
            () -> {
              if (!commandEnds()) {
                Runtime.getRuntime().halt(ExitStatus.INTERRUPTED);
              }
            },
            "interrupt watchdog");
    watchdog.setDaemon(true);
    watchdog.start();
    stop.run();
  }

  /** The program is being ended in another way than by its command's return. */
  private void programEnds() {
    happened = true;
    stop.run();
    commandEnds();
  }

  private boolean commandEnds() {
    try {
      return finished.await(LONGEST_SECONDS, TimeUnit.SECONDS);
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
      return true;
    }
  }

  boolean happened() {
    return happened;
  }

  @Override
  public void close() {
    finished.countDown();
    signals.close();
    try {
      Runtime.getRuntime().removeShutdownHook(hook);
    } catch (IllegalStateException e) {
      // The program is already on its way out: the hook has begun.
    }
  }
}
