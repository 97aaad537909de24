package coilside.board;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.BoardException.BadAnswer;
import coilside.board.BoardException.LinkLost;
import coilside.board.BoardException.OverLimit;
import coilside.board.BoardException.Refused;
import coilside.board.BoardException.Stopped;
import coilside.board.BoardLimits.Range;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Repeat;
import coilside.shot.Shot;
import coilside.shot.Step;
import coilside.shot.Wait;
import coilside.signal.Scan;
import java.util.ArrayList;
import java.util.List;
import java.util.Random;
import java.util.stream.Stream;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.Arguments;
import org.junit.jupiter.params.provider.MethodSource;

/** The guard: what it refuses, what it lets through, and what it does when something breaks. */
class GuardedBoardTest {
  private static final double DUTY = 0.01;

  private final FakePlayer player = new FakePlayer();
  private long nanos;

  private static BoardLimits limits(boolean arbitrary, boolean loops) {
    return new BoardLimits(
        new Range(1e6, 30e6, 1),
        new Range(0, 60, 2),
        new Range(1e-6, 500e-6, 1e-7),
        new Range(0, 0.8, 0.001),
        new Range(1e-6, 100, 1e-7),
        new Range(1e-6, 1e-3, 1e-7),
        16,
        65_536,
        8,
        12,
        1000,
        2,
        DUTY,
        1,
        arbitrary,
        true,
        loops,
        true,
        false);
  }

  private GuardedBoard board() {
    GuardedBoard board = new GuardedBoard(player, limits(true, true), () -> nanos, true);
    board.arm();
    return board;
  }

  private static Shot shot(double rest, Step... steps) {
    return new Shot(8.09e6, 20, rest, List.of(steps));
  }

  private static final Receive WINDOW = new Receive(64, 10e-6, 0);

  private static Shot usual() {
    return shot(0.1, new Pulse(10e-6, 0, 0.5), new Wait(20e-6), WINDOW);
  }

  static Stream<Arguments> overLimits() {
    return Stream.of(
        Arguments.of(usual().withCarrier(31e6), "carrier 31 MHz is outside 1 MHz to 30 MHz"),
        Arguments.of(usual().withGain(62), "receiver gain 62 dB is outside 0 dB to 60 dB"),
        Arguments.of(usual().withGain(-2), "receiver gain -2 dB is outside"),
        Arguments.of(usual().withRest(101), "rest 101 s is outside 0.000001 s to 100 s"),
        Arguments.of(
            shot(1, new Pulse(501e-6, 0, 0.5), WINDOW),
            "pulse width 501 us is outside 1 us to 500 us"),
        Arguments.of(shot(1, new Pulse(0.4e-6, 0, 0.5), WINDOW), "pulse width 0.4 us is outside"),
        Arguments.of(
            shot(1, new Pulse(10e-6, 0, 0.81), WINDOW), "pulse amplitude 0.81 is outside 0 to 0.8"),
        Arguments.of(shot(1, new Wait(0.5e-6), WINDOW), "wait 0.5 us is outside"),
        Arguments.of(shot(1, new Wait(200), WINDOW), "wait 200000000 us is outside"),
        Arguments.of(
            shot(1, new Receive(64, 0.5e-6, 0)), "dwell time 0.5 us is outside 1 us to 1000 us"),
        Arguments.of(shot(1, new Receive(15, 1e-5, 0)), "15 points is outside 16 to 65536 points"),
        Arguments.of(shot(1, new Receive(65_537, 1e-5, 0)), "65537 points"),
        Arguments.of(
            shot(1, new Receive(60_000, 40e-6, 0)), "receive time 2.4 s is over the limit of 2 s"),
        Arguments.of(
            shot(1, new Repeat(9, List.of(WINDOW))), "9 receive windows, over the limit of 8"),
        Arguments.of(
            shot(1, new Repeat(1001, List.of(new Wait(1e-6))), WINDOW),
            "1001 times, over the limit of 1000"),
        Arguments.of(
            shot(
                1,
                new Repeat(
                    1000,
                    List.of(new Repeat(1000, List.of(new Repeat(1000, List.of(new Wait(1e-6))))))),
                WINDOW),
            "steps, over the limit"),
        Arguments.of(
            shot(
                1,
                Stream.concat(
                        Stream.generate(() -> (Step) new Wait(1e-6)).limit(12), Stream.of(WINDOW))
                    .toArray(Step[]::new)),
            "13 steps, over the limit of 12"),
        Arguments.of(
            shot(
                0,
                new Pulse(400e-6, 0, 0.5),
                new Repeat(
                    8,
                    List.of(new Wait(100e-6), new Pulse(500e-6, 0, 0.5), new Wait(100e-6), WINDOW)),
                new Repeat(30, List.of(new Pulse(500e-6, 0, 0.5), new Wait(1e-4)))),
            "% of 1 s, over the limit of 1 %"));
  }

  @ParameterizedTest
  @MethodSource("overLimits")
  void overLimitShotsAreRefusedBeforeAnythingIsSent(Shot shot, String words) {
    OverLimit refused = assertThrows(OverLimit.class, () -> board().play(shot));
    assertTrue(refused.getMessage().contains(words), refused.getMessage());
    assertTrue(refused.getMessage().contains("Nothing was sent"), refused.getMessage());
    assertEquals(List.of(), player.played);
  }

  @Test
  void edgesAreAllowed() throws BoardException {
    GuardedBoard board = board();
    board.play(
        new Shot(30e6, 60, 100, List.of(new Pulse(500e-6, 0, 0.8), new Receive(16, 1e-3, 0))));
    board.play(new Shot(1e6, 0, 0, List.of(new Pulse(1e-6, 0, 0), new Receive(65_536, 1e-6, 0))));
    assertEquals(2, player.played.size());
  }

  @Test
  void notArmedMeansNoPulseButReceivingIsAllowed() throws BoardException {
    GuardedBoard board = new GuardedBoard(player, limits(true, true), () -> nanos, true);
    assertFalse(board.armed());
    OverLimit refused = assertThrows(OverLimit.class, () -> board.play(usual()));
    assertTrue(refused.getMessage().contains("not armed"), refused.getMessage());
    board.play(shot(0, WINDOW));
    assertEquals(1, player.played.size());
    board.arm();
    board.play(usual());
    board.disarm();
    assertThrows(OverLimit.class, () -> board.play(usual()));
    assertEquals(2, player.played.size());
  }

  @Test
  void simulatedBoardIsAlwaysArmed() throws BoardException {
    GuardedBoard board = new GuardedBoard(player, limits(true, true), () -> nanos, false);
    board.disarm();
    assertTrue(board.armed());
    board.play(usual());
  }

  /** 400 us a shot: 25 fill one percent of a second. */
  @Test
  void dutyCycleCountsWhatHasBeenPlayed() throws BoardException {
    GuardedBoard board = board();
    Shot shot = shot(0.001, new Pulse(400e-6, 0, 0.5), WINDOW);
    int n = 0;
    try {
      for (; n < 100; n++) {
        board.play(shot);
      }
    } catch (OverLimit full) {
      assertTrue(full.getMessage().contains("over the limit of 1 %"), full.getMessage());
    }
    assertEquals(25, n);
    // Half a second later nothing has left the window yet; after a second all has.
    nanos += 500_000_000L;
    assertThrows(OverLimit.class, () -> board.play(shot));
    nanos += 600_000_000L;
    board.play(shot);
  }

  @Test
  void zeroAmplitudePulsesAreNotCharged() throws BoardException {
    GuardedBoard board = board();
    for (int i = 0; i < 50; i++) {
      board.play(shot(0.001, new Pulse(400e-6, 0, 0), WINDOW));
    }
    assertEquals(50, player.played.size());
  }

  /** A board that runs faster than the clock is charged by its own time. */
  @Test
  void boardTimeCountsWhereTheClockStandsStill() throws BoardException {
    GuardedBoard board = board();
    for (int i = 0; i < 200; i++) {
      board.play(shot(0.05, new Pulse(400e-6, 0, 0.5), WINDOW));
    }
    assertEquals(200, player.played.size());
  }

  /** Against the plain definition: on-time of every window, summed step by step. */
  @Test
  void noWindowOfPlayedShotsEverExceedsTheDutyCycle() throws BoardException {
    Random random = new Random(3);
    GuardedBoard board = board();
    List<double[]> on = new ArrayList<>();
    double end = 0;
    int refused = 0;
    for (int i = 0; i < 400; i++) {
      nanos += (long) (random.nextDouble() * 2e7);
      Shot shot =
          board.asPlayed(
              shot(
                  random.nextDouble() * 0.05,
                  new Pulse(1e-6 + random.nextDouble() * 499e-6, 0, 0.5),
                  new Wait(1e-6 + random.nextDouble() * 0.01),
                  new Pulse(1e-6 + random.nextDouble() * 499e-6, 0, 0.5),
                  WINDOW));
      double start = Math.max(nanos * 1e-9, end);
      try {
        board.play(shot);
      } catch (OverLimit e) {
        refused++;
        continue;
      }
      double t = start + shot.restSeconds();
      for (Step step : shot.flat()) {
        if (step instanceof Pulse) {
          on.add(new double[] {t, t + step.seconds()});
        }
        t += step.seconds();
      }
      end = t;
    }
    assertTrue(refused > 20 && refused < 380, "refused " + refused);
    for (double[] last : on) {
      double sum = 0;
      for (double[] one : on) {
        sum += Math.max(0, Math.min(one[1], last[1]) - Math.max(one[0], last[1] - 1));
      }
      assertTrue(sum <= DUTY * (1 + 1e-6), "on for " + sum + " s of one second");
    }
  }

  @Test
  void damagedScansArePlayedAgainAndCounted() throws BoardException {
    player.failures.add(new BadAnswer("bad block."));
    player.failures.add(new BadAnswer("bad block."));
    Scan scan = board().play(usual());
    assertEquals(2, scan.retries());
    assertEquals(3, player.played.size());
    assertEquals(2, player.stops);
  }

  @Test
  void retriesAreBoundedAndThenSaid() {
    for (int i = 0; i < 5; i++) {
      player.failures.add(new BadAnswer("bad block."));
    }
    BadAnswer bad = assertThrows(BadAnswer.class, () -> board().play(usual()));
    assertTrue(bad.getMessage().contains("3 times"), bad.getMessage());
    assertEquals(3, player.played.size());
    assertEquals(3, player.stops);
  }

  @Test
  void anyErrorStopsTheBoard() {
    player.failures.add(new LinkLost("gone"));
    assertThrows(LinkLost.class, () -> board().play(usual()));
    assertEquals(1, player.stops);
    player.whilePlaying =
        () -> {
          throw new IllegalStateException("our own mistake");
        };
    assertThrows(IllegalStateException.class, () -> board().play(usual()));
    assertEquals(2, player.stops);
  }

  @Test
  void stopDuringARetryIsNotForgotten() {
    GuardedBoard board = board();
    player.whilePlaying = board::stop;
    player.failures.add(new BadAnswer("bad block."));
    assertThrows(Stopped.class, () -> board.play(usual()));
    assertEquals(1, player.played.size());
  }

  @Test
  void closeStopsFirstAndNothingPlaysAfterwards() {
    GuardedBoard board = board();
    board.close();
    assertEquals(1, player.stops);
    assertEquals(1, player.closes);
    assertThrows(Stopped.class, () -> board.play(usual()));
  }

  @Test
  void everyValueIsPutOnTheGrain() throws BoardException {
    board()
        .play(
            new Shot(
                8_090_000.4,
                20.9,
                0.12345678,
                List.of(
                    new Pulse(10.04e-6, 0.3, 0.50049),
                    new Wait(0),
                    new Repeat(2, List.of(new Wait(20.06e-6), new Receive(64, 10.01e-6, 0))))));
    Shot played = player.played.get(0);
    assertEquals(
        new Shot(
            8_090_000,
            20,
            0.1234568,
            List.of(
                new Pulse(1e-5, 0.3, 0.5),
                new Repeat(2, List.of(new Wait(201e-7), new Receive(64, 1e-5, 0))))),
        played);
  }

  @Test
  void boardsWithAFixedShotSayWhatTheyCannotDo() throws BoardException {
    GuardedBoard board = new GuardedBoard(player, limits(false, false), () -> nanos, true);
    board.arm();
    board.play(usual());
    board.play(shot(0.1, new Pulse(10e-6, 0, 0.5), WINDOW));
    board.play(shot(0, WINDOW));
    Refused refused =
        assertThrows(
            Refused.class,
            () ->
                board.play(
                    shot(
                        1,
                        new Pulse(20e-6, 0, 0.5),
                        new Wait(1e-3),
                        new Pulse(10e-6, 0, 0.5),
                        WINDOW)));
    assertTrue(refused.getMessage().contains("2 pulses"), refused.getMessage());
    assertEquals(3, player.played.size());
  }

  @Test
  void aShotWithoutAWindowIsRefused() {
    assertThrows(Refused.class, () -> board().play(shot(1, new Pulse(10e-6, 0, 0.5))));
  }
}
