package coilside.command;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.record.BenchRecord;
import com.google.gson.JsonObject;
import com.google.gson.JsonParser;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Clock;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/** The log as a command: its document, its files, its refusals, its exit statuses. */
class LogCommandTest {
  @TempDir Path folder;

  private CommandRun run(String... arguments) {
    String[] all = new String[arguments.length + 3];
    System.arraycopy(arguments, 0, all, 0, arguments.length);
    all[arguments.length] = "--captures";
    all[arguments.length + 1] = folder.resolve("captures").toString();
    all[arguments.length + 2] = "--plain";
    return CommandRun.of(all);
  }

  private void climb() throws Exception {
    LogProcess.climbed(folder.resolve("captures"));
  }

  @Test
  void withJsonThereIsOneDocumentOfRowsAndSummary() throws Exception {
    climb();
    CommandRun run = run("log", "--every", "1s", "--count", "4", "--scans", "1", "--json");
    assertEquals(0, run.status(), run.err());
    JsonObject document = JsonParser.parseString(run.out()).getAsJsonObject();
    int rows = document.getAsJsonArray("rows").size();
    assertTrue(rows >= 3, run.out());
    JsonObject first = document.getAsJsonArray("rows").get(0).getAsJsonObject();
    double hertz =
        first
            .getAsJsonObject("values")
            .getAsJsonObject("larmor_frequency")
            .get("value")
            .getAsDouble();
    assertEquals(8.0895e6, hertz, 5e3);
    JsonObject summary = document.getAsJsonObject("summary");
    assertEquals("planned", summary.get("ended").getAsString());
    assertEquals(rows, summary.get("rows").getAsInt() + summary.get("gaps").getAsInt(), run.out());
    assertTrue(summary.has("drift_rate"), run.out());
    assertTrue(summary.getAsJsonArray("allan_deviation").size() >= 1, run.out());
    assertEquals("ppm/h", summary.getAsJsonObject("drift_rate").get("unit").getAsString());
  }

  @Test
  void theFileThatGrewWithTheLogIsTheOneThatItsExportGives() throws Exception {
    climb();
    Path grown = folder.resolve("grown.csv");
    CommandRun log =
        run("log", "--every", "0.5s", "--count", "3", "--scans", "1", "--csv", grown.toString());
    assertEquals(0, log.status(), log.err());
    CommandRun list = run("log", "--list");
    String name = list.out().split("\\s+")[0];
    assertTrue(name.startsWith("log-"), list.out());
    Path exported = folder.resolve("exported.csv");
    CommandRun export = run("export", name, "--as", "csv", "--to", exported.toString());
    assertEquals(0, export.status(), export.err());
    assertEquals(Files.readString(grown), Files.readString(exported));
    assertTrue(Files.readString(grown).contains("larmor_frequency [Hz]"));
    CommandRun show = run("show", name);
    assertEquals(0, show.status(), show.err());
    for (String line : show.out().split("\n")) {
      assertTrue(log.out().contains(line), line + " is not in the log's own summary: " + log.out());
    }
    assertEquals(2, run("export", name, "--as", "wav").status());
  }

  @Test
  void aRuleThatEndsTheLogGivesTheStatusOfALimit() throws Exception {
    climb();
    CommandRun run =
        run("log", "--every", "0.5s", "--count", "9", "--scans", "1", "--stop-when", "snr < 5000");
    assertEquals(4, run.status(), run.err());
    assertTrue(run.err().contains("below the bound of 5000"), run.err());
    assertEquals(1, run.out().lines().filter(LogProcess::row).count(), run.out());
  }

  @Test
  void rowsOnlyKeepsNoCaptures() throws Exception {
    climb();
    long before = captures();
    CommandRun run = run("log", "--every", "0.5s", "--count", "2", "--scans", "1", "--rows-only");
    assertEquals(0, run.status(), run.err());
    assertEquals(before, captures());
  }

  private long captures() throws Exception {
    try (var files = Files.list(folder.resolve("captures"))) {
      return files.filter(f -> f.toString().endsWith(".sigmf-meta")).count();
    }
  }

  @Test
  void withoutALadderNothingIsPlayedAndTheRefusalSaysWhatToDo() {
    CommandRun run = run("log", "--every", "1s", "--count", "3");
    assertEquals(1, run.status(), run.err());
    assertTrue(run.err().contains("climb the ladder first"), run.err());
    assertEquals("", run.out());
  }

  @Test
  void aSecondWriterIsRefusedAndToldThatItMayWatch() throws Exception {
    climb();
    try (BenchRecord held = BenchRecord.open(folder.resolve("captures"), Clock.systemUTC())) {
      CommandRun run = run("log", "--every", "1s", "--count", "3");
      assertEquals(5, run.status(), run.err());
      assertTrue(run.err().contains("process " + ProcessHandle.current().pid()), run.err());
      assertTrue(run.err().contains("watch"), run.err());
      assertFalse(held.folder().toString().isEmpty());
      CommandRun ladder = run("ladder");
      assertEquals(0, ladder.status(), ladder.err());
      assertTrue(ladder.out().contains("nutation"), ladder.out());
    }
  }

  @Test
  void anEmptyRecordHasNoLogs() {
    assertEquals(0, run("log", "--list").status());
    assertTrue(run("log", "--list").out().contains("no log"));
    assertEquals(
        0,
        JsonParser.parseString(run("log", "--list", "--json").out())
            .getAsJsonObject()
            .getAsJsonArray("runs")
            .size());
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "--count;3 | --every is missing",
        "--every;31d | longer than 30 d",
        "--every;1s;--warn-when;linewidth > 80 | no unit",
        "--every;1s;--stop-when;width > 80Hz | no value of a log",
        "--every;1s;--until;2020-01-01T00:00 | is over"
      })
  void wrongValuesAreRefusedBeforeTheBenchIsOpened(String arguments, String word) {
    List<String> all = new java.util.ArrayList<>(List.of("log"));
    all.addAll(List.of(arguments.strip().split(";")));
    CommandRun run = run(all.toArray(new String[0]));
    assertEquals(2, run.status(), run.err());
    assertTrue(run.err().contains(word.strip()), run.err());
    assertFalse(Files.exists(folder.resolve("captures")));
  }
}
