package coilside.record;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.bench.KeepException;
import coilside.bench.LogRow;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/**
 * Fills a real small file system where this user may mount one; elsewhere a limit in the file
 * writer and in SQLite stand in for it (see {@code CaptureTest} and {@code BenchRecordTest}), which
 * is said.
 */
class FullDiskTest {
  @TempDir Path folder;

  @Test
  void aFullDiskStopsTheLogCleanlyAndWhatWasKeptIsWhole() throws Exception {
    if (run("mount", "-t", "tmpfs", "-o", "size=1m", "tmpfs", folder.toString()) != 0) {
      System.out.println(
          "No file system can be mounted here: the full disk was only tried with limits inside the"
              + " program.");
      return;
    }
    try {
      fill();
    } finally {
      assertEquals(0, run("umount", folder.toString()));
    }
  }

  private static int run(String... command) throws Exception {
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

  private void fill() throws Exception {
    Path ballast = Files.write(folder.resolve("ballast"), new byte[100_000]);
    List<LogRow> kept = new ArrayList<>();
    KeepException full = null;
    try (BenchRecord record = BenchRecord.open(folder)) {
      while (full == null && kept.size() < 10_000) {
        try {
          String capture = record.keep(Samples.capture("log", "oil", 2, 100, kept.size()));
          LogRow row = Samples.row("run-a", kept.size(), capture);
          record.keep(row);
          kept.add(row);
        } catch (KeepException e) {
          full = e;
        }
      }
    }
    assertTrue(full.getMessage().contains("full") || full.getMessage().contains("free some space"));
    Files.delete(ballast);
    try (BenchRecord record = BenchRecord.open(folder)) {
      List<LogRow> rows = new ArrayList<>();
      record.view().rows("run-a", rows::add);
      assertEquals(kept, rows);
      for (String base : CapturesFolder.list(folder)) {
        assertEquals(List.of(), CaptureChecks.problems(folder.resolve(base)));
      }
      record.keep(Samples.row("run-a", kept.size(), ""));
    }
  }
}
