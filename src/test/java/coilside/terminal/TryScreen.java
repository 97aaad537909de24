package coilside.terminal;

import java.nio.charset.Charset;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.time.InstantSource;
import java.util.List;

/** Starts the screen on the scripted desk, to look at it on a real terminal. */
final class TryScreen {
  private TryScreen() {}

  public static void main(String[] args) {
    List<String> words = List.of(args);
    FakeDesk desk = new FakeDesk(InstantSource.system(), !words.contains("real"));
    desk.breaks = words.contains("crash");
    long pause = words.contains("fast") ? 5 : 80;
    Thread player =
        new Thread(
            () -> {
              while (!Thread.currentThread().isInterrupted()) {
                desk.advance();
                try {
                  Thread.sleep(pause);
                } catch (InterruptedException e) {
                  return;
                }
              }
            },
            "player");
    player.setDaemon(true);
    player.start();
    Charset charset =
        System.getenv().getOrDefault("LANG", "").toUpperCase().contains("UTF-8")
            ? StandardCharsets.UTF_8
            : StandardCharsets.US_ASCII;
    TerminalOptions options =
        new TerminalOptions(
            words.contains("plain"),
            false,
            words.contains("ascii"),
            false,
            charset,
            System.getenv(),
            Path.of(System.getProperty("java.io.tmpdir"), "coilside-try", "crash.log"),
            SettingsStore.none(),
            "operator",
            InstantSource.system());
    System.exit(TextInterface.run(desk, options));
  }
}
