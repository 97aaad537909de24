package coilside.bench;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.BoardException;
import java.time.Duration;
import java.time.Instant;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.TreeSet;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import org.junit.jupiter.api.Test;

/** Logs on a board that takes no time: the schedule, the gaps, the rules, the lost resonance. */
class LogRunTest {
  private static final Pattern MISSED =
      Pattern.compile("slots? missed \\((\\d+)(?: to (\\d+))?\\)");

  private final LogBoard board = new LogBoard();
  private final MemoryKeeper keeper = new MemoryKeeper();
  private final List<Progress> told = new ArrayList<>();

  private Bench bench() throws KeepException {
    return new Bench(board, keeper, LogBoard.settings(), board, board, told::add);
  }

  private LogEnd run(double everySeconds, long count, LogRule... rules) throws Exception {
    return run(plan(everySeconds, count, false, rules));
  }

  private static Work.Log plan(double everySeconds, long count, boolean follow, LogRule... rules) {
    return new Work.Log(
        Duration.ofNanos(Math.round(1e9 * everySeconds)),
        count,
        Optional.empty(),
        4,
        follow,
        true,
        List.of(rules));
  }

  private LogEnd run(Work.Log plan) throws Exception {
    if (keeper.findings.isEmpty()) {
      LogBoard.climb(keeper);
    }
    return bench().log(plan);
  }

  private List<LogRow> gaps() {
    return keeper.rows.stream().filter(r -> r.values().isEmpty()).toList();
  }

  /** Every slot of the schedule stands in a row or in a gap, none twice. */
  private void assertEverySlotIsToldOnce(long count) {
    TreeSet<Long> slots = new TreeSet<>();
    long last = -1;
    for (LogRow row : keeper.rows) {
      assertTrue(row.number() > last, "row numbers rise");
      last = row.number();
      Matcher m = MISSED.matcher(row.note());
      long to = row.number();
      if (row.values().isEmpty() && m.find()) {
        assertEquals(row.number(), Long.parseLong(m.group(1)));
        to = m.group(2) == null ? to : Long.parseLong(m.group(2));
      }
      for (long s = row.number(); s <= to; s++) {
        assertTrue(slots.add(s), "slot " + s + " is told twice");
      }
    }
    assertEquals(count, slots.size(), slots.toString());
  }

  @Test
  void theScheduleDoesNotDrift() throws Exception {
    LogEnd end = run(2, 50);
    assertEquals(LogEnd.Why.PLANNED, end.why());
    assertEquals(50, end.rows());
    assertEquals(0, end.gaps());
    for (LogRow row : keeper.rows) {
      Instant due = LogBoard.START.plusSeconds(2 * row.number());
      assertEquals(due, row.due());
      assertEquals(due, row.started());
      assertEquals(25, row.temperatureCelsius().getAsDouble());
    }
    assertEverySlotIsToldOnce(50);
  }

  @Test
  void theValuesAreThoseOfTheBoardWithinTheirUncertainties() throws Exception {
    run(2, 40);
    double chi = 0;
    for (LogRow row : keeper.rows) {
      var f = row.values().get("larmor_frequency");
      chi += Math.pow((f.value() - 8.09e6) / f.u(), 2) / 40;
    }
    // Chi-square of 40 degrees: 0.5 to 1.7 is within 3 sigma.
    assertTrue(chi > 0.4 && chi < 1.8, "squared deviation over u^2: " + chi);
  }

  @Test
  void slotsThatTheRowsOverrunAreMissedAndToldAsOneGap() throws Exception {
    LogEnd end = run(0.1, 40);
    assertEquals(LogEnd.Why.PLANNED, end.why());
    assertTrue(end.rows() >= 8 && end.rows() <= 10, end.rows() + " rows of 0.4 s in 4 s");
    assertTrue(end.gaps() <= end.rows(), "one gap row for all that one row made late");
    assertEverySlotIsToldOnce(40);
    for (LogRow row : keeper.rows) {
      if (!row.values().isEmpty()) {
        Duration late = Duration.between(row.due(), row.started());
        assertTrue(late.toMillis() <= 50, "late by " + late);
      }
    }
  }

  @Test
  void aClockThatStepsBackHoldsNothingUp() throws Exception {
    board.afterShot = () -> board.skew = board.shots >= 40 ? Duration.ofHours(-1) : Duration.ZERO;
    LogEnd end = run(2, 30);
    assertEquals(30, end.rows());
    assertEquals(60, board.seconds(), 3);
    assertTrue(
        keeper.notes.stream().anyMatch(n -> n.contains("stepped by -3600.0 s")),
        keeper.notes.toString());
    LogRow last = keeper.rows.get(29);
    assertEquals(last.started(), last.due());
    assertEverySlotIsToldOnce(30);
  }

  @Test
  void aShortLossCostsNoRowAndNothingOfBeforeIsAveragedIn() throws Exception {
    board.trouble =
        shot -> {
          if (shot == 6) {
            throw new BoardException.LinkLost("the line is gone");
          }
        };
    LogEnd end = run(2, 3);
    assertEquals(3, end.rows());
    assertEquals(0, end.gaps());
    assertTrue(keeper.rows.get(1).note().contains("the line is gone"), keeper.rows.toString());
    assertEquals(4, keeper.captures.get(1).scans().size());
    assertTrue(
        keeper.captures.get(1).scans().get(0).started().isAfter(keeper.rows.get(1).due()),
        "only scans from after the loss");
  }

  @Test
  void aLongLossIsToldWhenItBeginsAndOnceMoreWhenItIsOver() throws Exception {
    board.trouble =
        shot -> {
          if (board.seconds() > 10 && board.seconds() < 60) {
            throw shot % 2 == 0
                ? new BoardException.LinkLost("the line is gone")
                : new BoardException.Unreachable("there is no such port");
          }
        };
    LogEnd end = run(2, 50);
    assertEquals(2, end.gaps(), gaps().toString());
    assertTrue(gaps().get(1).note().matches("2[34] slots missed .*"), gaps().get(1).note());
    assertEverySlotIsToldOnce(50);
    assertEquals(LogEnd.Why.PLANNED, end.why());
  }

  @Test
  void aBoardThatOnlyAnswersRubbishIsAskedTwiceASlotAndNoMore() throws Exception {
    board.trouble =
        shot -> {
          throw new BoardException.BadAnswer("the block is damaged");
        };
    LogEnd end = run(2, 10);
    assertEquals(0, end.rows());
    assertEquals(20, board.shots);
    assertEverySlotIsToldOnce(10);
  }

  @Test
  void aBoardThatRefusesAgainAndAgainEndsTheRun() throws Exception {
    board.trouble =
        shot -> {
          throw new BoardException.Refused("the board says: amplifier too hot");
        };
    LogEnd end = run(2, 100);
    assertEquals(LogEnd.Why.BOARD_REFUSED, end.why());
    assertEquals(LogRun.MOST_IN_A_ROW, board.shots);
    assertTrue(end.reason().contains("too hot"), end.reason());
  }

  @Test
  void theGuardsRefusalEndsTheRun() throws Exception {
    board.trouble =
        shot -> {
          throw new BoardException.OverLimit("the transmitter would be on for too long");
        };
    assertEquals(LogEnd.Why.LIMIT, run(2, 100).why());
    assertEquals(1, board.shots);
  }

  @Test
  void theCarrierFollowsADriftingMagnet() throws Exception {
    // 20 Hz/s over 400 s is 8 kHz: at the end the line stands far from where the ladder saw it.
    board.larmor = seconds -> 8.09e6 + 20 * seconds;
    LogEnd end = run(plan(2, 200, true));
    assertEquals(200, end.rows());
    assertEquals(8.09e6 + 20 * 398, board.lastCarrier, 60);
    LogSummary.Builder builder = new LogSummary.Builder();
    keeper.rows.forEach(builder::add);
    LogSummary.Slope drift = builder.build().driftPpmPerHour().orElseThrow();
    // Against the mean frequency over the run.
    double truth = 20 * 3600e6 / (8.09e6 + 20 * 199);
    assertEquals(truth, drift.value(), 4 * drift.u() + 1e-6 * truth);
  }

  @Test
  void aResonanceThatJumpedIsFoundAgainAndTheRunGoesOn() throws Exception {
    board.larmor = seconds -> seconds < 20 ? 8.09e6 : 8.17e6;
    LogEnd end = run(10, 12);
    assertEquals(LogEnd.Why.PLANNED, end.why(), gaps().toString());
    assertTrue(end.rows() >= 10, end + " " + gaps());
    assertTrue(gaps().get(0).note().contains("found again at 8.17"), gaps().toString());
    assertFalse(gaps().get(0).capture().isEmpty(), "what was measured without a line is kept");
    assertEquals(
        8.17e6,
        keeper.rows.get(keeper.rows.size() - 1).values().get("larmor_frequency").value(),
        5);
    assertEverySlotIsToldOnce(12);
  }

  @Test
  void aSampleTakenOutEndsTheRunAfterThreeSearches() throws Exception {
    board.afterShot = () -> board.sample = board.seconds() < 60;
    LogEnd end = run(60, 1000);
    assertEquals(LogEnd.Why.RESONANCE_LOST, end.why());
    assertEquals(LogRun.MOST_IN_A_ROW, end.gaps(), gaps().toString());
    assertTrue(end.reason().contains("check sample and coil"), end.reason());
  }

  @Test
  void aRuleWarnsAndGoesOn() throws Exception {
    LogEnd end = run(2, 5, LogRule.parse("linewidth > 10Hz", LogRule.Action.WARN));
    assertEquals(5, end.rows());
    assertTrue(keeper.rows.get(0).note().contains("above the bound of 10 Hz"));
    assertEquals(
        5, told.stream().filter(e -> e instanceof Progress.Message m && m.warning()).count());
  }

  @Test
  void aRuleEndsTheRunAndTheRowThatBrokeItIsKept() throws Exception {
    board.celsius = seconds -> 25 + seconds / 10;
    LogEnd end = run(2, 100, LogRule.parse("temperature > 26 degC", LogRule.Action.STOP));
    assertEquals(LogEnd.Why.RULE, end.why());
    assertEquals(7, end.rows());
    assertTrue(keeper.rows.get(6).note().contains("temperature is 26.2 degC"), end.reason());
  }

  @Test
  void stoppingKeepsWhatWasFinished() throws Exception {
    LogBoard.climb(keeper);
    Bench bench = bench();
    board.trouble =
        shot -> {
          if (shot == 11) {
            bench.stop();
            throw new BoardException.Stopped("stopped");
          }
        };
    LogEnd end = bench.log(plan(2, 100, false));
    assertEquals(LogEnd.Why.STOPPED, end.why());
    assertEquals(2, end.rows());
    assertEquals(2, keeper.captures.size());
    assertTrue(keeper.notes.get(keeper.notes.size() - 1).startsWith("log ended"));
  }

  @Test
  void withoutAPulseLengthNothingIsPlayed() throws Exception {
    LogEnd end = bench().log(plan(2, 100, false));
    assertEquals(LogEnd.Why.NOT_READY, end.why());
    assertEquals(0, board.shots);
  }

  @Test
  void dataThatCannotBeKeptEndTheRun() throws Exception {
    keeper.failRowsFrom = 3;
    KeepException e = assertThrows(KeepException.class, () -> run(2, 100));
    assertTrue(e.getMessage().contains("disk is full"));
    assertEquals(3, keeper.rows.size());
    assertTrue(keeper.notes.get(keeper.notes.size() - 1).contains("by an error"));
  }

  @Test
  void aMomentToEndAtEndsTheRun() throws Exception {
    LogBoard.climb(keeper);
    LogEnd end =
        bench()
            .log(
                new Work.Log(
                    Duration.ofSeconds(2),
                    0,
                    Optional.of(LogBoard.START.plusSeconds(21)),
                    4,
                    false));
    assertEquals(11, end.rows());
  }

  @Test
  void aBrokenThermometerCostsTheTemperatureAndNoRow() throws Exception {
    board.brokenThermometer = true;
    LogEnd end = run(2, 5);
    assertEquals(5, end.rows());
    assertTrue(keeper.rows.get(0).temperatureCelsius().isEmpty());
    assertEquals(1, told.stream().filter(e -> e instanceof Progress.Message).count());
  }
}
