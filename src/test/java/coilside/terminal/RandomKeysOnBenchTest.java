package coilside.terminal;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.bench.BenchDesk;
import coilside.bench.BenchSettings;
import coilside.bench.MemoryKeeper;
import coilside.bench.Progress;
import coilside.bench.Rung;
import coilside.bench.Waiter;
import coilside.board.driver.Boards;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.ProfileReader;
import coilside.board.simulated.ScenarioReader;
import coilside.board.simulated.SimulatedBoards;
import coilside.quantity.Nucleus;
import com.googlecode.lanterna.TerminalSize;
import com.googlecode.lanterna.input.KeyStroke;
import com.googlecode.lanterna.input.KeyType;
import com.googlecode.lanterna.screen.TerminalScreen;
import com.googlecode.lanterna.terminal.virtual.DefaultVirtualTerminal;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.time.Clock;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalDouble;
import java.util.Random;
import java.util.concurrent.CopyOnWriteArrayList;
import java.util.concurrent.locks.LockSupport;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;

/** Random keys on the whole simulated bench, measured on its own thread while keys come in. */
class RandomKeysOnBenchTest {
  private static final long PATIENCE_NANOS = 60_000_000_000L;

  /** A profile, the desk on its simulated board, and the screen on that. */
  private static final class Rig implements AutoCloseable {
    final DefaultVirtualTerminal terminal = new DefaultVirtualTerminal(new TerminalSize(80, 24));
    final List<String> mistakes = new CopyOnWriteArrayList<>();
    final MemoryKeeper keeper = new MemoryKeeper();
    final BenchDesk desk;
    final Cockpit cockpit;
    final ScreenLoop loop;

    Rig(long seed) throws Exception {
      DeviceProfile profile =
          ProfileReader.read(Path.of("device-profiles", "scpi-console.toml"))
              .profile()
              .orElseThrow();
      desk =
          new BenchDesk(
              Boards.open(
                  profile,
                  SimulatedBoards.inProcess(
                      profile, ScenarioReader.named(ScenarioReader.DEFAULT), seed, false),
                  System::nanoTime,
                  Clock.systemUTC(),
                  true),
              keeper,
              new BenchSettings(
                  Nucleus.HYDROGEN_1,
                  7.9e6,
                  8.3e6,
                  0.5,
                  "",
                  "",
                  OptionalDouble.empty(),
                  0.01,
                  0.05,
                  0.02,
                  64),
              Clock.systemUTC(),
              Waiter.steady());
      desk.listen(this::heed);
      Map<String, String> kept = new HashMap<>();
      TerminalOptions options =
          new TerminalOptions(
              false,
              false,
              false,
              false,
              StandardCharsets.UTF_8,
              Map.of("TERM", "xterm-256color"),
              Path.of("target", "crash.log"),
              new SettingsStore() {
                @Override
                public Optional<String> get(String name) {
                  return Optional.ofNullable(kept.get(name));
                }

                @Override
                public void set(String name, String value) {
                  kept.put(name, value);
                }
              },
              "tester",
              Clock.systemUTC());
      TerminalScreen screen = new TerminalScreen(terminal);
      screen.startScreen();
      Watch watch = new Watch(Clock.systemUTC());
      desk.listen(watch);
      cockpit = new Cockpit(desk, watch, options, false);
      loop =
          new ScreenLoop(
              cockpit,
              watch,
              new Surface(screen, Palette.from(options.environment(), false), () -> {}),
              LockSupport::parkNanos,
              System::nanoTime,
              () -> 0,
              1e9,
              () -> {},
              () -> false);
    }

    private void heed(Progress event) {
      if (event instanceof Progress.WorkEnded e
          && e.reason().filter(r -> r.contains("mistake")).isPresent()) {
        mistakes.add(e.reason().get());
      }
    }

    void press(KeyStroke key) throws Exception {
      terminal.addInput(key);
      loop.turn();
    }

    @Override
    public void close() {
      desk.close();
    }
  }

  private static void play(long seed, int rounds) throws Exception {
    Random random = new Random(seed);
    try (Rig rig = new Rig(seed)) {
      for (int i = 0; i < rounds; i++) {
        RandomKeysTest.something(rig.terminal, random, i);
        rig.loop.turn();
        assertFalse(rig.cockpit.done(), "left at round " + i);
        if (random.nextInt(16) == 0) {
          // Lets the bench get somewhere between keys.
          LockSupport.parkNanos(1_000_000L * random.nextInt(20));
        }
      }
      rig.terminal.setTerminalSize(new TerminalSize(80, 24));
      for (int i = 0; i < 6; i++) {
        rig.press(new KeyStroke(KeyType.Escape));
      }
      long end = System.nanoTime() + PATIENCE_NANOS;
      while ((rig.desk.busy() || rig.cockpit.running()) && System.nanoTime() < end) {
        rig.press(new KeyStroke('s', false, false));
        LockSupport.parkNanos(5_000_000);
      }
      assertFalse(rig.desk.busy(), "the bench cannot be stopped");
      rig.press(new KeyStroke('q', false, false));
      assertTrue(rig.cockpit.done());
      assertEquals(Rung.values().length, rig.desk.ladder().size());
      assertEquals(List.of(), rig.mistakes);
      assertFalse(rig.keeper.captures.isEmpty(), "the keys measured nothing");
    }
  }

  @Test
  void threeThousandKeys() throws Exception {
    play(11, 3_000);
  }

  @Test
  @Tag("validation")
  void oneHundredThousandKeys() throws Exception {
    for (int seed = 0; seed < 10; seed++) {
      play(200 + seed, 10_000);
    }
  }
}
