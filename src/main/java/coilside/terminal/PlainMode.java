package coilside.terminal;

import coilside.bench.BenchSettings;
import coilside.bench.Desk;
import coilside.bench.Rung;
import coilside.bench.Work;
import java.io.BufferedReader;
import java.io.IOException;
import java.io.InputStream;
import java.io.InputStreamReader;
import java.io.PrintStream;
import java.time.Duration;
import java.time.Instant;
import java.time.InstantSource;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Optional;
import java.util.concurrent.BlockingQueue;
import java.util.concurrent.LinkedBlockingQueue;
import java.util.concurrent.TimeUnit;

/**
 * The state line by line, for screen readers: changes are printed once as they happen, a letter or
 * word and Enter does what the same key does on the screen. No cursor movement, no colour.
 */
final class PlainMode {
  private static final String END = "\u0004";
  private static final String INTERRUPT = "\u0003";

  /** Keys that only change what is drawn. */
  private static final String DRAWN_ONLY = "gpuvczx,.0yjdwtLBM?/";

  private static final Duration LIVE_EVERY = Duration.ofSeconds(3);

  private final Desk desk;
  private final Cockpit cockpit;
  private final Watch watch;
  private final PrintStream out;
  private final PlainText text;
  private final InstantSource clock;
  private Instant liveTold = Instant.EPOCH;

  private PlainMode(Desk desk, TerminalOptions options, PrintStream out) {
    this.desk = desk;
    clock = options.clock();
    watch = new Watch(options.clock());
    desk.listen(watch);
    cockpit = new Cockpit(desk, watch, options, false);
    this.out = out;
    text = new PlainText(desk, options.clock(), TextInterface.unicode(options));
  }

  static int run(Desk desk, TerminalOptions options, InputStream in, PrintStream out) {
    PlainMode mode = new PlainMode(desk, options, out);
    BlockingQueue<String> lines = new LinkedBlockingQueue<>(100);
    Thread reader = new Thread(() -> read(in, options, lines), "line reader");
    reader.setDaemon(true);
    reader.start();
    for (String name : new String[] {"INT", "TERM"}) {
      Signals.handle(name, n -> lines.offer(INTERRUPT));
    }
    Signals.handle("HUP", n -> lines.offer(END));
    boolean interrupted = true;
    try {
      interrupted = mode.loop(lines);
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
    }
    if (mode.watch.snapshotWork().isPresent()) {
      desk.stop();
    }
    return interrupted ? TextInterface.INTERRUPTED : TextInterface.DONE;
  }

  private static void read(InputStream in, TerminalOptions options, BlockingQueue<String> lines) {
    BufferedReader reader = new BufferedReader(new InputStreamReader(in, options.charset()));
    try {
      String line;
      while ((line = reader.readLine()) != null) {
        lines.put(line);
      }
      lines.put(END);
    } catch (IOException e) {
      lines.offer(END);
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
    }
  }

  /** True when it was interrupted. At the end of the input it waits for the work in hand. */
  private boolean loop(BlockingQueue<String> lines) throws InterruptedException {
    boolean ended = false;
    print(text.overview(watch.snapshot()));
    print(List.of("Type help and Enter for what can be done; ladder for the list; quit to leave."));
    while (!cockpit.done()) {
      String line = lines.poll(200, TimeUnit.MILLISECONDS);
      cockpit.tick();
      print(text.changes(watch.snapshot()));
      print(live(watch.snapshot()));
      if (INTERRUPT.equals(line)) {
        return true;
      }
      ended |= END.equals(line);
      Optional<Work> work = watch.snapshotWork();
      if (ended && (work.isEmpty() || work.get() instanceof Work.Live)) {
        return false;
      }
      if (line != null && !END.equals(line)) {
        command(line.strip());
        print(text.changes(watch.snapshot()));
      }
    }
    return false;
  }

  /** While it runs live: the numbers, often enough to turn a screw by. */
  private List<String> live(Snapshot state) {
    Instant now = clock.instant();
    if (state.work().filter(Work.Live.class::isInstance).isEmpty()
        || Duration.between(liveTold, now).compareTo(LIVE_EVERY) < 0) {
      return List.of();
    }
    liveTold = now;
    return text.headline(state, cockpit.look().headline);
  }

  private void command(String line) {
    if (line.isEmpty()) {
      return;
    }
    String word = line.toLowerCase(Locale.ROOT);
    switch (word) {
      case "help" -> print(help());
      case "ladder" -> print(text.ladder(watch.snapshot()));
      case "state", "picture" -> print(text.overview(watch.snapshot()));
      default -> {
        if (word.startsWith("set ") && !cockpit.panelOpen()) {
          set(line.substring(4).strip());
        } else if (!cockpit.panelOpen() && line.length() == 1 && DRAWN_ONLY.contains(line)) {
          print(List.of("'" + line + "' changes the drawn screen only; type help."));
        } else if (cockpit.panelOpen() || line.length() == 1) {
          keys(line);
        } else {
          Optional<Action> action =
              cockpit.actions().stream().filter(a -> a.brief().equalsIgnoreCase(word)).findFirst();
          if (action.isPresent()) {
            cockpit.key(action.get().key());
          } else {
            print(List.of("'" + line + "' is no command here; type help."));
          }
        }
      }
    }
    if (cockpit.panelOpen()) {
      print(rows(cockpit.frame(100, 60, watch.snapshot())));
      print(List.of("Type q and Enter to go back."));
    }
  }

  private void keys(String line) {
    for (int i = 0; i < line.length(); i++) {
      cockpit.key(Key.of(line.charAt(i)));
    }
    if (line.length() > 1) {
      cockpit.key(Key.of(Key.Name.ENTER));
    }
  }

  /** The text of the panel alone: the part right of the ladder, blank lines left out. */
  private static List<String> rows(Canvas canvas) {
    List<String> out = new ArrayList<>();
    for (int y = 8; y < canvas.height() - 2; y++) {
      String row = canvas.row(y).substring(31).strip();
      if (!row.isEmpty()) {
        out.add(row);
      }
    }
    return out;
  }

  private static boolean useful(Action a) {
    return a.keyText().length() == 1
        && !DRAWN_ONLY.contains(a.keyText())
        && a.key().character() != 'e';
  }

  /** "sample cooking oil": the name of a setting and its new value. */
  private void set(String text) {
    for (SettingField field : SettingField.all(desk.limits())) {
      if (text.startsWith(field.name() + " ")) {
        try {
          BenchSettings changed =
              field.change().apply(desk.settings(), text.substring(field.name().length() + 1));
          List<Rung> stale = desk.wouldGoStale(changed);
          desk.apply(changed);
          print(
              List.of(
                  field.name()
                      + " is now "
                      + field.shown().apply(desk.settings())
                      + (stale.isEmpty()
                          ? "."
                          : "; stale now: "
                              + String.join(", ", stale.stream().map(Rung::id).toList()))));
        } catch (IllegalArgumentException | IllegalStateException e) {
          print(List.of(e.getMessage(), "Allowed: " + field.allowed()));
        }
        return;
      }
    }
    print(
        List.of(
            "Settings: "
                + String.join(
                    ", ",
                    SettingField.all(desk.limits()).stream()
                        .map(f -> f.name() + " (" + f.allowed() + ")")
                        .toList())));
  }

  private List<String> help() {
    List<String> out = new ArrayList<>();
    out.add(
        "help: this list. ladder: all rungs. state: what is going on. set NAME VALUE: change a"
            + " setting (set ? lists them). Then, one of:");
    for (Action a : cockpit.actions()) {
      if (useful(a) && a.works().getAsBoolean()) {
        out.add(a.keyText() + " or " + a.brief() + ": " + a.what());
      }
    }
    return out;
  }

  private void print(List<String> lines) {
    lines.forEach(out::println);
    out.flush();
  }
}
