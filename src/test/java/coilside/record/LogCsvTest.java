package coilside.record;

import static org.junit.jupiter.api.Assertions.assertArrayEquals;
import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.bench.KeepException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardOpenOption;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

class LogCsvTest {
  @TempDir Path folder;

  @Test
  void rowsAppendedAsTheyComeEqualTheExportOfTheFinishedLog() throws Exception {
    Path live = folder.resolve("live.csv");
    Path exported = folder.resolve("exported.csv");
    try (BenchRecord record = BenchRecord.open(folder.resolve("captures"))) {
      for (int i = 0; i < 1005; i++) {
        record.keep(i % 100 == 7 ? Samples.gap("run-a", i) : Samples.row("run-a", i, ""));
        if (i % 50 == 0) {
          record.keep(Samples.row("run-b", i, ""));
        }
      }
      try (LogCsv csv = LogCsv.open(live)) {
        for (int i = 0; i < 600; i++) {
          csv.add(i % 100 == 7 ? Samples.gap("run-a", i) : Samples.row("run-a", i, ""));
        }
      }
      // Killed in the middle of a row, begun again.
      Files.writeString(live, "run-a,600,2026-", StandardOpenOption.APPEND);
      try (LogCsv csv = LogCsv.open(live)) {
        for (int i = 600; i < 1005; i++) {
          csv.add(i % 100 == 7 ? Samples.gap("run-a", i) : Samples.row("run-a", i, ""));
        }
      }
      LogCsv.export(record.view(), "run-a", exported);
    }
    assertArrayEquals(Files.readAllBytes(exported), Files.readAllBytes(live));
    List<String> lines = List.of(Files.readString(live).split("\r\n"));
    assertEquals(1006, lines.size());
    assertEquals(
        "run,number,due_utc,started_utc,larmor_frequency [Hz],u(larmor_frequency) [Hz],"
            + "field [T],u(field) [T],amplitude [V],u(amplitude) [V],linewidth [Hz],"
            + "u(linewidth) [Hz],t2_star [s],u(t2_star) [s],snr [1],u(snr) [1],"
            + "temperature [degC],retries,note,capture",
        lines.get(0));
    assertEquals(
        "run-a,1,2026-11-03T09:16:00.123456789Z,2026-11-03T09:16:00.126456789Z,"
            + "8089501.125,0.25,0.19,1.0E-8,1.25E-5,2.0E-8,35.5,0.5,0.009,1.0E-4,41.0,,"
            + "24.5,1,,",
        lines.get(2));
    assertTrue(
        lines.get(8).endsWith(",,,,,,,,,,,,,,0,\"link lost, \"\"again\"\" after 12 s\","),
        lines.get(8));
  }

  @Test
  void somebodyElsesFileIsLeftAlone() throws Exception {
    Path file = Files.writeString(folder.resolve("notes.csv"), "a,b\r\n1,2\r\n");
    assertThrows(KeepException.class, () -> LogCsv.open(file));
    assertEquals("a,b\r\n1,2\r\n", Files.readString(file));
    assertThrows(KeepException.class, () -> LogCsv.open(folder.resolve("no/such/file.csv")));
  }

  @Test
  void textFieldsAreOneLineAndNoFormula() {
    assertEquals("'=1+1", Csv.text("=1+1"));
    assertEquals("\"a, \"\"b\"\" c\"", Csv.text("a, \"b\"\nc"));
    assertEquals("", Csv.number(Double.NaN));
  }
}
