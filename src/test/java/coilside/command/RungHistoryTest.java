package coilside.command;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.bench.Finding;
import coilside.bench.Rung;
import coilside.quantity.Measured;
import coilside.quantity.Unit;
import coilside.record.BenchRecord;
import com.google.gson.JsonObject;
import com.google.gson.JsonParser;
import java.nio.file.Path;
import java.time.Clock;
import java.time.Duration;
import java.util.LinkedHashMap;
import java.util.Map;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** A rung through time, and the drift learned from it. */
class RungHistoryTest {
  @TempDir Path folder;

  private CommandRun history(String rung, String... more) {
    String[] all = new String[more.length + 6];
    String[] first = {
      "ladder", "--history", rung, "--captures", folder.resolve("captures").toString(), "--plain"
    };
    System.arraycopy(first, 0, all, 0, 6);
    System.arraycopy(more, 0, all, 6, more.length);
    return CommandRun.of(all);
  }

  /** Three more resonances, ten minutes apart, each 50 Hz further. */
  private void drift() throws Exception {
    Path captures = LogProcess.climbed(folder.resolve("captures"));
    try (BenchRecord record = BenchRecord.open(captures, Clock.systemUTC())) {
      Finding last = record.newest(Rung.RESONANCE).orElseThrow();
      for (int i = 1; i <= 3; i++) {
        Map<String, Measured> values = new LinkedHashMap<>(last.values());
        values.put(
            "larmor_frequency",
            Measured.of(last.value("larmor_frequency").value() + 50 * i, 0.05, Unit.HERTZ));
        record.keep(
            new Finding(
                last.id() + i,
                last.rung(),
                last.started().plus(Duration.ofMinutes(10L * i)),
                1,
                4,
                values,
                last.warnings(),
                last.refusal(),
                last.conditions(),
                last.capture(),
                last.restedOn(),
                last.simulated()));
      }
    }
  }

  @Test
  void theDriftIsLearnedAndSaysHowLongAFindingIsTrusted() throws Exception {
    drift();
    CommandRun run = history("resonance");
    assertEquals(0, run.status(), run.err());
    assertEquals(4, run.out().lines().filter(l -> l.contains("sample '")).count(), run.out());
    assertTrue(run.out().contains("larmor frequency since the one before: 50."), run.out());
    assertTrue(
        run.out().contains("drift learned from 4 findings: larmor frequency 300."), run.out());

    JsonObject drift =
        JsonParser.parseString(history("resonance", "--json").out())
            .getAsJsonObject()
            .getAsJsonObject("drift");
    assertEquals(50.0 / 600, drift.get("value").getAsDouble(), 1e-3);
    assertEquals("Hz/s", drift.get("unit").getAsString());
    // A tenth of the nutation rate of some 6.2 kHz, at 1/12 Hz/s, would last 7500 s: about the
    // four spans of half an hour that a straight line is trusted for at most.
    double trusted = drift.get("trusted_seconds").getAsDouble();
    assertTrue(trusted > 6000 && trusted <= 7200, trusted + " s");
  }

  @Test
  void aRungMeasuredOnceHasNoDriftAndOneThatNeverWasHasNothing() throws Exception {
    LogProcess.climbed(folder.resolve("captures"));
    assertTrue(history("t1").out().contains("no drift learned"), history("t1").out());
    Path empty = folder.resolve("empty");
    CommandRun none = CommandRun.of("ladder", "--history", "t1", "--captures", empty.toString());
    assertTrue(none.out().contains("nothing was measured yet"), none.out());
  }
}
