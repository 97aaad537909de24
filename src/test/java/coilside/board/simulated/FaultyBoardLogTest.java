package coilside.board.simulated;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.bench.Bench;
import coilside.bench.BenchSettings;
import coilside.bench.LogEnd;
import coilside.bench.LogRow;
import coilside.bench.MemoryKeeper;
import coilside.bench.Work;
import coilside.board.Board;
import coilside.board.driver.Boards;
import coilside.board.profile.DeviceProfile;
import coilside.quantity.Nucleus;
import java.time.Clock;
import java.time.Duration;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalDouble;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;

/**
 * Logs over boards that damage, cut, shorten, prefix with rubbish, restart and fall silent: what is
 * kept is what an unharmed board would have given.
 */
@Timeout(value = 60, threadMode = Timeout.ThreadMode.SEPARATE_THREAD)
class FaultyBoardLogTest {
  /**
   * Drift of the shipped scenario over the test is far below this, a false average far above, Hz.
   */
  private static final double WIDE_OF_THE_MARK = 5;

  private static final Map<String, MemoryKeeper> CLIMBED = new HashMap<>();

  private DeviceProfile profile = FirmwareExchangeTest.profile("scpi-console");
  private final MemoryKeeper keeper = new MemoryKeeper();

  private Board board(FirmwareFaults faults) throws Exception {
    SimulatedBench bench =
        new SimulatedBench(
            ScenarioReader.named("doped-water"), SimulatedDigitiser.of(profile.samples()), 1);
    return Boards.open(
        profile,
        SimulatedBoards.inProcess(new Firmware(profile, bench, false, faults)),
        System::nanoTime,
        Clock.systemUTC(),
        true);
  }

  private Bench bench(Board board, MemoryKeeper keeper) throws Exception {
    BenchSettings settings =
        new BenchSettings(
            Nucleus.HYDROGEN_1,
            7.9e6,
            8.3e6,
            profile.limits().amplitude().snap(0.5),
            "doped water",
            "coil",
            OptionalDouble.of(0.12),
            0.01,
            0.05,
            0.02,
            64);
    return new Bench(board, keeper, settings, Clock.systemUTC(), (due, stop) -> {}, event -> {});
  }

  private LogEnd log(FirmwareFaults faults, int rows) throws Exception {
    MemoryKeeper climbed = CLIMBED.get(profile.name());
    if (climbed == null) {
      climbed = new MemoryKeeper();
      try (Board board = board(FirmwareFaults.none())) {
        assertTrue(bench(board, climbed).ready().ready());
      }
      CLIMBED.put(profile.name(), climbed);
    }
    keeper.findings.addAll(climbed.findings);
    try (Board board = board(faults)) {
      return bench(board, keeper)
          .log(
              new Work.Log(
                  Duration.ofSeconds(60), rows, Optional.empty(), 2, false, true, List.of()));
    }
  }

  private void assertNothingFalse() {
    double truth =
        keeper.findings.stream()
            .filter(f -> f.values().containsKey("t2_star"))
            .findFirst()
            .orElseThrow()
            .value("larmor_frequency")
            .value();
    for (LogRow row : keeper.rows) {
      if (!row.values().isEmpty()) {
        assertEquals(truth, row.values().get("larmor_frequency").value(), WIDE_OF_THE_MARK);
        assertEquals(50e-6, row.values().get("amplitude").value(), 1e-6);
      }
    }
    keeper.captures.forEach(c -> assertEquals(2, c.scans().size()));
  }

  private int retries() {
    return keeper.rows.stream().mapToInt(LogRow::retries).sum();
  }

  @Test
  void oneBlockInTenDamagedIsAskedForAgain() throws Exception {
    // The SCPI console's blocks carry no checksum: only a profile with one can tell.
    profile = FirmwareExchangeTest.profile("radio-frame");
    LogEnd end = log(FirmwareFaults.none().withDamageOneBlockIn(10), 12);
    assertEquals(12, end.rows(), keeper.rows.toString());
    assertTrue(retries() >= 2, retries() + " retries in 24 scans");
    assertNothingFalse();
  }

  @Test
  void oneBlockInTenCutShortIsAskedForAgain() throws Exception {
    LogEnd end = log(FirmwareFaults.none().withCutOneBlockIn(10), 6);
    assertEquals(6, end.rows(), keeper.rows.toString());
    assertTrue(retries() >= 1, retries() + " retries");
    assertNothingFalse();
  }

  @Test
  void oneBlockInTenWithASampleTooFewIsAskedForAgain() throws Exception {
    LogEnd end = log(FirmwareFaults.none().withShortOneBlockIn(10), 12);
    assertEquals(12, end.rows(), keeper.rows.toString());
    assertTrue(retries() >= 2, retries() + " retries in 24 scans");
    assertNothingFalse();
  }

  @Test
  void rubbishBeforeAnswersDoesNoHarm() throws Exception {
    LogEnd end = log(FirmwareFaults.none().withRubbishBeforeOneAnswerIn(7), 12);
    assertTrue(end.rows() >= 10, keeper.rows.toString());
    assertNothingFalse();
  }

  @Test
  void aBoardThatRestartsIsSetUpAgain() throws Exception {
    LogEnd end = log(FirmwareFaults.none().withRestartAfterScans(11), 12);
    assertTrue(end.rows() >= 11, keeper.rows.toString());
    assertNothingFalse();
  }

  @Test
  void aBoardThatFallsSilentLeavesAGapAndNothingElse() throws Exception {
    LogEnd end = log(FirmwareFaults.none().withSilentAfterCommands(60), 6);
    assertTrue(end.rows() > 0 && end.rows() < 6, end.toString());
    assertEquals(LogEnd.Why.PLANNED, end.why());
    assertTrue(end.gaps() <= 2, keeper.rows.toString());
    assertNothingFalse();
  }
}
