package coilside.board.simulated;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.Board;
import coilside.board.BoardException;
import coilside.board.driver.Boards;
import coilside.board.driver.ReconnectingBoard;
import coilside.board.link.LinkException;
import coilside.board.link.MemoryLink;
import coilside.board.link.Reopening;
import coilside.board.profile.DeviceProfile;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.shot.Wait;
import java.time.Clock;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;

/** A board whose cable is pulled and put back goes on, and nothing else takes its place. */
@Timeout(value = 30, threadMode = Timeout.ThreadMode.SEPARATE_THREAD)
class PulledCableTest {
  private static final Shot SHOT =
      new Shot(
          8.09e6,
          20,
          0.5,
          List.of(new Pulse(10e-6, 0, 0.5), new Wait(200e-6), new Receive(64, 20e-6, 0)));

  private final DeviceProfile profile = FirmwareExchangeTest.profile("scpi-console");
  private MemoryLink cable;
  private FirmwareFaults faults = FirmwareFaults.none();
  private boolean pulled;

  private MemoryLink plugIn() throws LinkException {
    if (pulled) {
      throw new LinkException(LinkException.Kind.MISSING, "ttyNONE0: there is no such port");
    }
    MemoryLink.Pair pair = MemoryLink.pair("ttyNONE0");
    cable = pair.far();
    FirmwareServer.over(
        pair.far(),
        new Firmware(
            profile, new FirmwareAdc(profile, new ToneBench(1e-3, 8.09e6, 20)), false, faults),
        System::nanoTime);
    return pair.near();
  }

  private Board board() throws Exception {
    return new ReconnectingBoard(
        Boards.open(profile, plugIn(), System::nanoTime, Clock.systemUTC(), false),
        profile,
        new Reopening(this::plugIn, System::nanoTime),
        System::nanoTime,
        Clock.systemUTC());
  }

  @Test
  void theLossIsToldThenTheBoardIsOpenedAgainAndStaysArmed() throws Exception {
    try (Board board = board()) {
      assertThrows(BoardException.OverLimit.class, () -> board.play(SHOT), "not armed");
      board.arm();
      assertEquals(1, board.play(SHOT).windows().size());
      cable.close();
      assertThrows(BoardException.LinkLost.class, () -> board.play(SHOT));
      pulled = true;
      assertThrows(BoardException.Unreachable.class, () -> board.play(SHOT));
      assertThrows(BoardException.Unreachable.class, () -> board.play(SHOT));
      pulled = false;
      while (!cameBack(board)) {
        Thread.onSpinWait();
      }
      assertEquals(1, board.play(SHOT).windows().size());
      assertTrue(board.armed());
    }
  }

  private static boolean cameBack(Board board) throws BoardException {
    try {
      return board.play(SHOT).windows().size() == 1;
    } catch (BoardException.Unreachable e) {
      return false;
    }
  }

  @Test
  void anotherBoardInItsPlaceIsRefused() throws Exception {
    try (Board board = board()) {
      board.arm();
      cable.close();
      assertThrows(BoardException.LinkLost.class, () -> board.play(SHOT));
      faults = faults.withWrongName("Coilside Examples,SC-21,0,1.4");
      BoardException e = assertThrows(BoardException.class, () -> board.play(SHOT));
      assertTrue(e.getMessage().contains("SC-21"), e.getMessage());
    }
  }
}
