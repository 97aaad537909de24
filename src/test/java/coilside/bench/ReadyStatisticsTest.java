package coilside.bench;

import static org.junit.jupiter.api.Assertions.assertAll;
import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.simulated.ScenarioReader;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.function.Executable;

/**
 * What {@code ready} says against what the simulated bench is, over many seeds of its noise,
 * through driver and firmware. The truth is the scenario's at the time of the scans (the field
 * drifts).
 *
 * <p>Validation: the reference is the scenario; the tolerance is each value's own uncertainty. The
 * statistic (value - truth)/u must stay below 4 and its mean square near 1.
 */
class ReadyStatisticsTest {
  private static final int MOST_SCANS = 80;
  private static final double MOST_DEVIATIONS = 4;

  private record Headline(Rung rung, String value) {
    @Override
    public String toString() {
      return rung.id() + " " + value;
    }
  }

  private static final List<Headline> HEADLINES =
      List.of(
          new Headline(Rung.NOISE, "noise_density"),
          new Headline(Rung.RESONANCE, "larmor_frequency"),
          new Headline(Rung.RINGDOWN, "ring_down_time"),
          new Headline(Rung.NUTATION, "pulse_90"),
          new Headline(Rung.T1, "t1"),
          new Headline(Rung.T2STAR, "t2_star"),
          new Headline(Rung.T2STAR, "larmor_frequency"),
          new Headline(Rung.T2, "t2"));

  /** (value - truth)/u of every headline value for these seeds; the climb itself is checked too. */
  private static Map<Headline, List<Double>> deviations(String scenario, int from, int to)
      throws Exception {
    Map<Headline, List<Double>> out = new LinkedHashMap<>();
    HEADLINES.forEach(h -> out.put(h, new ArrayList<>()));
    for (int seed = from; seed <= to; seed++) {
      try (BenchTrial trial = BenchTrial.of(ScenarioReader.named(scenario), seed)) {
        Climb climb = trial.bench.ready();
        int s = seed;
        assertTrue(climb.ready(), () -> "seed " + s + ": " + climb.ladder());
        assertTrue(
            trial.scans() <= MOST_SCANS, () -> "seed " + s + " took " + trial.scans() + " scans");
        for (Headline h : HEADLINES) {
          double z = trial.deviation(h.rung(), h.value());
          assertTrue(
              Math.abs(z) < MOST_DEVIATIONS,
              () -> String.format("seed %d: %s is %.2f u off", s, h, z));
          out.get(h).add(z);
        }
      }
    }
    return out;
  }

  private static double meanSquare(List<Double> z) {
    return z.stream().mapToDouble(x -> x * x).average().orElseThrow();
  }

  @Test
  void everyValueLiesWithinFourOfItsUncertainties() throws Exception {
    Map<Headline, List<Double>> z = deviations("doped-water", 1, 6);
    assertEquals(HEADLINES.size(), z.size());
  }

  @Test
  void targetsOfPulseAndRelaxationTimesAreMet() throws Exception {
    try (BenchTrial trial = BenchTrial.of(ScenarioReader.named("doped-water"), 11)) {
      assertTrue(trial.bench.ready().ready());
      assertEquals(
          trial.truth(Rung.NUTATION, "pulse_90"),
          trial.newest(Rung.NUTATION).value("pulse_90").value(),
          0.01 * trial.truth(Rung.NUTATION, "pulse_90"));
      assertEquals(0.12, trial.newest(Rung.T1).value("t1").value(), 0.05 * 0.12);
      assertEquals(
          trial.truth(Rung.T2STAR, "t2_star"),
          trial.newest(Rung.T2STAR).value("t2_star").value(),
          0.02 * 0.006);
    }
  }

  /** Two components: what is given is the 1/e time, and the sample's two T1 and T2 are said. */
  @Test
  void anOilIsSaidToHoldTwoComponents() throws Exception {
    try (BenchTrial trial = BenchTrial.of(ScenarioReader.named("cooking-oil"), 2)) {
      assertTrue(trial.bench.ready().ready());
      Finding t1 = trial.newest(Rung.T1);
      assertTrue(t1.warnings().get(0).contains("two T1"), t1.warnings().toString());
      assertTrue(Math.abs(trial.deviation(Rung.T1, "t1")) < 4);
      Finding t2 = trial.newest(Rung.T2);
      assertTrue(t2.warnings().get(0).contains("two decays"), t2.warnings().toString());
      assertEquals(
          trial.truth(Rung.T1, "t1"), t1.value("t1").value(), 0.05 * trial.truth(Rung.T1, "t1"));
      assertEquals(
          trial.truth(Rung.T2STAR, "t2_star"),
          trial.newest(Rung.T2STAR).value("t2_star").value(),
          0.02 * trial.truth(Rung.T2STAR, "t2_star"));
    }
  }

  /** The guess of T1 is long enough, so that nutation need not be measured twice. */
  @Test
  void nutationIsMeasuredOnce() throws Exception {
    for (String scenario : List.of("doped-water", "cooking-oil", "plain-water")) {
      for (int seed = 1; seed <= 3; seed++) {
        try (BenchTrial trial = BenchTrial.of(ScenarioReader.named(scenario), seed)) {
          trial.bench.ready();
          assertEquals(
              1,
              trial.keeper.findings.stream().filter(f -> f.rung() == Rung.NUTATION).count(),
              () -> scenario + ": " + trial.messages);
          double rest = trial.newest(Rung.NUTATION).value("rest").value();
          double longest = trial.newest(Rung.T1).value("repetition_time").value();
          assertTrue(rest < 2 * longest, () -> scenario + " rests for " + rest + " s");
        }
      }
    }
  }

  /** Two components that one exponential may happen to fit do not pass for certainty. */
  @Test
  void anOilsDecayAdmitsWhatItMayHide() throws Exception {
    for (int seed : new int[] {2, 9, 10, 16}) {
      try (BenchTrial trial = BenchTrial.of(ScenarioReader.named("cooking-oil"), seed)) {
        trial.bench.ready();
        for (String value : List.of("t2_star", "larmor_frequency")) {
          double z = trial.deviation(Rung.T2STAR, value);
          assertTrue(Math.abs(z) < 3, () -> value + " is " + z + " u off");
        }
      }
    }
  }

  @Test
  @Tag("validation")
  void uncertaintiesAreNeitherTooProudNorTooTimid() throws Exception {
    Map<Headline, List<Double>> z = deviations("doped-water", 1, 600);
    List<Executable> checks = new ArrayList<>();
    z.forEach(
        (headline, all) ->
            checks.add(
                () -> {
                  double square = meanSquare(all);
                  assertTrue(
                      square >= 0.9 && square <= 1.15,
                      () -> headline + ": mean square of (value - truth)/u is " + square);
                }));
    assertAll(checks);
  }
}
