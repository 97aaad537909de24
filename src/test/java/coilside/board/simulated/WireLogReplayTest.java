package coilside.board.simulated;

import static org.junit.jupiter.api.Assertions.assertArrayEquals;
import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.Board;
import coilside.board.BoardException;
import coilside.board.driver.Boards;
import coilside.board.link.Link;
import coilside.board.link.RecordedExchange;
import coilside.board.link.ReplayLink;
import coilside.board.link.WireLog;
import coilside.board.profile.DeviceProfile;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.shot.Wait;
import coilside.signal.Scan;
import java.nio.file.Path;
import java.time.Clock;
import java.time.Instant;
import java.util.List;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

/** A wire log taken at one bench gives the same scans again without the board. */
@Timeout(value = 30, threadMode = Timeout.ThreadMode.SEPARATE_THREAD)
class WireLogReplayTest {
  @TempDir Path folder;

  private static Shot shot(double amplitude) {
    return new Shot(
        8.09e6,
        20,
        0.5,
        List.of(new Pulse(10e-6, 0, amplitude), new Wait(200e-6), new Receive(512, 20e-6, 0)));
  }

  private static Board open(DeviceProfile profile, Link link) throws BoardException {
    // A simulated board asks for no settling, so that nothing depends on the clock.
    return Boards.open(profile, link, System::nanoTime, Clock.systemUTC(), true);
  }

  @ParameterizedTest
  @ValueSource(
      strings = {
        "scpi-console",
        "plain-line-console",
        "radio-frame",
        "direct-sampling",
        "pulse-and-receive"
      })
  void theSameScansComeBack(String name) throws Exception {
    DeviceProfile profile = FirmwareExchangeTest.profile(name);
    Path file = folder.resolve(name + ".txt");
    double amplitude = name.equals("pulse-and-receive") ? 1 : 0.5;
    Firmware firmware =
        new Firmware(
            profile,
            new FirmwareAdc(profile, new ToneBench(5e-3, 8.0937e6, 26.5)),
            false,
            FirmwareFaults.none());
    Scan first;
    Scan second;
    try (Board board =
        open(
            profile,
            WireLog.over(
                SimulatedBoards.inProcess(firmware),
                file,
                () -> Instant.EPOCH,
                System::nanoTime))) {
      first = board.play(shot(amplitude));
      second = board.play(shot(amplitude));
    }
    try (Board board = open(profile, new ReplayLink(name, RecordedExchange.read(file)))) {
      assertArrayEquals(first.fid().re(), board.play(shot(amplitude)).fid().re());
      assertArrayEquals(second.fid().im(), board.play(shot(amplitude)).fid().im());
      assertEquals(first.fid().startSeconds(), second.fid().startSeconds());
      BoardException e =
          assertThrows(BoardException.class, () -> board.play(shot(amplitude).withGain(30)));
      assertTrue(e.getMessage().contains("differs from the recording"), e.getMessage());
    }
  }
}
