package coilside.board.simulated;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.Board;
import coilside.board.BoardException;
import coilside.board.driver.Boards;
import coilside.board.link.Link;
import coilside.board.link.PortLocks;
import coilside.board.link.SerialLink;
import coilside.board.link.SerialSettings;
import coilside.board.link.TcpLink;
import coilside.board.profile.DeviceProfile;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Repeat;
import coilside.shot.Shot;
import coilside.shot.Wait;
import coilside.signal.Fid;
import coilside.signal.Scan;
import java.nio.file.Path;
import java.time.Clock;
import java.time.Instant;
import java.util.List;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

/**
 * The driver against the firmware, over every kind of line: what the bench put in must come out at
 * its time, with its sign, phase and voltage.
 */
@Timeout(value = 60, threadMode = Timeout.ThreadMode.SEPARATE_THREAD)
class DriverMeetsFirmwareTest {
  private static final double LINE = 8.0937e6;

  @TempDir Path folder;

  /** A board served over a line, and the host's end of that line. */
  private record Served(Link link, AutoCloseable server) {}

  private Served serve(DeviceProfile profile, AnalogBench bench, FirmwareFaults faults, String over)
      throws Exception {
    Firmware firmware = new Firmware(profile, new FirmwareAdc(profile, bench), false, faults);
    switch (over) {
      case "tcp" -> {
        FirmwareServer server = FirmwareServer.onTcp(firmware, "127.0.0.1", 0, System::nanoTime);
        int port = Integer.parseInt(server.address().replaceAll(".*:", ""));
        return new Served(TcpLink.open("127.0.0.1", port), server);
      }
      case "serial" -> {
        FirmwareServer server = FirmwareServer.onPseudoTerminal(firmware, System::nanoTime);
        return new Served(
            SerialLink.open(
                server.address(),
                SerialSettings.at(115_200),
                new PortLocks(folder, "a test", () -> Instant.EPOCH)),
            server);
      }
      default -> {
        return new Served(SimulatedBoards.inProcess(firmware), () -> {});
      }
    }
  }

  private static Board open(DeviceProfile profile, Link link) throws BoardException {
    Board board = Boards.open(profile, link, System::nanoTime, Clock.systemUTC(), true);
    board.arm();
    return board;
  }

  private static Shot onePulse(double phase) {
    return new Shot(
        8.09e6,
        20,
        0.5,
        List.of(new Pulse(10e-6, phase, 0.5), new Wait(200e-6), new Receive(512, 20e-6, 0)));
  }

  private static Shot minimal() {
    return new Shot(
        8.09e6,
        20,
        0.5,
        List.of(new Pulse(10e-6, 0, 1), new Wait(200e-6), new Receive(512, 20e-6, 0)));
  }

  /**
   * @param phase expected phase at time zero, rad
   * @param tolerance relative to {@code volts}
   */
  private static void assertLine(
      Fid fid, double volts, double hertz, double phase, double tolerance) {
    assertTrue(fid.points() > 400, fid.points() + " points");
    for (int k = 0; k < fid.points(); k++) {
      double t = fid.startSeconds() + k * fid.dwellSeconds();
      double angle = phase + 2 * Math.PI * hertz * t;
      assertEquals(volts * Math.cos(angle), fid.re()[k], tolerance * volts, "I of point " + k);
      assertEquals(volts * Math.sin(angle), fid.im()[k], tolerance * volts, "Q of point " + k);
    }
  }

  @ParameterizedTest
  @CsvSource({
    "scpi-console, memory", "scpi-console, tcp", "scpi-console, serial",
    "plain-line-console, memory", "plain-line-console, tcp", "plain-line-console, serial",
    "radio-frame, memory", "radio-frame, tcp", "radio-frame, serial",
    "pulse-and-receive, memory", "pulse-and-receive, tcp", "pulse-and-receive, serial",
    "direct-sampling, memory", "direct-sampling, tcp", "direct-sampling, serial"
  })
  void whatTheBenchPutInComesOut(String name, String over) throws Exception {
    DeviceProfile profile = FirmwareExchangeTest.profile(name);
    ToneBench bench = new ToneBench(5e-3, LINE, 26.5);
    Served served = serve(profile, bench, FirmwareFaults.none(), over);
    try (AutoCloseable server = served.server();
        Board board = open(profile, served.link())) {
      boolean simple = name.equals("pulse-and-receive");
      for (double phase : new double[] {0, Math.PI / 2, Math.PI / 2, Math.PI}) {
        Scan scan = board.play(simple ? minimal() : onePulse(phase));
        assertEquals(1, scan.windows().size());
        assertEquals(0, scan.retries());
        double tolerance = name.equals("direct-sampling") ? 2e-2 : 2e-3;
        assertLine(scan.fid(), 5e-3, 3700, simple ? 0 : phase, tolerance);
      }
      if (profile.limits().reportsTemperature()) {
        assertEquals(26.5, board.temperature().orElseThrow(), 0.06);
      }
      assertTrue(board.identity().name().length() > 5, board.identity().name() + server);
    }
  }

  @ParameterizedTest
  @ValueSource(strings = {"scpi-console", "plain-line-console", "radio-frame", "direct-sampling"})
  void echoTrainsComeWindowByWindow(String name) throws Exception {
    DeviceProfile profile = FirmwareExchangeTest.profile(name);
    Served served = serve(profile, new ToneBench(5e-3, LINE, 20), FirmwareFaults.none(), "memory");
    try (Board board = open(profile, served.link())) {
      Shot train =
          new Shot(
              8.09e6,
              20,
              0.1,
              List.of(
                  new Pulse(10e-6, 0, 0.5),
                  new Repeat(
                      5,
                      List.of(
                          new Wait(400e-6),
                          new Pulse(20e-6, Math.PI / 2, 0.5),
                          new Wait(200e-6),
                          new Receive(512, 4e-6, 0)))));
      Scan scan = board.play(train);
      assertEquals(5, scan.windows().size());
      for (Fid fid : scan.windows()) {
        assertLine(fid, 5e-3, 3700, Math.PI / 2, name.equals("direct-sampling") ? 2e-2 : 2e-3);
      }
    }
  }

  @ParameterizedTest
  @ValueSource(strings = {"plain-line-console", "radio-frame", "direct-sampling"})
  void damagedBlocksArePlayedAgainAndNeverAveragedIn(String name) throws Exception {
    DeviceProfile profile = FirmwareExchangeTest.profile(name);
    FirmwareFaults faults = FirmwareFaults.none().withDamageOneBlockIn(2);
    Served served = serve(profile, new ToneBench(5e-3, LINE, 20), faults, "memory");
    try (Board board = open(profile, served.link())) {
      int retries = 0;
      for (int k = 0; k < 4; k++) {
        Scan scan = board.play(onePulse(0));
        assertLine(scan.fid(), 5e-3, 3700, 0, name.equals("direct-sampling") ? 2e-2 : 2e-3);
        retries += scan.retries();
      }
      assertTrue(retries >= 2, retries + " retries");
    }
  }

  @ParameterizedTest
  @CsvSource({"scpi-console", "plain-line-console", "radio-frame"})
  void aWrongBoardIsTold(String name) throws Exception {
    DeviceProfile profile = FirmwareExchangeTest.profile(name);
    ToneBench bench = new ToneBench(5e-3, LINE, 20);
    FirmwareFaults wrong = FirmwareFaults.none().withWrongName("toaster 3");
    if (name.equals("radio-frame")) {
      Served served = serve(profile, bench, wrong, "memory");
      try (Board board = open(profile, served.link())) {
        assertEquals("toaster 3", board.identity().name());
      }
      return;
    }
    Served served = serve(profile, bench, wrong, "memory");
    BoardException e =
        assertThrows(
            BoardException.class,
            // A clock that runs ahead: the driver's patience is not what is tried here.
            () ->
                Boards.open(
                    profile, served.link(), () -> 20 * System.nanoTime(), Clock.systemUTC(), true));
    assertTrue(e.getMessage().contains("toaster 3"), e.getMessage());
  }
}
