package coilside.record;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.bench.Finding;
import coilside.bench.KeepException;
import coilside.bench.LogRow;
import coilside.bench.Rung;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.attribute.PosixFilePermissions;
import java.sql.Connection;
import java.sql.DriverManager;
import java.sql.ResultSet;
import java.sql.SQLException;
import java.sql.Statement;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

class BenchRecordTest {
  @TempDir Path folder;

  @Test
  void findingsComeBackExactly() throws Exception {
    Finding first;
    Finding second = Samples.refused("f-2", Rung.RESONANCE);
    try (BenchRecord record = BenchRecord.open(folder)) {
      String capture = record.keep(Samples.capture("nutation", "doped water", 2, 8, 1));
      first = Samples.finding("f-1", Rung.NUTATION, capture);
      record.keep(first);
      record.keep(second);
    }
    try (BenchRecord record = BenchRecord.open(folder)) {
      assertEquals(List.of(first), record.findings(Rung.NUTATION));
      assertEquals(
          List.copyOf(first.values().keySet()),
          List.copyOf(record.findings(Rung.NUTATION).get(0).values().keySet()));
      assertEquals(Optional.of(second), record.newest(Rung.RESONANCE));
      assertEquals(Optional.of(first), record.view().finding("f-1"));
      assertEquals(Optional.empty(), record.newest(Rung.T1));
    }
  }

  @Test
  void orderIsThatOfKeepingEvenWhenTheClockStepsBack() throws Exception {
    try (BenchRecord record = BenchRecord.open(folder)) {
      Finding late = Samples.refused("f-1", Rung.NOISE);
      Finding early =
          new Finding(
              "f-2",
              Rung.NOISE,
              late.started().minusSeconds(7200),
              1,
              1,
              late.values(),
              List.of(),
              late.refusal(),
              late.conditions(),
              "",
              late.restedOn(),
              false);
      record.keep(late);
      record.keep(early);
      assertEquals(List.of(late, early), record.findings(Rung.NOISE));
      assertEquals(Optional.of(early), record.newest(Rung.NOISE));
    }
  }

  @Test
  void logRowsEventsAndSettingsComeBack() throws Exception {
    List<LogRow> rows = new ArrayList<>();
    try (BenchRecord record = BenchRecord.open(folder)) {
      record.note(Samples.START, "armed", "alex, into the 6 mm coil");
      record.setSetting("sample", "oil");
      record.setSetting("sample", "doped water");
      for (int i = 0; i < 5; i++) {
        rows.add(i == 2 ? Samples.gap("run-a", i) : Samples.row("run-a", i, ""));
        record.keep(rows.get(i));
        record.keep(Samples.row("run-b", i, ""));
      }
    }
    try (BenchRecord record = BenchRecord.open(folder)) {
      List<LogRow> read = new ArrayList<>();
      record.view().rows("run-a", read::add);
      assertEquals(rows, read);
      assertEquals(Optional.of("doped water"), record.setting("sample"));
      assertEquals(Optional.empty(), record.setting("coil"));
      RecordView.Event event = record.view().eventsAfter(0, 10).get(0).what();
      assertEquals(new RecordView.Event(Samples.START, "armed", "alex, into the 6 mm coil"), event);
      List<RecordView.LogRun> runs = record.view().runs();
      assertEquals(List.of("run-a", "run-b"), runs.stream().map(RecordView.LogRun::run).toList());
      assertEquals(5, runs.get(0).rows());
      assertEquals(1, runs.get(0).gaps());
      assertEquals(rows.get(4).started(), runs.get(0).lastStarted());
    }
  }

  @Test
  void anyOtherSqliteToolReadsTheViews() throws Exception {
    try (BenchRecord record = BenchRecord.open(folder)) {
      record.keep(Samples.finding("f-1", Rung.NUTATION, ""));
      record.keep(Samples.row("run-a", 3, ""));
      try (Connection c =
              DriverManager.getConnection("jdbc:sqlite:" + folder.resolve("bench-record.sqlite"));
          Statement s = c.createStatement()) {
        try (ResultSet r =
            s.executeQuery("SELECT value, u, unit FROM findings WHERE name = 'pulse_90'")) {
          assertTrue(r.next());
          assertEquals(1.0999999999999999e-5, r.getDouble(1));
          assertEquals(9e-8, r.getDouble(2));
          assertEquals("s", r.getString(3));
        }
        try (ResultSet r =
            s.executeQuery(
                "SELECT larmor_frequency_hertz, u_larmor_frequency_hertz, t2_star_seconds,"
                    + " strftime('%Y-%m-%d %H:%M:%S', due_utc) FROM log_rows")) {
          assertTrue(r.next());
          assertEquals(8089503.125, r.getDouble(1));
          assertEquals(0.25, r.getDouble(2));
          assertEquals(0.009, r.getDouble(3));
          assertEquals("2026-11-03 09:17:00", r.getString(4));
        }
        assertEquals("wal", pragma(s, "journal_mode"));
        assertEquals("1", pragma(s, "user_version"));
      }
    }
  }

  private static String pragma(Statement s, String name) throws SQLException {
    try (ResultSet r = s.executeQuery("PRAGMA " + name)) {
      r.next();
      return r.getString(1);
    }
  }

  @Test
  void watchersSeeWhatIsNewWhileTheBenchWrites() throws Exception {
    try (BenchRecord record = BenchRecord.open(folder)) {
      record.keep(Samples.row("run-a", 0, ""));
      List<RecordView> watchers = new ArrayList<>();
      try {
        for (int i = 0; i < 10; i++) {
          watchers.add(BenchRecord.watch(folder));
        }
        long seen = watchers.get(0).rowsAfter(0, 100).get(0).number();
        record.keep(Samples.row("run-a", 1, ""));
        record.keep(Samples.finding("f-1", Rung.T1, ""));
        for (RecordView watcher : watchers) {
          List<RecordView.Kept<LogRow>> fresh = watcher.rowsAfter(seen, 100);
          assertEquals(1, fresh.size());
          assertEquals(Samples.row("run-a", 1, ""), fresh.get(0).what());
          assertEquals(1, watcher.findingsAfter(0, 100).size());
        }
      } finally {
        watchers.forEach(RecordView::close);
      }
    }
  }

  @Test
  void watchingNeedsARecordAndMakesNone() throws Exception {
    KeepException e = assertThrows(KeepException.class, () -> BenchRecord.watch(folder));
    assertTrue(e.getMessage().contains("--captures DIR"), e.getMessage());
    try (var files = Files.list(folder)) {
      assertEquals(0, files.count());
    }
  }

  @Test
  void aSecondWriterIsRefusedAndToldWhoHoldsIt() throws Exception {
    try (BenchRecord record = BenchRecord.open(folder)) {
      KeepException e = assertThrows(KeepException.class, () -> BenchRecord.open(folder));
      assertTrue(
          e.getMessage().contains("process " + ProcessHandle.current().pid() + " since "),
          e.getMessage());
      record.keep(Samples.refused("f-1", Rung.NOISE));
      assertThrows(KeepException.class, () -> BenchRecord.open(folder));
    }
    BenchRecord.open(folder).close();
  }

  @Test
  void aFolderThatCannotBeMadeIsRefusedWithWhatToDo() throws Exception {
    Path file = Files.writeString(folder.resolve("file"), "not a folder");
    KeepException e =
        assertThrows(KeepException.class, () -> BenchRecord.open(file.resolve("captures")));
    assertTrue(e.getMessage().contains(file.toString()), e.getMessage());
    assertTrue(e.getMessage().contains("--captures DIR"), e.getMessage());
    KeepException onFile = assertThrows(KeepException.class, () -> BenchRecord.open(file));
    assertTrue(onFile.getMessage().contains("no folder"), onFile.getMessage());
  }

  @Test
  void aReadOnlyFolderIsRefused() throws Exception {
    Path closed =
        Files.createDirectory(
            folder.resolve("closed"),
            PosixFilePermissions.asFileAttribute(PosixFilePermissions.fromString("r-xr-xr-x")));
    if (Files.isWritable(closed)) {
      // The administrator may write anywhere; a folder of the kernel's own refuses even that.
      KeepException e =
          assertThrows(KeepException.class, () -> BenchRecord.open(Path.of("/proc/captures")));
      assertTrue(e.getMessage().contains("--captures DIR"), e.getMessage());
    } else {
      KeepException e = assertThrows(KeepException.class, () -> BenchRecord.open(closed));
      assertTrue(e.getMessage().contains("permission denied"), e.getMessage());
    }
  }

  @Test
  void aDamagedRecordANewerOneAndSomebodyElsesAreLeftAlone() throws Exception {
    Path file = folder.resolve(BenchRecord.FILE_NAME);
    Files.writeString(file, "this is no SQLite file, whatever its name says".repeat(100));
    KeepException damaged = assertThrows(KeepException.class, () -> BenchRecord.open(folder));
    assertTrue(damaged.getMessage().contains("damaged"), damaged.getMessage());
    Files.delete(file);

    BenchRecord.open(folder).close();
    sql(file, "PRAGMA user_version = 99");
    KeepException newer = assertThrows(KeepException.class, () -> BenchRecord.open(folder));
    assertTrue(newer.getMessage().contains("newer coilside"), newer.getMessage());
    assertThrows(KeepException.class, () -> BenchRecord.watch(folder));
    Files.delete(file);

    sql(file, "PRAGMA application_id = 77");
    KeepException other = assertThrows(KeepException.class, () -> BenchRecord.open(folder));
    assertTrue(other.getMessage().contains("another program"), other.getMessage());
  }

  private static void sql(Path file, String sql) throws SQLException {
    try (Connection c = DriverManager.getConnection("jdbc:sqlite:" + file);
        Statement s = c.createStatement()) {
      s.execute(sql);
    }
  }

  @Test
  void aFullDiskStopsCleanlyAndWhatWasKeptIsWhole() throws Exception {
    int kept = 0;
    KeepException full = null;
    try (BenchRecord record = BenchRecord.open(folder)) {
      record.database().limitPages(60);
      while (full == null && kept < 100_000) {
        try {
          record.keep(Samples.row("run-a", kept, ""));
          kept++;
        } catch (KeepException e) {
          full = e;
        }
      }
      assertTrue(full.getMessage().contains("the disk is full"), full.getMessage());
      assertEquals(kept, record.view().runs().get(0).rows());
    }
    try (BenchRecord record = BenchRecord.open(folder)) {
      List<LogRow> rows = new ArrayList<>();
      record.view().rows("run-a", rows::add);
      assertEquals(kept, rows.size());
      assertEquals(Samples.row("run-a", kept - 1, ""), rows.get(kept - 1));
      record.keep(Samples.row("run-a", kept, ""));
    }
  }

  @Test
  void aFindingWhoseCaptureIsGoneIsRefused() throws Exception {
    try (BenchRecord record = BenchRecord.open(folder)) {
      Finding finding = Samples.finding("f-1", Rung.T2, "2026-11-03-091530-t2");
      KeepException e = assertThrows(KeepException.class, () -> record.keep(finding));
      assertTrue(e.getMessage().contains("2026-11-03-091530-t2"), e.getMessage());
      assertEquals(List.of(), record.findings(Rung.T2));
    }
  }

  @Test
  void aFailedMigrationLeavesTheFileAsItWas() throws Exception {
    Path file = folder.resolve(BenchRecord.FILE_NAME);
    sql(file, "CREATE TABLE event(in_the_way)");
    assertThrows(KeepException.class, () -> BenchRecord.open(folder));
    try (Connection c = DriverManager.getConnection("jdbc:sqlite:" + file);
        Statement s = c.createStatement();
        ResultSet r = s.executeQuery("SELECT count(*) FROM sqlite_master")) {
      r.next();
      assertEquals(1, r.getInt(1));
    }
  }
}
