package coilside.bench;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.simulated.ScenarioReader;
import coilside.quantity.Measured;
import org.junit.jupiter.api.Test;

/** Boards that can do less get other methods, and the same answers. Reference: the scenario. */
class FewerAbilitiesTest {
  @Test
  void oneReceiveWindowStillGivesT2BySingleEchoes() throws Exception {
    try (BenchTrial trial =
        BenchTrial.of(
            ScenarioReader.named("doped-water"),
            "scpi-console",
            "windows = 4096",
            "windows = 1",
            3)) {
      assertTrue(trial.bench.ready().ready());
      Finding t2 = trial.newest(Rung.T2);
      assertTrue(t2.warnings().toString().contains("single echoes"), t2.warnings().toString());
      Measured m = t2.value("t2");
      assertEquals(0.11, m.value(), 0.02 * 0.11);
      assertTrue(Math.abs(trial.deviation(Rung.T2, "t2")) < 4, m.toString());
    }
  }

  @Test
  void aBoardThatOnlyPulsesAndReceivesGivesT1BySaturationRecovery() throws Exception {
    try (BenchTrial trial =
        BenchTrial.of(ScenarioReader.named("doped-water"), "pulse-and-receive", 3)) {
      trial.bench.ready();
      Finding t1 = trial.newest(Rung.T1);
      assertTrue(t1.refusal().isEmpty(), () -> t1.refusal().toString());
      assertEquals(0.12, t1.value("t1").value(), 0.05 * 0.12);
    }
  }

  /** A guess far too long asks for recovery times shorter than the board can play. */
  @Test
  void saturationRecoveryFindsT1FromAnyGuess() throws Exception {
    for (double guess : new double[] {0.05, 1, 20}) {
      try (BenchTrial trial =
          BenchTrial.told(ScenarioReader.named("doped-water"), "pulse-and-receive", guess, 1)) {
        trial.bench.ready();
        Finding t1 = trial.newest(Rung.T1);
        assertTrue(t1.refusal().isEmpty(), () -> t1.refusal().toString());
        assertTrue(Math.abs(trial.deviation(Rung.T1, "t1")) < 4, t1.value("t1").toString());
        assertTrue(t1.scans() <= 40, () -> t1.scans() + " scans");
      }
    }
  }
}
