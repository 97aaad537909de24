package coilside.command;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.bench.LogRow;
import coilside.record.BenchRecord;
import coilside.record.CaptureChecks;
import coilside.record.RecordView;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.stream.Stream;
import org.junit.jupiter.api.Assumptions;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/**
 * A log that fills a real small file system, where this user may mount one. Elsewhere the stand-ins
 * in {@code coilside.record} have to do, and the skipped test says so.
 */
@Tag("machine")
class LogFullDiskTest {
  @TempDir Path folder;

  private static int system(String... command) throws Exception {
    try {
      return new ProcessBuilder(command)
          .redirectErrorStream(true)
          .redirectOutput(ProcessBuilder.Redirect.DISCARD)
          .start()
          .waitFor();
    } catch (java.io.IOException e) {
      return -1;
    }
  }

  @Test
  void theLogStopsCleanlyAndWhatWasKeptIsWhole() throws Exception {
    Path disk = Files.createDirectory(folder.resolve("disk"));
    Path ready = LogProcess.climbed(folder.resolve("ready"));
    long kilobytes = 600;
    try (Stream<Path> files = Files.list(ready)) {
      for (Path file : files.toList()) {
        kilobytes += Files.size(file) / 1024 + 4;
      }
    }
    Assumptions.assumeTrue(
        system("mount", "-t", "tmpfs", "-o", "size=" + kilobytes + "k", "tmpfs", disk.toString())
            == 0,
        "no file system can be mounted here");
    try {
      try (Stream<Path> files = Files.list(ready)) {
        for (Path file : files.toList()) {
          Files.copy(file, disk.resolve(file.getFileName()));
        }
      }
      CommandRun run =
          CommandRun.of(
              "log", "--every", "10ms", "--scans", "1", "--plain", "--captures", disk.toString());
      assertEquals(5, run.status(), run.err());
      assertTrue(run.err().contains("free some space") || run.err().contains("full"), run.err());
      List<String> reported = run.out().lines().filter(LogProcess::row).toList();
      assertTrue(reported.size() > 2, run.out());
      List<LogRow> rows = new ArrayList<>();
      try (RecordView view = BenchRecord.watch(disk)) {
        for (RecordView.LogRun each : view.runs()) {
          view.rows(each.run(), rows::add);
        }
      }
      List<LogRow> good = rows.stream().filter(r -> !r.values().isEmpty()).toList();
      assertEquals(reported.size(), good.size());
      for (LogRow row : good) {
        assertEquals(List.of(), CaptureChecks.problems(disk.resolve(row.capture())));
      }
      System.out.println("full disk: " + good.size() + " rows kept, then " + run.err().strip());
    } finally {
      assertEquals(0, system("umount", disk.toString()));
    }
  }
}
