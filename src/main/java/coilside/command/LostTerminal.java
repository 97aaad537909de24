package coilside.command;

import java.io.FileInputStream;
import java.io.IOException;
import java.util.concurrent.CountDownLatch;
import java.util.concurrent.TimeUnit;

/**
 * Notices that the controlling terminal went away, by asking for it once a second. The signal HUP
 * is not enough: the serial library makes the whole process ignore it when it loads.
 */
final class LostTerminal {
  private static final String TERMINAL = "/dev/tty";

  private LostTerminal() {}

  /** Calls {@code lost} once the terminal is gone, until {@code finished}; nothing without one. */
  static void watch(Runnable lost, CountDownLatch finished) {
    if (!there()) {
      return;
    }
    Thread thread =
        new Thread(
            () -> {
              try {
                while (!finished.await(1, TimeUnit.SECONDS)) {
                  if (!there()) {
                    lost.run();
                    return;
                  }
                }
              } catch (InterruptedException e) {
                Thread.currentThread().interrupt();
              }
            },
            "terminal watch");
    thread.setDaemon(true);
    thread.start();
  }

  private static boolean there() {
    try {
      new FileInputStream(TERMINAL).close();
      return true;
    } catch (IOException e) {
      return false;
    }
  }
}
