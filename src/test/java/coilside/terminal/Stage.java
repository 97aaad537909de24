package coilside.terminal;

import com.googlecode.lanterna.TerminalPosition;
import com.googlecode.lanterna.TerminalSize;
import com.googlecode.lanterna.input.KeyStroke;
import com.googlecode.lanterna.input.KeyType;
import com.googlecode.lanterna.input.MouseAction;
import com.googlecode.lanterna.input.MouseActionType;
import com.googlecode.lanterna.screen.TerminalScreen;
import com.googlecode.lanterna.terminal.virtual.DefaultVirtualTerminal;
import java.io.IOException;
import java.nio.charset.Charset;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.time.Instant;
import java.util.HashMap;
import java.util.Map;
import java.util.Optional;

/** The whole screen on a virtual terminal, with a clock that only moves when told to. */
final class Stage {
  Instant now = Instant.parse("2026-12-01T12:00:00Z");
  long nanos;
  int bells;
  int suspends;
  final Map<String, String> kept = new HashMap<>();
  final FakeDesk desk;
  final DefaultVirtualTerminal terminal;
  final TerminalScreen screen;
  final Watch watch;
  final Cockpit cockpit;
  final ScreenLoop loop;

  Stage(int width, int height) throws IOException {
    this(width, height, true, StandardCharsets.UTF_8, Map.of());
  }

  Stage(int width, int height, boolean simulated, Charset charset, Map<String, String> before)
      throws IOException {
    kept.putAll(before);
    desk = new FakeDesk(() -> now, simulated);
    terminal = new DefaultVirtualTerminal(new TerminalSize(width, height));
    screen = new TerminalScreen(terminal);
    screen.startScreen();
    TerminalOptions options = options(charset);
    watch = new Watch(() -> now);
    desk.listen(watch);
    cockpit = new Cockpit(desk, watch, options, false);
    Palette palette = Palette.from(options.environment(), false);
    Surface surface = new Surface(screen, palette, () -> bells++);
    loop =
        new ScreenLoop(
            cockpit,
            watch,
            surface,
            millis -> pass(millis),
            () -> nanos,
            () -> 0,
            1e9,
            () -> suspends++,
            () -> false);
    turn();
  }

  TerminalOptions options(Charset charset) {
    SettingsStore store =
        new SettingsStore() {
          @Override
          public Optional<String> get(String name) {
            return Optional.ofNullable(kept.get(name));
          }

          @Override
          public void set(String name, String value) {
            kept.put(name, value);
          }
        };
    return new TerminalOptions(
        false,
        false,
        false,
        false,
        charset,
        Map.of("TERM", "xterm-256color"),
        Path.of("target", "crash.log"),
        store,
        "tester",
        () -> now);
  }

  void pass(long millis) {
    nanos += millis * 1_000_000;
    now = now.plusMillis(millis);
  }

  void turn() throws IOException {
    pass(1100);
    loop.turn();
  }

  void press(String keys) throws IOException {
    for (char c : keys.toCharArray()) {
      terminal.addInput(new KeyStroke(c, false, false));
      turn();
    }
  }

  void press(KeyType type) throws IOException {
    terminal.addInput(new KeyStroke(type));
    turn();
  }

  void click(int column, int row) throws IOException {
    terminal.addInput(
        new MouseAction(MouseActionType.CLICK_DOWN, 1, new TerminalPosition(column, row)));
    turn();
  }

  void ctrl(char c) throws IOException {
    terminal.addInput(new KeyStroke(c, true, false));
    turn();
  }

  /** Plays all the work in hand and draws. */
  void finish() throws IOException {
    desk.playAll();
    turn();
    turn();
  }

  String row(int y) {
    StringBuilder out = new StringBuilder();
    for (int x = 0; x < terminal.getTerminalSize().getColumns(); x++) {
      out.append(terminal.getCharacter(x, y).getCharacterString());
    }
    return out.toString();
  }

  String text() {
    StringBuilder out = new StringBuilder();
    for (int y = 0; y < terminal.getTerminalSize().getRows(); y++) {
      out.append(row(y).stripTrailing()).append('\n');
    }
    return out.toString();
  }

  boolean shows(String text) {
    return text().contains(text);
  }
}
