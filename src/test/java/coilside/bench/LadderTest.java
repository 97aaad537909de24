package coilside.bench;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.quantity.Measured;
import coilside.quantity.Unit;
import java.time.Duration;
import java.time.Instant;
import java.util.EnumMap;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalDouble;
import org.junit.jupiter.api.Test;

/** The rules by which findings go stale: design decisions of this project, no outside source. */
class LadderTest {
  private static final Instant START = Instant.parse("2026-03-02T08:00:00Z");
  private static final Conditions USUAL =
      new Conditions(
          "board", "digest", 8.09e6, 0.5, 30, "doped water", "coil", OptionalDouble.of(25));

  private final Ladder ladder = new Ladder();
  private int count;

  private Finding add(Rung rung, Duration at, Conditions conditions, Object... values) {
    Map<String, Measured> map = new LinkedHashMap<>();
    for (int i = 0; i < values.length; i += 3) {
      map.put(
          (String) values[i],
          Measured.of((Double) values[i + 1], 1e-4 * (Double) values[i + 1], (Unit) values[i + 2]));
    }
    Map<Rung, String> rested = new EnumMap<>(Rung.class);
    rung.restsOn().forEach(r -> ladder.newestGood(r).ifPresent(f -> rested.put(r, f.id())));
    Finding finding =
        new Finding(
            "id" + count++,
            rung,
            START.plus(at),
            1,
            4,
            map,
            List.of(),
            Optional.empty(),
            conditions,
            "",
            rested,
            false);
    ladder.add(finding);
    return finding;
  }

  private void refuse(Rung rung, Duration at) {
    ladder.add(
        new Finding(
            "id" + count++,
            rung,
            START.plus(at),
            1,
            4,
            Map.of(),
            List.of(),
            Optional.of(new Refusal("nothing seen", List.of("no sample"))),
            USUAL,
            "",
            Map.of(),
            false));
  }

  private void addNutation(Duration at, double pulse) {
    add(
        Rung.NUTATION,
        at,
        USUAL,
        "pulse_90",
        pulse,
        Unit.SECOND,
        "nutation_rate",
        0.25 / pulse,
        Unit.HERTZ);
  }

  private void addResonance(Duration at, double hertz) {
    add(Rung.RESONANCE, at, USUAL, "larmor_frequency", hertz, Unit.HERTZ);
  }

  private RungStatus state(Rung rung, Conditions now, Duration after) {
    return ladder.state(rung, now, START.plus(after));
  }

  @Test
  void nothingMeasuredIsMissing() {
    RungStatus s = state(Rung.T1, USUAL, Duration.ZERO);
    assertEquals(RungStatus.State.MISSING, s.state());
    assertEquals(1, s.reasons().size());
  }

  @Test
  void justMeasuredIsFresh() {
    addNutation(Duration.ZERO, 20e-6);
    RungStatus s = state(Rung.NUTATION, USUAL, Duration.ofMinutes(5));
    assertEquals(RungStatus.State.FRESH, s.state());
    assertEquals(List.of(), s.reasons());
  }

  @Test
  void anotherSampleMakesWhatDependsOnItStaleAndLeavesTheRest() {
    add(Rung.NOISE, Duration.ZERO, USUAL, "noise_density", 1e-9, Unit.VOLT_PER_ROOT_HERTZ);
    add(
        Rung.T1,
        Duration.ZERO,
        USUAL,
        "t1",
        0.12,
        Unit.SECOND,
        "repetition_time",
        0.6,
        Unit.SECOND);
    Conditions oil =
        new Conditions(
            "board", "digest", 8.09e6, 0.5, 30, "cooking oil", "coil", OptionalDouble.of(25));
    assertEquals(RungStatus.State.FRESH, state(Rung.NOISE, oil, Duration.ofMinutes(1)).state());
    RungStatus t1 = state(Rung.T1, oil, Duration.ofMinutes(1));
    assertEquals(RungStatus.State.STALE, t1.state());
    assertTrue(t1.reasons().get(0).contains("cooking oil"), t1.reasons().toString());
  }

  @Test
  void anotherAmplitudeMakesNutationStaleButNotT1() {
    addNutation(Duration.ZERO, 20e-6);
    add(
        Rung.T1,
        Duration.ZERO,
        USUAL,
        "t1",
        0.12,
        Unit.SECOND,
        "repetition_time",
        0.6,
        Unit.SECOND);
    Conditions weaker =
        new Conditions(
            "board", "digest", 8.09e6, 0.25, 30, "doped water", "coil", OptionalDouble.of(25));
    assertEquals(
        RungStatus.State.STALE, state(Rung.NUTATION, weaker, Duration.ofMinutes(1)).state());
    assertEquals(RungStatus.State.FRESH, state(Rung.T1, weaker, Duration.ofMinutes(1)).state());
  }

  @Test
  void warmthMovesRelaxationTimes() {
    add(
        Rung.T1,
        Duration.ZERO,
        USUAL,
        "t1",
        0.12,
        Unit.SECOND,
        "repetition_time",
        0.6,
        Unit.SECOND);
    Conditions warm =
        new Conditions(
            "board", "digest", 8.09e6, 0.5, 30, "doped water", "coil", OptionalDouble.of(28));
    assertEquals(RungStatus.State.STALE, state(Rung.T1, warm, Duration.ofMinutes(1)).state());
  }

  @Test
  void aResonanceThatMovedFurtherThanTheNutationRateAllowsMakesNutationStale() {
    addResonance(Duration.ZERO, 8.090e6);
    addNutation(Duration.ofMinutes(1), 20e-6);
    addResonance(Duration.ofMinutes(2), 8.0905e6);
    assertEquals(
        RungStatus.State.FRESH, state(Rung.NUTATION, USUAL, Duration.ofMinutes(3)).state());
    addResonance(Duration.ofMinutes(4), 8.0950e6);
    RungStatus s = state(Rung.NUTATION, USUAL, Duration.ofMinutes(5));
    assertEquals(RungStatus.State.STALE, s.state());
    assertTrue(s.reasons().get(0).contains("+5000 Hz"), s.reasons().toString());
  }

  @Test
  void aPulseThatMovedMakesRelaxationStale() {
    addNutation(Duration.ZERO, 20e-6);
    add(
        Rung.T1,
        Duration.ofMinutes(1),
        USUAL,
        "t1",
        0.12,
        Unit.SECOND,
        "repetition_time",
        0.6,
        Unit.SECOND);
    addNutation(Duration.ofMinutes(2), 20.2e-6);
    assertEquals(RungStatus.State.FRESH, state(Rung.T1, USUAL, Duration.ofMinutes(3)).state());
    addNutation(Duration.ofMinutes(4), 22e-6);
    assertEquals(RungStatus.State.STALE, state(Rung.T1, USUAL, Duration.ofMinutes(5)).state());
  }

  @Test
  void aRefusedRungShowsItsReasonAndUpsetsWhatRestsOnIt() {
    addResonance(Duration.ZERO, 8.090e6);
    addNutation(Duration.ofMinutes(1), 20e-6);
    refuse(Rung.RESONANCE, Duration.ofMinutes(2));
    RungStatus resonance = state(Rung.RESONANCE, USUAL, Duration.ofMinutes(3));
    assertEquals(RungStatus.State.REFUSED, resonance.state());
    assertEquals("nothing seen", resonance.reasons().get(0));
    assertEquals(
        RungStatus.State.STALE, state(Rung.NUTATION, USUAL, Duration.ofMinutes(3)).state());
  }

  @Test
  void withoutALearnedDriftTheResonanceIsTrustedForHalfAnHour() {
    addResonance(Duration.ZERO, 8.090e6);
    assertEquals(
        RungStatus.State.FRESH, state(Rung.RESONANCE, USUAL, Duration.ofMinutes(29)).state());
    assertEquals(
        RungStatus.State.STALE, state(Rung.RESONANCE, USUAL, Duration.ofMinutes(31)).state());
  }

  @Test
  void aLearnedDriftDecidesInsteadOfTheClock() {
    for (int i = 0; i < 5; i++) {
      ladder.add(
          new Finding(
              "r" + i,
              Rung.RESONANCE,
              START.plus(Duration.ofMinutes(10 * i)),
              1,
              2,
              Map.of("larmor_frequency", Measured.of(8.09e6 + 100 * i, 1, Unit.HERTZ)),
              List.of(),
              Optional.empty(),
              USUAL,
              "",
              Map.of(),
              false));
    }
    // 10 Hz a minute, newest after 40 min; without a nutation rate 1000 Hz are allowed: 100 min.
    assertEquals(
        RungStatus.State.FRESH, state(Rung.RESONANCE, USUAL, Duration.ofMinutes(40 + 95)).state());
    RungStatus s = state(Rung.RESONANCE, USUAL, Duration.ofMinutes(40 + 105));
    assertEquals(RungStatus.State.STALE, s.state());
    assertTrue(s.reasons().get(0).contains("5 findings"), s.reasons().toString());
  }

  @Test
  void aStraightLineIsLearnedWithItsUncertainty() {
    double[] noise = {0.3, -0.2, 0.1, -0.4, 0.2};
    for (int i = 0; i < 5; i++) {
      add(
          Rung.T2STAR,
          Duration.ofMinutes(i),
          USUAL,
          "t2_star",
          5e-3 + 1e-6 * (60 * i + noise[i]),
          Unit.SECOND);
    }
    Drift drift = Drift.learn(ladder.history(Rung.T2STAR), "t2_star").orElseThrow();
    assertEquals(1e-6, drift.perSecond(), 3 * drift.u());
    assertTrue(drift.u() > 0);
    assertEquals(5, drift.findings());
  }

  @Test
  void aSteadyDriftIsNotTrustedFarBeyondTheTimeItWasLearnedOver() {
    for (int i = 0; i < 4; i++) {
      add(Rung.T2STAR, Duration.ofMinutes(20 * i), USUAL, "t2_star", 6e-3, Unit.SECOND);
    }
    assertEquals(RungStatus.State.FRESH, state(Rung.T2STAR, USUAL, Duration.ofHours(3)).state());
    RungStatus s = state(Rung.T2STAR, USUAL, Duration.ofHours(6));
    assertEquals(RungStatus.State.STALE, s.state());
    assertTrue(s.reasons().get(0).contains("learned over no more than 60 min"), "" + s);
  }
}
