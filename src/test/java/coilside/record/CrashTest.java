package coilside.record;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.bench.Rung;
import java.io.BufferedReader;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.HashSet;
import java.util.List;
import java.util.Random;
import java.util.Set;
import java.util.concurrent.locks.LockSupport;
import java.util.stream.Stream;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** Kills a writing process at random moments and looks at what is there afterwards. */
class CrashTest {
  @TempDir Path folder;

  private final List<String> reported = new ArrayList<>();
  private final Set<String> verified = new HashSet<>();

  @Test
  void whatWasReportedSurvivesTwentyKills() throws Exception {
    kill(20, 4711);
  }

  @Test
  @Tag("validation")
  void whatWasReportedSurvivesTwoHundredKills() throws Exception {
    kill(200, 815);
  }

  private void kill(int times, long seed) throws Exception {
    Random random = new Random(seed);
    int duringCapture = 0;
    Process next = start();
    try {
      for (int i = 0; i < times; i++) {
        Process writer = next;
        next = start();
        runAndKill(writer, 1 + random.nextInt(6), random.nextInt(20_000_000));
        duringCapture += leftovers() > 0 ? 1 : 0;
        verify();
      }
    } finally {
      next.destroyForcibly();
    }
    assertTrue(reported.size() > times, "only " + reported.size() + " rows were ever reported");
    System.out.println(
        times
            + " kills: "
            + reported.size()
            + " rows and findings reported, all there; "
            + duringCapture
            + " kills fell while a capture was being written");
  }

  private void runAndKill(Process writer, int lines, int nanos) throws Exception {
    try (BufferedReader out = writer.inputReader(StandardCharsets.UTF_8)) {
      writer.outputWriter().write("go\n");
      writer.outputWriter().flush();
      for (int k = 0; k < lines; k++) {
        String line = out.readLine();
        assertTrue(line != null, "the writer ended by itself");
        reported.add(line);
      }
      LockSupport.parkNanos(nanos);
      // By its handle: Process.destroyForcibly would close the stream still to be read.
      writer.toHandle().destroyForcibly();
      writer.waitFor();
      out.lines().forEach(reported::add);
    } finally {
      writer.destroyForcibly();
    }
  }

  private Process start() throws Exception {
    return new ProcessBuilder(
            Path.of(System.getProperty("java.home"), "bin", "java").toString(),
            "-XX:TieredStopAtLevel=1",
            "-Xmx64m",
            "-cp",
            System.getProperty("java.class.path"),
            CrashWriter.class.getName(),
            folder.toString())
        .redirectError(ProcessBuilder.Redirect.DISCARD)
        .start();
  }

  private long leftovers() throws Exception {
    try (Stream<Path> files = Files.list(folder)) {
      return files.filter(f -> f.getFileName().toString().startsWith(".")).count();
    }
  }

  /** Opens the record as the next start would and holds it against what was reported. */
  private void verify() throws Exception {
    try (BenchRecord record = BenchRecord.open(folder)) {
      assertEquals(0, leftovers());
      List<String> rows = new ArrayList<>();
      record
          .view()
          .rows(
              "run-a",
              row -> {
                assertEquals(Samples.row("run-a", rows.size(), row.capture()), row);
                rows.add("row " + row.number() + " " + row.capture());
              });
      List<String> findings =
          record.findings(Rung.T2STAR).stream()
              .map(f -> "finding " + f.id().substring(2) + " " + f.capture())
              .toList();
      Set<String> kept = new HashSet<>(rows);
      kept.addAll(findings);
      for (String line : reported) {
        assertTrue(kept.contains(line), "reported but not kept: " + line);
      }
      for (String line : kept) {
        assertSound(line.substring(line.lastIndexOf(' ') + 1));
      }
      for (String base : CapturesFolder.list(folder)) {
        assertSound(base);
      }
      try (Stream<Path> files = Files.list(folder)) {
        long data = files.filter(f -> f.toString().endsWith(".sigmf-data")).count();
        assertEquals(CapturesFolder.list(folder).size(), data);
      }
    }
  }

  private void assertSound(String base) throws Exception {
    if (verified.add(base)) {
      assertEquals(List.of(), CaptureChecks.problems(folder.resolve(base)));
      assertEquals(2, CaptureReader.read(folder.resolve(base)).scans().size());
    }
  }
}
