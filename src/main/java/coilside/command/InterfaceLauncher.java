package coilside.command;

import coilside.bench.BenchDesk;
import coilside.bench.KeepException;
import coilside.record.BenchRecord;
import coilside.record.RecordHeld;
import coilside.terminal.SettingsStore;
import coilside.terminal.TerminalOptions;
import coilside.terminal.TextInterface;
import java.nio.charset.Charset;
import java.time.Clock;
import java.util.Optional;

/** Starts the text interface on the bench that the options name. */
final class InterfaceLauncher {
  private InterfaceLauncher() {}

  static int run(CommonOptions options, Output output) throws Exception {
    Clock clock = Clock.systemUTC();
    TerminalOptions look = look(options, clock, SettingsStore.none());
    Optional<String> unusable = TextInterface.unusable(look, System.console() != null);
    if (!options.plain && unusable.isPresent()) {
      throw new UsageException(unusable.get());
    }
    // What the record and the screen need is loaded while the profile is read.
    Thread ahead =
        new Thread(
            () -> {
              BenchRecord.loadAhead();
              TextInterface.loadAhead();
            },
            "load ahead");
    ahead.setDaemon(true);
    // What is wrong shows when it is needed.
    ahead.setUncaughtExceptionHandler((thread, e) -> {});
    ahead.start();
    OpenBench.Parts parts;
    try {
      parts = OpenBench.Parts.open(options, clock);
    } catch (RecordHeld e) {
      return watch(options, clock, e);
    }
    try (BenchDesk desk = parts.desk(clock)) {
      return TextInterface.run(desk, look(options, clock, new Kept(parts.record())));
    } finally {
      parts.close();
    }
  }

  /** Another coilside holds the bench: what it does is shown, and nothing else. */
  private static int watch(CommonOptions options, Clock clock, RecordHeld held)
      throws KeepException {
    try (WatchDesk desk = WatchDesk.open(options, held, clock)) {
      desk.start();
      return TextInterface.run(desk, look(options, clock, SettingsStore.none()));
    }
  }

  private static TerminalOptions look(CommonOptions options, Clock clock, SettingsStore store) {
    return new TerminalOptions(
        options.plain,
        options.plain,
        options.plain,
        false,
        terminalCharset(),
        System.getenv(),
        Links.privateFolder().resolve("coilside-crash.log"),
        store,
        System.getProperty("user.name"),
        clock);
  }

  /** What the terminal decodes: the locale says, whatever the JVM takes as its default. */
  private static Charset terminalCharset() {
    for (String name : new String[] {"LC_ALL", "LC_CTYPE", "LANG"}) {
      String value = System.getenv().getOrDefault(name, "");
      if (!value.isEmpty()) {
        String upper = value.toUpperCase(java.util.Locale.ROOT);
        return upper.contains("UTF-8") || upper.contains("UTF8")
            ? java.nio.charset.StandardCharsets.UTF_8
            : java.nio.charset.StandardCharsets.US_ASCII;
      }
    }
    return java.nio.charset.StandardCharsets.US_ASCII;
  }

  /** The look of the screen, kept in the bench record. */
  private record Kept(BenchRecord record) implements SettingsStore {
    @Override
    public Optional<String> get(String name) {
      try {
        return record.setting("screen." + name);
      } catch (KeepException e) {
        return Optional.empty();
      }
    }

    @Override
    public void set(String name, String value) {
      try {
        record.setSetting("screen." + name, value);
      } catch (KeepException e) {
        // The look of the screen is not worth an interruption.
      }
    }
  }
}
