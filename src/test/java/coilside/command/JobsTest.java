package coilside.command;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import com.google.gson.JsonElement;
import com.google.gson.JsonObject;
import com.google.gson.JsonParser;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.stream.Stream;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** The jobs of the command line on the simulated bench, one after the other on one record. */
class JobsTest {
  @TempDir static Path captures;
  private static JsonObject ready;

  private static CommandRun run(String... args) {
    String[] all = new String[args.length + 2];
    System.arraycopy(args, 0, all, 0, args.length);
    all[args.length] = "--captures";
    all[args.length + 1] = captures.toString();
    return CommandRun.of(all);
  }

  private static JsonObject json(CommandRun run) {
    assertEquals(0, run.status(), run.err());
    return JsonParser.parseString(run.out()).getAsJsonObject();
  }

  @BeforeAll
  static void climb() {
    ready = json(run("ready", "--json", "--sample", "doped water"));
  }

  private static JsonObject rung(String id) {
    for (JsonElement e : ready.getAsJsonArray("rungs")) {
      if (e.getAsJsonObject().get("rung").getAsString().equals(id)) {
        return e.getAsJsonObject();
      }
    }
    throw new AssertionError(id + " is not in " + ready);
  }

  /** The value names of the contract, with their units. */
  @Test
  void readyPrintsEveryRungWithTheValuesOfTheContract() {
    assertTrue(ready.get("ready").getAsBoolean());
    for (String line :
        List.of(
            "noise noise_density V/Hz^0.5",
            "noise dc_offset V",
            "resonance larmor_frequency Hz",
            "resonance field T",
            "resonance snr 1",
            "gain receiver_gain dB",
            "gain peak_fraction 1",
            "ringdown ring_down_time s",
            "ringdown receive_delay s",
            "nutation pulse_90 s",
            "nutation pulse_180 s",
            "nutation nutation_rate Hz",
            "nutation b1 T",
            "nutation b1_spread 1",
            "t1 t1 s",
            "t1 repetition_time s",
            "t2star t2_star s",
            "t2star linewidth Hz",
            "t2star amplitude V",
            "t2star snr 1",
            "t2star larmor_frequency Hz",
            "t2star field_spread 1",
            "t2 t2 s",
            "t2 echo_spacing s")) {
      String[] w = line.split(" ");
      JsonObject finding = rung(w[0]);
      assertEquals("fresh", finding.get("state").getAsString(), finding.toString());
      JsonObject value = finding.getAsJsonObject("values").getAsJsonObject(w[1]);
      assertEquals(w[2], value.get("unit").getAsString(), line);
      assertTrue(Double.isFinite(value.get("value").getAsDouble()), line);
    }
  }

  @Test
  void showGetsTheSameNumbersAgain() {
    for (String id : List.of("noise", "resonance", "gain", "ringdown", "nutation", "t1", "t2")) {
      JsonObject finding = rung(id);
      JsonObject shown = json(run("show", finding.get("capture").getAsString(), "--json"));
      assertEquals(finding.get("values"), shown.get("values"), id);
    }
  }

  @Test
  void theLadderIsRememberedWithoutABoard() {
    JsonObject ladder = json(run("ladder", "--json"));
    assertTrue(ladder.get("ready").getAsBoolean(), ladder.toString());
  }

  @Test
  void anotherSampleMakesTheLadderStaleWithAReason() {
    CommandRun run = run("ladder", "--sample", "cooking oil");
    assertEquals(0, run.status(), run.err());
    assertTrue(run.out().contains("stale"), run.out());
    assertTrue(run.out().contains("the sample was 'doped water'"), run.out());
  }

  @Test
  void theCapturesAreWhatTheFolderHolds() throws IOException {
    try (Stream<Path> files = Files.list(captures)) {
      List<String> names = files.map(f -> f.getFileName().toString()).toList();
      for (String id : List.of("noise", "t2star", "t2")) {
        String capture = rung(id).get("capture").getAsString();
        assertTrue(names.contains(capture + ".sigmf-meta"), capture);
        assertTrue(names.contains(capture + ".sigmf-data"), capture);
      }
    }
  }

  @Test
  void anFidIsTakenKeptAndExportedInEveryFormat() throws IOException {
    JsonObject fid = json(run("fid", "--scans", "4", "--json"));
    String capture = fid.get("capture").getAsString();
    for (String format : List.of("jcamp", "csv", "npy", "wav")) {
      CommandRun run = run("export", capture, "--as", format);
      assertEquals(0, run.status(), run.err());
      Path file = Path.of(run.out().strip());
      assertTrue(Files.size(file) > 1000, run.out());
      assertTrue(file.getFileName().toString().startsWith(capture + "."), run.out());
      assertEquals(5, run("export", capture, "--as", format).status(), "overwrote " + file);
    }
  }

  @Test
  void aReportIsOnePageWithoutAddresses() throws IOException {
    CommandRun run = run("report");
    assertEquals(0, run.status(), run.err());
    String page = Files.readString(Path.of(run.out().strip()));
    assertTrue(page.contains("nutation") && page.contains("<svg"), "no pictures in the page");
    assertTrue(!page.contains("src=\"http") && !page.contains("href=\"http"), "it needs a network");
  }

  @Test
  void aLogKeepsItsRows() throws IOException {
    Path csv = captures.resolve("rows.csv");
    CommandRun run =
        run("log", "--every", "300ms", "--count", "3", "--scans", "1", "--csv", csv.toString());
    assertEquals(0, run.status(), run.err());
    List<String> lines = Files.readAllLines(csv);
    assertTrue(lines.size() >= 2, lines.toString());
    assertTrue(lines.get(0).contains("larmor_frequency [Hz]"), lines.get(0));
  }

  @Test
  void aShotOverALimitIsStoppedWithValueLimitAndUnit() {
    CommandRun run = run("fid", "--points", "10000000");
    assertEquals(4, run.status(), run.err());
    assertTrue(run.err().contains("10000000") && run.err().contains("65536"), run.err());
  }
}
