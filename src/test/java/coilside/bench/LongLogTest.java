package coilside.bench;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.record.BenchRecord;
import coilside.record.RecordView;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.util.List;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** Many repetitions in a 128 MB heap: no growth, and the last row costs what the first did. */
class LongLogTest {
  @TempDir Path folder;

  @Test
  void aThousandRepetitionsRunInASmallHeap() throws Exception {
    run(1000);
  }

  @Test
  @Tag("validation")
  void aHundredThousandRepetitionsNeitherGrowNorSlowDown() throws Exception {
    List<String> lines = run(100_000);
    long[] micros = column(lines, 1);
    long[] kilobytes = column(lines, 2);
    // By the processor's time: that of the disk depends on who else uses it.
    assertTrue(micros[9] < 1.5 * micros[2], "a row costs more and more: " + lines);
    assertTrue(kilobytes[9] < kilobytes[1] + 4096, "the heap grows: " + lines);
  }

  private static long[] column(List<String> lines, int column) {
    return lines.stream().mapToLong(l -> Long.parseLong(l.split(" ")[column])).toArray();
  }

  private List<String> run(int repetitions) throws Exception {
    Process process =
        new ProcessBuilder(
                Path.of(System.getProperty("java.home"), "bin", "java").toString(),
                "-Xmx128m",
                "-cp",
                System.getProperty("java.class.path"),
                LongLogMain.class.getName(),
                folder.toString(),
                Integer.toString(repetitions))
            .redirectErrorStream(true)
            .start();
    List<String> lines;
    try (var out = process.inputReader(StandardCharsets.UTF_8)) {
      lines = out.lines().toList();
    } finally {
      process.destroyForcibly();
    }
    System.out.println("median us a row, of that on the processor, kB in use, by tenth: " + lines);
    assertEquals(11, lines.size(), lines.toString());
    assertEquals("PLANNED " + repetitions + " 0", lines.get(10));

    long from = System.nanoTime();
    try (BenchRecord record = BenchRecord.open(folder, java.time.Clock.systemUTC())) {
      RecordView.LogRun run = record.view().runs().get(0);
      assertEquals(repetitions, run.rows());
      long opened = (System.nanoTime() - from) / 1_000_000;
      LogSummary.Builder builder = new LogSummary.Builder();
      record.view().rows(run.run(), builder::add);
      LogSummary summary = builder.build();
      long summed = (System.nanoTime() - from) / 1_000_000 - opened;
      System.out.println("opened in " + opened + " ms, summed up in " + summed + " ms: " + summary);
      assertTrue(opened < 1000, opened + " ms");
      assertEquals(repetitions, summary.rows());
    }
    return lines.subList(0, 10);
  }
}
