package coilside.record;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.util.List;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/**
 * A long log in a 128 MB heap: no growth, the same cost for the last row as for the first. Each row
 * waits for the disk twice, so that it takes some minutes; with {@code -Djava.io.tmpdir} on a file
 * system in memory, half a minute.
 */
class LongLogTest {
  private static final int ROWS = 100_000;

  @TempDir Path folder;

  @Test
  @Tag("validation")
  void aHundredThousandRowsCostTheSameFromFirstToLastInASmallHeap() throws Exception {
    Process process =
        new ProcessBuilder(
                Path.of(System.getProperty("java.home"), "bin", "java").toString(),
                "-Xmx128m",
                "-cp",
                System.getProperty("java.class.path"),
                LongLogMain.class.getName(),
                folder.toString(),
                Integer.toString(ROWS),
                "100")
            .redirectErrorStream(true)
            .start();
    List<String> lines;
    try (var out = process.inputReader(StandardCharsets.UTF_8)) {
      lines = out.lines().toList();
    } finally {
      process.destroyForcibly();
    }
    System.out.println("median us a row, kB in use, by tenth: " + lines);
    assertEquals(10, lines.size(), lines.toString());
    long[] micros = column(lines, 0);
    long[] kilobytes = column(lines, 1);
    assertTrue(micros[9] < 2 * micros[1], "a row costs more and more: " + lines);
    assertTrue(kilobytes[9] < kilobytes[1] + 4096, "the heap grows: " + lines);

    long from = System.nanoTime();
    try (BenchRecord record = BenchRecord.open(folder)) {
      assertEquals(ROWS, record.view().runs().get(0).rows());
      long milliseconds = (System.nanoTime() - from) / 1_000_000;
      System.out.println("opened with " + ROWS + " rows in " + milliseconds + " ms");
      assertTrue(milliseconds < 1000, milliseconds + " ms");
      List<RecordView.Kept<coilside.bench.LogRow>> last =
          record.view().rowsAfter("run-a", ROWS - 1, 10);
      assertEquals(1, last.size());
      assertEquals(Samples.row("run-a", ROWS - 1, ""), last.get(0).what());
    }
  }

  private static long[] column(List<String> lines, int column) {
    return lines.stream().mapToLong(l -> Long.parseLong(l.split(" ")[column])).toArray();
  }
}
