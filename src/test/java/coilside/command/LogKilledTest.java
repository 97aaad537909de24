package coilside.command;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.bench.LogRow;
import coilside.record.BenchRecord;
import coilside.record.CaptureChecks;
import coilside.record.CaptureReader;
import coilside.record.RecordView;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.HashMap;
import java.util.HashSet;
import java.util.List;
import java.util.Map;
import java.util.Random;
import java.util.Set;
import java.util.concurrent.locks.LockSupport;
import java.util.stream.Stream;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** The real program, logging, killed at random moments: what it reported is there, and no more. */
class LogKilledTest {
  @TempDir Path folder;

  private final Set<String> reported = new HashSet<>();
  private final Set<String> sound = new HashSet<>();

  @Test
  void everyReportedRowSurvivesFiveKills() throws Exception {
    kill(5, 31);
  }

  @Test
  @Tag("validation")
  void everyReportedRowSurvivesTwoHundredKills() throws Exception {
    kill(200, 77);
  }

  private void kill(int times, long seed) throws Exception {
    LogProcess.climbed(folder);
    Random random = new Random(seed);
    int rows = 0;
    for (int i = 0; i < times; i++) {
      try (LogProcess log =
          LogProcess.start(
              "log",
              "--every",
              "10ms",
              "--scans",
              "1",
              "--plain",
              "--captures",
              folder.toString())) {
        for (int k = random.nextInt(4); k >= 0; k--) {
          log.await(LogProcess::row);
        }
        LockSupport.parkNanos(random.nextInt(60_000_000));
        log.process.toHandle().destroyForcibly();
        log.end();
        log.rows().forEach(line -> reported.add(capture(line)));
        rows += log.rows().size();
      }
      verify();
    }
    assertTrue(reported.size() >= times, reported.size() + " rows");
    assertEquals(rows, reported.size(), "each row has a capture of its own");
    System.out.println(times + " kills of a log: " + rows + " reported rows, all kept and sound");
  }

  private static String capture(String line) {
    int open = line.lastIndexOf('[');
    return line.substring(open + 1, line.indexOf(']', open));
  }

  /** Opens the record as the next start does and holds it against what was reported. */
  private void verify() throws Exception {
    Map<String, LogRow> kept = new HashMap<>();
    try (BenchRecord record = BenchRecord.open(folder)) {
      for (RecordView.LogRun run : record.view().runs()) {
        record
            .view()
            .rows(
                run.run(),
                row -> {
                  if (!row.capture().isEmpty()) {
                    kept.put(row.capture(), row);
                  }
                });
      }
    }
    for (String capture : reported) {
      assertTrue(kept.containsKey(capture), "reported, but not in the record: " + capture);
    }
    for (String capture : kept.keySet()) {
      if (sound.add(capture)) {
        assertEquals(List.of(), CaptureChecks.problems(folder.resolve(capture)));
        assertEquals(1, CaptureReader.read(folder.resolve(capture)).scans().size());
      }
    }
    try (Stream<Path> files = Files.list(folder)) {
      List<String> names = files.map(f -> f.getFileName().toString()).toList();
      assertTrue(names.stream().noneMatch(n -> n.endsWith(".aside")), names.toString());
      assertEquals(
          names.stream().filter(n -> n.endsWith(".sigmf-meta")).count(),
          names.stream().filter(n -> n.endsWith(".sigmf-data")).count());
    }
  }
}
