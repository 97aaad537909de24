package coilside.terminal;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.bench.Rung;
import coilside.record.BenchRecord;
import coilside.record.RecordView;
import java.nio.file.Path;
import java.util.List;
import java.util.Map;
import java.util.concurrent.locks.LockSupport;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.condition.EnabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;

/** The real program on terminals that stop, crawl or vanish: the bench goes on. */
@EnabledOnOs(OS.LINUX)
@Tag("validation")
class TroubledTerminalTest {
  private static final int PATIENCE = 90;

  @TempDir Path captures;

  private RealTerminal start(Map<String, String> environment) throws Exception {
    RealTerminal t =
        new RealTerminal(
            80, 24, environment, List.of("--captures", captures.toString(), "--seed", "5"));
    assertTrue(t.screen.shows("8 t2        ○ missing", PATIENCE), t.screen.text());
    return t;
  }

  private boolean kept(Rung rung) throws Exception {
    long end = System.nanoTime() + PATIENCE * 1_000_000_000L;
    try (RecordView view = BenchRecord.watch(captures)) {
      while (System.nanoTime() < end) {
        if (view.newest(rung).isPresent()) {
          return true;
        }
        LockSupport.parkNanos(100_000_000);
      }
    }
    return false;
  }

  @Test
  void aStoppedTerminalDoesNotStopTheBench() throws Exception {
    try (RealTerminal t = start(Map.of())) {
      t.type("r");
      assertTrue(t.screen.shows("1 noise     ● fresh", PATIENCE), t.screen.text());
      t.freeze();
      assertTrue(kept(Rung.T2), "the ladder was not finished behind a stopped terminal");
      t.thaw();
      assertTrue(t.screen.shows("8 t2        ● fresh", PATIENCE), t.screen.text());
      t.type("q");
      assertEquals(TextInterface.DONE, t.ended(PATIENCE));
    }
  }

  @Test
  void aStoppedTerminalDoesNotKeepItFromEnding() throws Exception {
    try (RealTerminal t = start(Map.of())) {
      t.freeze();
      t.type("l");
      LockSupport.parkNanos(3_000_000_000L);
      t.program.toHandle().destroy();
      assertTrue(t.ended(20) > 0, "still running 20 s after the signal");
    }
  }

  @Test
  void aClosedWindowEndsTheScreenAndNotTheRun() throws Exception {
    try (RealTerminal t = start(Map.of())) {
      t.type("r");
      assertTrue(t.screen.shows("1 noise     ● fresh", PATIENCE), t.screen.text());
      t.hangUp();
      assertEquals(TextInterface.DONE, t.ended(PATIENCE));
      assertTrue(kept(Rung.T2));
    }
  }

  /** 100 kbit/s carry 12 500 bytes a second. */
  @Test
  void aSlowLineIsKeptUpWith() throws Exception {
    try (RealTerminal t = start(Map.of("SSH_CONNECTION", "192.0.2.1 1 192.0.2.2 22"))) {
      t.slow(12_500);
      t.type("l");
      assertTrue(t.screen.shows("live", PATIENCE), t.screen.text());
      LockSupport.parkNanos(5_000_000_000L);
      long asked = System.nanoTime();
      t.type("?");
      assertTrue(t.screen.shows("q back", PATIENCE), t.screen.text());
      double seconds = (System.nanoTime() - asked) / 1e9;
      System.out.printf("A key is answered after %.2f s at 100 kbit/s while live runs%n", seconds);
      assertTrue(seconds < 3, "answered after " + seconds + " s: output queues up");
      t.type("qq");
      assertEquals(TextInterface.DONE, t.ended(PATIENCE));
    }
  }
}
