package coilside.terminal;

import com.googlecode.lanterna.screen.TerminalScreen;
import java.io.BufferedOutputStream;
import java.io.FileDescriptor;
import java.io.FileOutputStream;
import java.io.IOException;
import java.nio.charset.Charset;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.atomic.AtomicBoolean;
import java.util.concurrent.atomic.AtomicReference;

/**
 * The real terminal: taken at the start, given back exactly as it was, whatever ends the program.
 *
 * <p>Signals only set a flag that the drawing loop sees. A watchdog ends the process when the loop
 * cannot get there, because the terminal takes no more output.
 */
final class Console {
  private static final long PATIENCE_MILLIS = 4000;
  private final EscapeFilter keys;
  private final CountingOutput output;
  private final QuietUnixTerminal terminal;
  private final TerminalScreen screen;
  private final AtomicReference<String> signal = new AtomicReference<>("");
  private final AtomicBoolean closed = new AtomicBoolean();
  private volatile boolean leftInTime;

  Console(Charset charset) throws IOException {
    keys = new EscapeFilter(System.in, System::nanoTime);
    output =
        new CountingOutput(
            new BufferedOutputStream(new FileOutputStream(FileDescriptor.out), 64 * 1024));
    terminal = new QuietUnixTerminal(keys, output, charset);
    screen = new TerminalScreen(terminal);
    screen.startScreen();
    keys.start();
    for (String name : new String[] {"TERM", "HUP", "INT"}) {
      Signals.handle(name, this::signalled);
    }
  }

  private void signalled(String name) {
    // After a hang-up the run goes on without a terminal, until TERM or INT ends it too.
    boolean first = signal.compareAndSet("", name);
    if (!first && (name.equals("HUP") || !signal.compareAndSet("HUP", name))) {
      return;
    }
    if (name.equals("HUP")) {
      return;
    }
    Thread watchdog = new Thread(this::haltWhenStuck, "exit watchdog");
    watchdog.setDaemon(true);
    watchdog.start();
  }

  /**
   * Halts when the terminal was not given back in time; hooks are skipped, one of them would block
   * on the same output.
   */
  private void haltWhenStuck() {
    try {
      TimeUnit.MILLISECONDS.sleep(PATIENCE_MILLIS);
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
      return;
    }
    if (!leftInTime) {
      Runtime.getRuntime().halt(130);
    }
  }

  /** Tells the watchdog that the program is on its way out. */
  void leaving() {
    leftInTime = true;
  }

  /** "TERM", "HUP" or "INT" once one came; else empty. */
  String signal() {
    return signal.get();
  }

  TerminalScreen screen() {
    return screen;
  }

  long bytes() {
    return output.bytes();
  }

  void pause(long millis) throws InterruptedException {
    keys.await(millis);
  }

  void bell() {
    try {
      output.write(7);
      output.flush();
    } catch (IOException e) {
      // The next frame meets the same trouble and reports it.
      signal.compareAndSet("", "HUP");
    }
  }

  /** Gives the terminal back, stops the whole job, and takes the terminal again afterwards. */
  void suspend() {
    try {
      terminal.setCursorVisible(true);
      screen.stopScreen(false);
      terminal.lend();
      // The shell stops and continues with the group; its end tells that the job goes on.
      Process stop =
          new ProcessBuilder("/bin/sh", "-c", "kill -TSTP 0")
              .redirectInput(ProcessBuilder.Redirect.INHERIT)
              .start();
      stop.waitFor();
      terminal.takeBack();
      screen.startScreen();
      screen.setCursorPosition(null);
    } catch (IOException e) {
      signal.compareAndSet("", "HUP");
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
    }
  }

  /** Gives the terminal back as it was; may be called twice. */
  void giveBack() {
    if (closed.get()) {
      return;
    }
    try {
      terminal.setCursorVisible(true);
      screen.stopScreen(false);
      terminal.close();
    } catch (IOException e) {
      // The terminal is gone; there is nothing to give back.
      signal.compareAndSet("", "HUP");
    }
    closed.set(true);
  }
}
