package coilside.command;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.bench.LogRow;
import coilside.record.BenchRecord;
import coilside.record.CaptureReader;
import coilside.record.RecordView;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

/** Signals that reach a running log, in a process of its own. */
@Timeout(value = 120, threadMode = Timeout.ThreadMode.SEPARATE_THREAD)
class LogSignalsTest {
  @TempDir Path folder;

  private LogProcess log(String... more) throws Exception {
    List<String> arguments =
        new ArrayList<>(List.of("log", "--scans", "1", "--plain", "--captures", folder.toString()));
    arguments.addAll(List.of(more));
    return LogProcess.start(arguments.toArray(new String[0]));
  }

  private List<LogRow> kept() throws Exception {
    List<LogRow> rows = new ArrayList<>();
    try (BenchRecord record = BenchRecord.open(folder)) {
      for (RecordView.LogRun run : record.view().runs()) {
        record.view().rows(run.run(), rows::add);
      }
    }
    return rows;
  }

  @ParameterizedTest
  @ValueSource(strings = {"INT", "TERM", "HUP"})
  void theRunEndsWithWhatWasFinishedKept(String signal) throws Exception {
    LogProcess.climbed(folder);
    try (LogProcess log = log("--every", "20ms")) {
      log.await(LogProcess::row);
      log.await(LogProcess::row);
      log.signal(signal);
      assertEquals(130, log.end(), log.lines.toString());
      List<LogRow> rows = kept().stream().filter(r -> !r.values().isEmpty()).toList();
      assertEquals(log.rows().size(), rows.size());
      for (LogRow row : rows) {
        assertEquals(1, CaptureReader.read(folder.resolve(row.capture())).scans().size());
      }
      assertTrue(log.lines.stream().anyMatch(l -> l.contains("rows,")), "a summary: " + log.lines);
    }
  }

  @Test
  void aRunToBeKeptRunningSurvivesTheHangUpAndEndsAsPlanned() throws Exception {
    LogProcess.climbed(folder);
    try (LogProcess log = log("--every", "100ms", "--count", "25", "--keep-running")) {
      log.await(LogProcess::row);
      log.signal("HUP");
      log.await(LogProcess::row);
      log.signal("HUP");
      assertEquals(0, log.end(), log.lines.toString());
      List<LogRow> rows = kept();
      assertEquals(24, rows.get(rows.size() - 1).number() + missed(rows));
      assertTrue(log.rows().size() > 5, log.lines.toString());
    }
  }

  /** How many slots the last row tells of beside its own. */
  private static long missed(List<LogRow> rows) {
    String note = rows.get(rows.size() - 1).note();
    return note.contains(" slots missed") ? Long.parseLong(note.split(" ")[0]) - 1 : 0;
  }

  @Test
  void aReaderThatGoesAwayStopsNothing() throws Exception {
    LogProcess.climbed(folder);
    Process process =
        LogProcess.command(
                "log",
                "--every",
                "50ms",
                "--count",
                "20",
                "--scans",
                "1",
                "--keep-running",
                "--captures",
                folder.toString())
            .start();
    try {
      process.getInputStream().read();
      process.getInputStream().close();
      process.getErrorStream().close();
      assertEquals(0, process.waitFor());
      assertTrue(kept().size() > 2);
    } finally {
      process.toHandle().destroyForcibly();
    }
  }
}
