package coilside.terminal;

import coilside.bench.Desk;
import coilside.bench.Progress;
import coilside.bench.Work;
import java.io.IOException;
import java.io.OutputStream;
import java.io.PrintStream;
import java.io.PrintWriter;
import java.io.StringWriter;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardOpenOption;
import java.util.Optional;
import java.util.concurrent.CountDownLatch;
import java.util.concurrent.TimeUnit;

/**
 * The text interface: runs the screen, or its line-by-line form, on a desk until the operator
 * leaves.
 */
public final class TextInterface {
  /** Left as the operator wished. */
  public static final int DONE = 0;

  /** The terminal cannot be used: the caller's usage error. */
  public static final int NO_TERMINAL = 2;

  /** Interrupted by Ctrl-C or a signal; what was finished is kept. */
  public static final int INTERRUPTED = 130;

  /** A mistake of the program's own; the stack trace is in the crash log. */
  public static final int CRASHED = 70;

  private static final double BYTES_A_SECOND = 200_000;
  private static final double BYTES_A_SECOND_REMOTE = 9_000;

  private TextInterface() {}

  /**
   * Why the screen cannot run here, with what to do instead; empty when it can. Asks the terminal
   * nothing but its type.
   */
  public static Optional<String> unusable(TerminalOptions options, boolean terminalPresent) {
    if (!terminalPresent) {
      return Optional.of(
          "There is no terminal here: input or output is redirected. Start coilside on a terminal,"
              + " or use 'coilside ready', which prints its table anywhere.");
    }
    String term = options.environment().getOrDefault("TERM", "");
    if (term.isEmpty() || term.equals("dumb")) {
      return Optional.of(
          "The terminal type is TERM="
              + (term.isEmpty() ? "(not set)" : "dumb")
              + ", which cannot place text on a screen. Set TERM to what your terminal is (often"
              + " xterm-256color), or use 'coilside --plain' or 'coilside ready'.");
    }
    return Optional.empty();
  }

  /** Loads what the first picture of the screen needs; touches no terminal. */
  public static void loadAhead() {
    Palette palette = Palette.from(java.util.Map.of("TERM", "xterm-256color"), false);
    palette.character('x', Ink.PLAIN);
    new Canvas(Cockpit.LEAST_WIDTH, Cockpit.LEAST_HEIGHT, new Glyphs(true));
    try {
      java.lang.invoke.MethodHandles.Lookup here = java.lang.invoke.MethodHandles.lookup();
      for (Class<?> c :
          new Class<?>[] {
            Console.class,
            QuietUnixTerminal.class,
            com.googlecode.lanterna.screen.TerminalScreen.class,
            com.googlecode.lanterna.input.DefaultKeyDecodingProfile.class,
            PictureView.class,
            Plot.class,
            ShotView.class,
            LadderView.class
          }) {
        here.ensureInitialized(c);
      }
    } catch (IllegalAccessException e) {
      throw new IllegalStateException("classes of this package are open to it", e);
    }
  }

  static boolean unicode(TerminalOptions options) {
    return !options.asciiOnly() && StandardCharsets.UTF_8.equals(options.charset());
  }

  /**
   * Runs until the operator leaves. The desk is stopped where the work in hand must not outlive the
   * screen, and is not closed. After a hang-up it returns once the work in hand has ended.
   *
   * @return exit status: {@link #DONE}, {@link #NO_TERMINAL}, {@link #INTERRUPTED}, {@link
   *     #CRASHED}
   */
  public static int run(Desk desk, TerminalOptions options) {
    if (options.plain()) {
      return PlainMode.run(desk, options, System.in, System.out);
    }
    Optional<String> trouble = unusable(options, System.console() != null);
    if (trouble.isPresent()) {
      System.err.println(trouble.get());
      return NO_TERMINAL;
    }
    try {
      Console console = new Console(options.charset());
      int w = console.screen().getTerminalSize().getColumns();
      int h = console.screen().getTerminalSize().getRows();
      if (w < Cockpit.LEAST_WIDTH || h < Cockpit.LEAST_HEIGHT) {
        console.giveBack();
        System.err.println(tooSmall(w, h));
        return NO_TERMINAL;
      }
      PrintStream errors = System.err;
      try (PrintStream log = crashLog(options.crashLog())) {
        // Whatever is printed while the screen is drawn would tear it.
        System.setErr(log);
        return onScreen(desk, options, console, errors);
      } finally {
        System.setErr(errors);
      }
    } catch (IOException e) {
      System.err.println(
          "The terminal could not be set up: "
              + e.getMessage()
              + ". Check that stty works here, or use 'coilside ready'.");
      return NO_TERMINAL;
    }
  }

  private static PrintStream crashLog(Path log) {
    try {
      makeFolder(log);
      return new PrintStream(
          Files.newOutputStream(log, StandardOpenOption.CREATE, StandardOpenOption.APPEND),
          true,
          StandardCharsets.UTF_8);
    } catch (IOException | SecurityException e) {
      return new PrintStream(OutputStream.nullOutputStream(), false, StandardCharsets.UTF_8);
    }
  }

  private static void makeFolder(Path log) throws IOException {
    Path parent = log.toAbsolutePath().getParent();
    if (parent != null) {
      Files.createDirectories(parent);
    }
  }

  static String tooSmall(int width, int height) {
    return "The terminal is "
        + width
        + " x "
        + height
        + " characters; the screen needs at least "
        + Cockpit.LEAST_WIDTH
        + " x "
        + Cockpit.LEAST_HEIGHT
        + ". Enlarge the window or choose a smaller font, or use 'coilside ready'.";
  }

  private static int onScreen(
      Desk desk, TerminalOptions options, Console console, PrintStream errors) {
    Watch watch = new Watch(options.clock());
    desk.listen(watch);
    Thread.setDefaultUncaughtExceptionHandler(
        (thread, e) -> {
          e.printStackTrace();
          watch.note(
              true,
              "A mistake of the program's own in its part '"
                  + thread.getName()
                  + "': "
                  + e
                  + ". Quit and start again; the details are in "
                  + options.crashLog());
        });
    boolean remote =
        options.environment().containsKey("SSH_CONNECTION")
            || options.environment().containsKey("SSH_TTY");
    try {
      Palette palette = Palette.from(options.environment(), options.noColor());
      Cockpit cockpit = new Cockpit(desk, watch, options, palette.light());
      Surface surface = new Surface(console.screen(), palette, console::bell);
      ScreenLoop loop =
          new ScreenLoop(
              cockpit,
              watch,
              surface,
              console::pause,
              System::nanoTime,
              console::bytes,
              remote ? BYTES_A_SECOND_REMOTE : BYTES_A_SECOND,
              console::suspend,
              () -> !console.signal().isEmpty());
      loop.run();
      boolean lost = loop.hungUp() || console.signal().equals("HUP");
      console.giveBack();
      if (lost) {
        return outlive(desk, watch, console);
      }
      console.leaving();
      boolean interrupted = !console.signal().isEmpty() || cockpit.interrupted();
      if (watch.snapshotWork().isPresent()) {
        desk.stop();
      }
      return interrupted ? INTERRUPTED : DONE;
    } catch (IOException e) {
      // Writing failed: the terminal went away.
      console.giveBack();
      return outlive(desk, watch, console);
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
      console.giveBack();
      desk.stop();
      return INTERRUPTED;
    } catch (RuntimeException | Error e) {
      console.giveBack();
      desk.stop();
      errors.println(crashed(e, options.crashLog()));
      return CRASHED;
    }
  }

  /**
   * A lost session ends the screen, not the run: waits for the work in hand, unless it is live, or
   * until TERM or INT ends that too.
   */
  private static int outlive(Desk desk, Watch watch, Console console) {
    CountDownLatch ended = new CountDownLatch(1);
    desk.listen(
        event -> {
          if (event instanceof Progress.WorkEnded) {
            ended.countDown();
          }
        });
    Optional<Work> work = watch.snapshotWork();
    if (work.isPresent() && work.get() instanceof Work.Live) {
      desk.stop();
      return DONE;
    }
    try {
      while (desk.busy() && !ended.await(200, TimeUnit.MILLISECONDS)) {
        if (!console.signal().isEmpty() && !console.signal().equals("HUP")) {
          console.leaving();
          desk.stop();
          return INTERRUPTED;
        }
      }
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
    }
    return DONE;
  }

  /** Writes the stack trace to the log and tells in one paragraph what happened. */
  static String crashed(Throwable e, Path log) {
    StringWriter trace = new StringWriter();
    e.printStackTrace(new PrintWriter(trace, true));
    String where;
    try {
      makeFolder(log);
      Files.writeString(log, trace + "\n", StandardOpenOption.CREATE, StandardOpenOption.APPEND);
      where = "The details are in " + log + "; please report them.";
    } catch (IOException | SecurityException io) {
      where = "The details could not be written to " + log + " (" + io.getMessage() + ").";
    }
    return "The text interface ended by a mistake of its own ("
        + e.getClass().getSimpleName()
        + (e.getMessage() == null ? "" : ": " + e.getMessage())
        + "). The board was told to stop; what was finished is kept. "
        + where;
  }
}
