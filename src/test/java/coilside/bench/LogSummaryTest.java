package coilside.bench;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.quantity.Measured;
import coilside.quantity.Unit;
import java.time.Duration;
import java.time.Instant;
import java.util.Map;
import java.util.OptionalDouble;
import java.util.Random;
import org.junit.jupiter.api.Test;

/** What a log says as a whole. */
class LogSummaryTest {
  private static final Instant START = Instant.parse("2026-03-02T08:00:00Z");

  private final LogSummary.Builder builder = new LogSummary.Builder();

  private void add(long slot, double everySeconds, double hertz, double u, double celsius) {
    Instant due = START.plus(Duration.ofNanos(Math.round(1e9 * slot * everySeconds)));
    builder.add(
        new LogRow(
            "log-a",
            slot,
            due,
            due,
            Map.of("larmor_frequency", Measured.of(hertz, u, Unit.HERTZ)),
            Double.isNaN(celsius) ? OptionalDouble.empty() : OptionalDouble.of(celsius),
            1,
            "",
            ""));
  }

  private void gap(long slot) {
    Instant due = START.plusSeconds(slot);
    builder.add(
        new LogRow("log-a", slot, due, due, Map.of(), OptionalDouble.empty(), 0, "link lost", ""));
  }

  private static double at(LogSummary summary, double seconds) {
    return summary.wander().stream()
        .filter(w -> Math.abs(w.averagingSeconds() / seconds - 1) < 1e-9)
        .findFirst()
        .orElseThrow()
        .deviation();
  }

  /** Validation: NIST SP 1065 (Riley, 2008), table 30, nine frequency values. */
  @Test
  void theAllanDeviationIsThePublishedOneOfNineValues() {
    double[] values = {892, 809, 823, 798, 671, 644, 883, 903, 677};
    for (int i = 0; i < values.length; i++) {
      add(i, 1, 1e9 + values[i], 1, Double.NaN);
    }
    LogSummary summary = builder.build();
    double mean = 1e9 + 788.888888889;
    assertEquals(91.22945, at(summary, 1) * mean, 1e-4);
    assertEquals(85.95287, at(summary, 2) * mean, 1e-4);
    assertEquals(9, summary.rows());
    assertEquals(9, summary.retries());
  }

  /** Validation: NIST SP 1065, table 31, a thousand values of a published generator. */
  @Test
  void theAllanDeviationIsThePublishedOneOfAThousandValues() {
    long n = 1234567890L;
    for (int i = 0; i < 1000; i++) {
      add(i, 10, 1e6 + n / 2147483647.0, 1, Double.NaN);
      n = 16807 * n % 2147483647L;
    }
    assertEquals(2.922319e-1, at(builder.build(), 10) * (1e6 + 0.4897745), 3e-7);
  }

  @Test
  void theAllanDeviationStandsOnTheLongestStretchWithoutAGap() {
    double[] values = {892, 809, 823, 798, 671, 644, 883, 903, 677};
    add(0, 1, 2e9, 1, Double.NaN);
    gap(1);
    for (int i = 0; i < values.length; i++) {
      add(2 + i, 1, 1e9 + values[i], 1, Double.NaN);
    }
    gap(11);
    add(12, 1, 3e9, 1, Double.NaN);
    LogSummary summary = builder.build();
    assertEquals(91.22945, at(summary, 1) * (1e9 + 788.888888889), 1e-3);
    assertEquals(2, summary.gaps());
    assertTrue(summary.notes().stream().anyMatch(s -> s.contains("the 9 rows")), "" + summary);
  }

  /** The slope is known; the standard uncertainty covers it (validation by construction). */
  @Test
  void driftAndItsUncertaintyAreRight() {
    int within = 0;
    for (int trial = 0; trial < 200; trial++) {
      LogSummary.Builder one = new LogSummary.Builder();
      Random random = new Random(trial);
      for (int i = 0; i < 60; i++) {
        Instant due = START.plusSeconds(60L * i);
        double hertz = 8.09e6 - 5e-3 * 60 * i + 0.5 * random.nextGaussian();
        one.add(
            new LogRow(
                "log-a",
                i,
                due,
                due,
                Map.of("larmor_frequency", Measured.of(hertz, 0.5, Unit.HERTZ)),
                OptionalDouble.empty(),
                0,
                "",
                ""));
      }
      LogSummary.Slope drift = one.build().driftPpmPerHour().orElseThrow();
      double truth = -5e-3 * 3600e6 / (8.09e6 - 5e-3 * 60 * 29.5);
      within += Math.abs(drift.value() - truth) < drift.u() ? 1 : 0;
    }
    // 68 % of 200 with a binomial spread of 3.3 %: within 3 of it.
    assertTrue(within > 116 && within < 157, within + " of 200 within one u");
  }

  /** A magnet that wanders by itself: neighbours go together with a correlation of 0.8. */
  @Test
  void theUncertaintyOfTheDriftCoversAWanderingMagnet() {
    int within = 0;
    for (int trial = 0; trial < 200; trial++) {
      LogSummary.Builder one = new LogSummary.Builder();
      Random random = new Random(trial);
      double wander = 5 * random.nextGaussian();
      for (int i = 0; i < 400; i++) {
        wander = 0.8 * wander + 3 * random.nextGaussian();
        Instant due = START.plusSeconds(60L * i);
        one.add(
            new LogRow(
                "log-a",
                i,
                due,
                due,
                Map.of("larmor_frequency", Measured.of(8.09e6 + wander, 0.1, Unit.HERTZ)),
                OptionalDouble.empty(),
                0,
                "",
                ""));
      }
      LogSummary summary = one.build();
      LogSummary.Slope drift = summary.driftPpmPerHour().orElseThrow();
      within += Math.abs(drift.value()) < drift.u() ? 1 : 0;
      assertTrue(summary.notes().stream().anyMatch(n -> n.contains("wanders")));
    }
    // Without the widening it would be 26 %; 68 % of 200 is 136, three binomial spreads are 20.
    assertTrue(within > 112 && within < 157, within + " of 200 within one u");
  }

  @Test
  void theTemperatureCoefficientIsThatOfTheMagnet() {
    Random random = new Random(1);
    for (int i = 0; i < 200; i++) {
      double celsius = 25 + 0.5 * Math.sin(i * 2 * Math.PI / 40);
      // 1000 ppm/K, as of the usual sintered neodymium magnets.
      double hertz = 8.09e6 * (1 - 1e-3 * (celsius - 25)) + random.nextGaussian();
      add(i, 60, hertz, 1, celsius);
    }
    LogSummary summary = builder.build();
    LogSummary.Slope c = summary.coefficientPpmPerKelvin().orElseThrow();
    assertEquals(-1000, c.value(), 4 * c.u() + 0.02);
    assertTrue(c.u() < 0.1, "u " + c.u());
    assertEquals(24.5, summary.temperatureLowCelsius().getAsDouble(), 0.01);
    assertEquals(25.5, summary.temperatureHighCelsius().getAsDouble(), 0.01);
  }

  @Test
  void timeAndTemperatureThatGoTogetherAreNotToldApart() {
    for (int i = 0; i < 30; i++) {
      add(i, 60, 8.09e6 - i, 1, 25 + 0.1 * i);
    }
    assertTrue(builder.build().notes().stream().anyMatch(s -> s.contains("cannot be told apart")));
  }

  @Test
  void aSteadyTemperatureGivesNoCoefficient() {
    for (int i = 0; i < 30; i++) {
      add(i, 60, 8.09e6 - i, 1, 25 + 0.001 * (i % 2));
    }
    LogSummary summary = builder.build();
    assertTrue(summary.coefficientPpmPerKelvin().isEmpty());
    assertTrue(summary.notes().stream().anyMatch(s -> s.contains("no temperature coefficient")));
  }

  @Test
  void aStepOfTheComputersClockDoesNotBendTheDrift() {
    for (int i = 0; i < 30; i++) {
      Instant due = START.plusSeconds(60L * i - (i < 7 ? 0 : 3600));
      builder.add(
          new LogRow(
              "log-a",
              i,
              due,
              due,
              Map.of("larmor_frequency", Measured.of(8.09e6 - i, 0.01, Unit.HERTZ)),
              OptionalDouble.empty(),
              0,
              "",
              ""));
    }
    LogSummary summary = builder.build();
    assertEquals(29 * 60, summary.seconds(), 1e-6);
    assertEquals(-60 / 8.09, summary.driftPpmPerHour().orElseThrow().value(), 1e-4);
  }

  @Test
  void tooFewRowsSaySo() {
    add(0, 60, 8.09e6, 1, 25);
    LogSummary summary = builder.build();
    assertTrue(summary.driftPpmPerHour().isEmpty());
    assertTrue(summary.wander().isEmpty());
    assertEquals(3, summary.notes().size(), summary.notes().toString());
    assertEquals(0, new LogSummary.Builder().build().rows());
  }
}
