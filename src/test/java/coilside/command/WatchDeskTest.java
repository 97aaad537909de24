package coilside.command;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.bench.Finding;
import coilside.bench.LogRow;
import coilside.bench.Progress;
import coilside.bench.Rung;
import coilside.bench.RungStatus;
import coilside.bench.Work;
import coilside.record.BenchRecord;
import coilside.record.RecordHeld;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Clock;
import java.time.Instant;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.OptionalDouble;
import java.util.concurrent.CountDownLatch;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.io.TempDir;

/** Watching a bench that another program holds. */
@Timeout(value = 60, threadMode = Timeout.ThreadMode.SEPARATE_THREAD)
class WatchDeskTest {
  @TempDir Path folder;

  private final CommonOptions options = new CommonOptions();

  @BeforeEach
  void climb() throws Exception {
    options.captures = LogProcess.climbed(folder.resolve("captures"));
  }

  private RecordHeld held() {
    return assertThrows(
        RecordHeld.class, () -> BenchRecord.open(options.captures, Clock.systemUTC()));
  }

  private static LogRow row(Finding of, long number) {
    return new LogRow(
        "log-a",
        number,
        Instant.EPOCH.plusSeconds(number),
        Instant.EPOCH.plusSeconds(number),
        Map.of("larmor_frequency", of.value("larmor_frequency")),
        OptionalDouble.empty(),
        0,
        "",
        of.capture());
  }

  private static Finding again(Finding f) {
    return new Finding(
        f.id() + "-again",
        f.rung(),
        Instant.now(),
        f.seconds(),
        f.scans(),
        f.values(),
        f.warnings(),
        f.refusal(),
        f.conditions(),
        f.capture(),
        f.restedOn(),
        f.simulated());
  }

  @Test
  void whatTheHolderKeepsIsShownSoonAfter() throws Exception {
    try (BenchRecord record = BenchRecord.open(options.captures, Clock.systemUTC());
        WatchDesk desk = WatchDesk.open(options, held(), Clock.systemUTC())) {
      List<Progress> told = new ArrayList<>();
      desk.listen(told::add);
      assertEquals(8, desk.ladder().size());
      assertTrue(
          desk.ladder().stream().noneMatch(s -> s.state() == RungStatus.State.MISSING),
          desk.ladder().toString());
      desk.poll();
      assertEquals(8, told.stream().filter(e -> e instanceof Progress.PictureChanged).count());
      assertTrue(desk.picture(Rung.NUTATION).isPresent());
      assertTrue(desk.board().simulated());
      assertEquals("scpi-console", desk.board().profileName());

      told.clear();
      Finding good = record.newest(Rung.T2STAR).orElseThrow();
      record.keep(row(good, 0));
      record.keep(row(good, 1));
      record.keep(again(good));
      desk.poll();
      assertEquals(2, told.stream().filter(e -> e instanceof Progress.LogRowKept).count());
      assertEquals(1, told.stream().filter(e -> e instanceof Progress.RungEnded).count());
      assertTrue(told.stream().anyMatch(e -> e instanceof Progress.LadderChanged));
      assertTrue(told.stream().anyMatch(e -> e instanceof Progress.PictureChanged));
      assertEquals(2, desk.history(Rung.T2STAR).size());

      told.clear();
      desk.poll();
      assertEquals(List.of(), told, "nothing new, nothing told");
    }
  }

  @Test
  void everythingElseIsTurnedDownAndTheHolderNamed() throws Exception {
    try (BenchRecord record = BenchRecord.open(options.captures, Clock.systemUTC());
        WatchDesk desk = WatchDesk.open(options, held(), Clock.systemUTC())) {
      String holder = "process " + ProcessHandle.current().pid();
      IllegalStateException e =
          assertThrows(IllegalStateException.class, () -> desk.begin(new Work.Ready()));
      assertTrue(e.getMessage().contains(holder), e.getMessage());
      assertThrows(IllegalStateException.class, () -> desk.apply(desk.settings()));
      List<Progress> told = new ArrayList<>();
      desk.listen(told::add);
      desk.arm("somebody");
      assertTrue(((Progress.Message) told.get(0)).text().contains(holder), told.toString());
      assertEquals(
          0,
          record.view().eventsAfter(0, 1000).stream()
              .filter(k -> k.what().text().contains("somebody"))
              .count());
    }
  }

  @Test
  void tenWatchersSeeEveryRowOfOneWriter() throws Exception {
    int rows = 200;
    try (BenchRecord record = BenchRecord.open(options.captures, Clock.systemUTC())) {
      RecordHeld held = held();
      List<WatchDesk> desks = new ArrayList<>();
      List<List<Long>> seen = new ArrayList<>();
      CountDownLatch all = new CountDownLatch(10);
      for (int i = 0; i < 10; i++) {
        List<Long> mine = new ArrayList<>();
        seen.add(mine);
        WatchDesk desk = WatchDesk.open(options, held, Clock.systemUTC());
        desks.add(desk);
        desk.listen(
            event -> {
              if (event instanceof Progress.LogRowKept kept) {
                mine.add(kept.row().number());
                if (kept.row().number() == rows - 1) {
                  all.countDown();
                }
              }
            });
        desk.start();
      }
      Finding good = record.newest(Rung.T2STAR).orElseThrow();
      for (int n = 0; n < rows; n++) {
        record.keep(row(good, n));
      }
      assertTrue(all.await(30, TimeUnit.SECONDS), "not every watcher saw the last row");
      desks.forEach(WatchDesk::close);
      for (List<Long> mine : seen) {
        assertEquals(java.util.stream.LongStream.range(0, rows).boxed().toList(), mine);
      }
    }
  }

  @Test
  void theEndOfTheHolderIsTold() throws Exception {
    Process holder =
        LogProcess.command(
                "log", "--every", "50ms", "--scans", "1", "--captures", options.captures.toString())
            .redirectErrorStream(true)
            .start();
    try {
      assertTrue(holder.getInputStream().read() >= 0);
      try (WatchDesk desk = WatchDesk.open(options, held(), Clock.systemUTC())) {
        List<Progress> told = new ArrayList<>();
        desk.listen(told::add);
        desk.poll();
        assertTrue(
            told.stream()
                .anyMatch(
                    e ->
                        e instanceof Progress.Message m
                            && m.text().contains("process " + holder.pid())),
            told.toString());
        holder.toHandle().destroyForcibly();
        holder.waitFor();
        desk.poll();
        desk.poll();
        assertEquals(
            1,
            told.stream()
                .filter(e -> e instanceof Progress.Message m && m.text().contains("has ended"))
                .count());
      }
    } finally {
      holder.toHandle().destroyForcibly();
    }
    assertTrue(Files.exists(options.captures.resolve(BenchRecord.FILE_NAME)));
  }
}
