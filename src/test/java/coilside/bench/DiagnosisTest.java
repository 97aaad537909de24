package coilside.bench;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.simulated.Scenario;
import coilside.board.simulated.ScenarioReader;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Map;
import org.junit.jupiter.api.Test;

/** Each fault of the simulated bench is said as what it is, from what was measured, first. */
class DiagnosisTest {
  private static Scenario fault(String name) {
    return ScenarioReader.read(
            Path.of("src/test/resources/scenarios/faults").resolve(name + ".toml"))
        .scenario()
        .orElseThrow();
  }

  private static BenchTrial climbed(String fault) throws Exception {
    BenchTrial trial = BenchTrial.of(fault(fault), 5);
    trial.bench.ready();
    return trial;
  }

  private static Refusal refusal(BenchTrial trial, Rung rung) {
    List<Finding> all = trial.keeper.findings;
    Finding last = all.get(all.size() - 1);
    assertEquals(rung, last.rung(), "the climb stops at the rung that is refused");
    return last.refusal().orElseThrow();
  }

  private static void contains(String text, String part) {
    assertTrue(text.contains(part), () -> "'" + part + "' is not in: " + text);
  }

  @Test
  void aForgottenSample() throws Exception {
    try (BenchTrial trial = climbed("no-sample")) {
      Refusal refusal = refusal(trial, Rung.RESONANCE);
      contains(refusal.reason(), "no resonance within 7.900000-8.300000 MHz");
      contains(refusal.reason(), "false-alarm rate");
      contains(refusal.likelyCauses().get(0), "no sample");
      contains(refusal.likelyCauses().get(1), "outside the range");
    }
  }

  @Test
  void aDeadTransmitter() throws Exception {
    try (BenchTrial trial = climbed("dead-transmitter")) {
      Refusal refusal = refusal(trial, Rung.RESONANCE);
      contains(refusal.likelyCauses().get(0), "the pulse does not reach the coil");
      contains(refusal.likelyCauses().get(0), "no ring-down");
    }
  }

  @Test
  void aResonanceFarAway() throws Exception {
    try (BenchTrial trial = climbed("far-resonance")) {
      Refusal refusal = refusal(trial, Rung.RESONANCE);
      String causes = refusal.likelyCauses().toString();
      contains(causes, "outside the range");
      contains(causes, "search wider");
      contains(causes, "only 1H is looked for");
      assertFalse(causes.contains("does not reach the coil"), causes);
    }
  }

  @Test
  void exchangedReceiverChannels() throws Exception {
    try (BenchTrial trial = climbed("swapped-channels")) {
      Refusal refusal = refusal(trial, Rung.RESONANCE);
      contains(refusal.reason(), "the spectrum is mirrored");
      contains(refusal.likelyCauses().get(0), "'layout'");
      contains(refusal.likelyCauses().get(0), "'conjugated'");
      double said =
          Double.parseDouble(refusal.reason().replaceAll(".*at about ([0-9.]+) MHz.*", "$1"));
      assertEquals(trial.observed.truth().larmorHertz(), said * 1e6, 500);
    }
  }

  @Test
  void aCoilOffTune() throws Exception {
    try (BenchTrial trial = climbed("coil-off-tune")) {
      String first = trial.newest(Rung.RINGDOWN).warnings().get(0);
      contains(first, "the coil is off tune");
      contains(first, "8.155 MHz");
      assertTrue(Math.abs(trial.deviation(Rung.NUTATION, "pulse_90")) < 4);
    }
  }

  @Test
  void anAmplifierThatClipsBeforeTheDigitiser() throws Exception {
    try (BenchTrial trial = climbed("clipping-receiver")) {
      contains(
          trial.newest(Rung.GAIN).warnings().get(0), "the receiver clips before the digitiser");
      contains(trial.newest(Rung.RINGDOWN).warnings().toString(), "the receiver clips for");
      for (Rung rung : List.of(Rung.RINGDOWN, Rung.T1, Rung.T2STAR)) {
        String value =
            Map.of(Rung.RINGDOWN, "ring_down_time", Rung.T1, "t1", Rung.T2STAR, "t2_star")
                .get(rung);
        double z = trial.deviation(rung, value);
        assertTrue(Math.abs(z) < 4, () -> rung + " is " + z + " u off");
      }
    }
  }

  @Test
  void mainsHumInTheField() throws Exception {
    try (BenchTrial trial = climbed("mains-modulated-magnet")) {
      String first = trial.newest(Rung.RESONANCE).warnings().get(0);
      contains(first, "the line moves from scan to scan");
      contains(first, "mains");
      assertTrue(Math.abs(trial.deviation(Rung.RESONANCE, "larmor_frequency")) < 4);
    }
  }

  @Test
  void strongMainsHumIsNamedByT1() throws Exception {
    String text =
        Files.readString(Path.of("src/test/resources/scenarios/faults/mains-modulated-magnet.toml"))
            .replace("mains_swing = \"30Hz\"", "mains_swing = \"100Hz\"");
    Scenario scenario =
        ScenarioReader.read("strong", text.getBytes(StandardCharsets.UTF_8))
            .scenario()
            .orElseThrow();
    try (BenchTrial trial = BenchTrial.of(scenario, 5)) {
      trial.bench.ready();
      Finding t1 = trial.newest(Rung.T1);
      String said = t1.refusal().map(r -> r.likelyCauses().get(0)).orElse(t1.warnings().toString());
      contains(said, "the line moves from scan to scan");
      contains(said, "mains hum");
    }
  }

  /** A rest that the operator told too short is found out by measuring T1 alone, too. */
  @Test
  void t1AloneChecksTheRestsOfNutation() throws Exception {
    try (BenchTrial trial =
        BenchTrial.told(ScenarioReader.named("doped-water"), "scpi-console", 0.05, 5)) {
      trial.bench.measure(Rung.NUTATION);
      assertTrue(trial.newest(Rung.NUTATION).value("rest").value() < 0.3);
      assertFalse(trial.bench.measure(Rung.T1).refused());
      contains(trial.messages.toString(), "it is measured again");
      assertTrue(trial.newest(Rung.NUTATION).value("rest").value() > 4 * 0.115);
    }
  }

  @Test
  void aLongT1IsWaitedFor() throws Exception {
    try (BenchTrial trial = climbed("long-t1")) {
      Finding t1 = trial.newest(Rung.T1);
      assertEquals(3, t1.value("t1").value(), 0.05 * 3);
      double rest = trial.capture(trial.newest(Rung.NUTATION)).scans().get(3).restSeconds();
      assertTrue(rest >= 4 * 2.9, "the nutation rested for " + rest + " s");
      assertTrue(Math.abs(trial.deviation(Rung.NUTATION, "pulse_90")) < 4);
    }
  }

  @Test
  void aQuietBenchGetsNoneOfTheseWarnings() throws Exception {
    try (BenchTrial trial = BenchTrial.of(ScenarioReader.named("doped-water"), 5)) {
      assertTrue(trial.bench.ready().ready());
      String all =
          trial.keeper.findings.stream().flatMap(f -> f.warnings().stream()).toList().toString();
      for (String no : List.of("off tune", "moves from scan", "before the digitiser", "mirrored")) {
        assertFalse(all.contains(no), all);
      }
    }
  }
}
