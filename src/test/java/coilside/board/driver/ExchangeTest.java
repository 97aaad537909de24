package coilside.board.driver;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.Board;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.ProfileReader;
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
import java.time.ZoneOffset;
import java.util.ArrayList;
import java.util.List;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

/**
 * The driver held to the handwritten exchanges, byte for byte, however the board's bytes are cut.
 */
class ExchangeTest {
  static final Shot SINGLE_PULSE =
      new Shot(
          8.09e6,
          20,
          0.5,
          List.of(new Pulse(10e-6, 0, 0.5), new Wait(20e-6), new Receive(16, 10e-6, 0)));

  static final Shot ECHO_TRAIN =
      new Shot(
          8.091234e6,
          40,
          1.25,
          List.of(
              new Pulse(10.5e-6, 0, 0.5),
              new Repeat(
                  2,
                  List.of(
                      new Wait(500e-6),
                      new Pulse(21e-6, Math.PI / 2, 0.5),
                      new Wait(420e-6),
                      new Receive(16, 5e-6, Math.PI)))));

  private static Shot echoTrain(Receive window) {
    return new Shot(
        8.091234e6,
        40,
        1.25,
        List.of(
            new Pulse(10.5e-6, 0, 0.4),
            new Repeat(
                2,
                List.of(
                    new Wait(500e-6),
                    new Pulse(21e-6, Math.PI / 2, 0.4),
                    new Wait(420e-6),
                    window))));
  }

  private static Shot loud(double phase) {
    return new Shot(
        8.09e6,
        20,
        0.5,
        List.of(new Pulse(10e-6, phase, 1), new Wait(20e-6), new Receive(16, 10e-6, 0)));
  }

  static Shot named(String name) {
    return switch (name) {
      case "single-pulse" -> SINGLE_PULSE;
      case "single-pulse-more-gain" -> SINGLE_PULSE.withGain(40);
      case "echo-train" -> ECHO_TRAIN;
      case "pulse-in-ticks" ->
          new Shot(
              8.09e6,
              20.5,
              0.5,
              List.of(
                  new Pulse(10e-6, Math.PI / 2, 0.4), new Wait(20e-6), new Receive(8, 10e-6, 0)));
      case "echo-train-in-ticks" -> echoTrain(new Receive(8, 5e-6, Math.PI));
      case "pulse-sampled" ->
          new Shot(
              8.09e6,
              20,
              0.5,
              List.of(
                  new Pulse(10e-6, Math.PI / 2, 0.4), new Wait(20e-6), new Receive(16, 2e-6, 0)));
      case "echo-train-sampled" -> echoTrain(new Receive(16, 2e-6, 0));
      case "loud-pulse" -> loud(0);
      case "loud-pulse-turned" -> loud(Math.PI / 2);
      case "listen" -> new Shot(8.09e6, 20, 0.5, List.of(new Receive(16, 10e-6, 0)));
      default -> throw new IllegalArgumentException(name);
    };
  }

  /** Plays an exchange to its end and gives back the scans. */
  static List<Scan> play(String profileName, int mostAtOnce, List<Double> temperatures)
      throws Exception {
    DeviceProfile profile =
        ProfileReader.read(Path.of("device-profiles", profileName + ".toml"))
            .profile()
            .orElseThrow();
    ScriptedLink link = new ScriptedLink(ExchangeFile.read(profileName + ".txt"), mostAtOnce);
    Clock clock = Clock.fixed(Instant.parse("2026-03-01T12:00:00Z"), ZoneOffset.UTC);
    List<Scan> scans = new ArrayList<>();
    assertEquals("open", link.announced());
    Board board = Boards.open(profile, link, link, clock, false);
    board.arm();
    for (String due = link.announced(); due != null; due = link.announced()) {
      if (due.startsWith("shot ")) {
        scans.add(board.play(named(due.substring(5))));
      } else if (due.equals("temperature")) {
        temperatures.add(board.temperature().orElseThrow());
      } else {
        assertEquals("close", due);
        board.close();
      }
    }
    return scans;
  }

  @ParameterizedTest
  @ValueSource(ints = {1, 7, 100_000})
  void scpiConsole(int mostAtOnce) throws Exception {
    List<Double> temperatures = new ArrayList<>();
    List<Scan> scans = play("scpi-console", mostAtOnce, temperatures);
    assertEquals(List.of(27.25), temperatures);
    assertEquals(4, scans.size());

    // 4096 counts of 30.5 uV behind 20 dB: 12.4928 mV at the receiver input, a line at +25 kHz.
    Fid first = scans.get(0).fid();
    assertEquals(12, first.points());
    double volts = 4096 * 30.5e-6 / 10;
    assertEquals(0.0124928, volts, 1e-12);
    for (int k = 0; k < 12; k++) {
      assertEquals(volts * Math.cos(Math.PI / 2 * k), first.re(k), 1e-15);
      assertEquals(volts * Math.sin(Math.PI / 2 * k), first.im(k), 1e-15);
    }
    assertEquals(10e-6, first.dwellSeconds(), 1e-18);
    assertEquals(8.09e6, first.carrierHertz());
    // Half the pulse, the wait, four points lost, two points of delay.
    assertEquals(5e-6 + 20e-6 + (4 - 2) * 10e-6, first.startSeconds(), 1e-15);
    assertEquals(4096.0 / 32767, scans.get(0).peakFraction(), 1e-12);
    assertEquals(0, scans.get(0).clippedSamples());
    assertEquals(0, scans.get(0).retries());
    assertEquals(Instant.parse("2026-03-01T12:00:00Z"), scans.get(0).started());

    assertEquals(10 * 30.5e-6 / 10, scans.get(1).fid().re(3), 1e-18);
    assertEquals(35 * 30.5e-6 / 10, scans.get(1).fid().im(3), 1e-18);

    // 0x0a23 = 2595
    assertEquals(2595 * 30.5e-6 / 100, scans.get(2).fid().re(0), 1e-15);

    Scan train = scans.get(3);
    assertEquals(2, train.windows().size());
    assertEquals(256 * 30.5e-6 / 100, train.windows().get(0).re(0), 1e-15);
    assertEquals(128 * 30.5e-6 / 100, train.windows().get(1).re(0), 1e-15);
    for (Fid window : train.windows()) {
      assertEquals(10.5e-6 + 420e-6 + 2 * 5e-6, window.startSeconds(), 1e-15);
      assertEquals(8.091234e6, window.carrierHertz());
    }
  }

  @ParameterizedTest
  @ValueSource(ints = {1, 7, 100_000})
  void plainLineConsole(int mostAtOnce) throws Exception {
    List<Double> temperatures = new ArrayList<>();
    List<Scan> scans = play("plain-line-console", mostAtOnce, temperatures);
    assertEquals(List.of(27.3), temperatures);
    assertEquals(3, scans.size());

    // The board's I - iQ turned back: the same line at +25 kHz.
    Fid first = scans.get(0).fid();
    assertEquals(14, first.points());
    double volts = 4096 * 45.8e-6 / 10;
    for (int k = 0; k < 14; k++) {
      assertEquals(volts * Math.cos(Math.PI / 2 * k), first.re(k), 1e-15);
      assertEquals(volts * Math.sin(Math.PI / 2 * k), first.im(k), 1e-15);
    }
    assertEquals(5e-6 + 20e-6 + (2 - 1.5) * 10e-6, first.startSeconds(), 1e-15);

    // 0x0a0d - 0x8000 = -30195, and the imaginary part turned.
    assertEquals(-30195 * 45.8e-6 / 10, scans.get(1).fid().re(5), 1e-12);
    assertEquals(30195 * 45.8e-6 / 10, scans.get(1).fid().im(5), 1e-12);

    // The board cannot turn its receiver by pi: the host has.
    assertEquals(-256 * 45.8e-6 / 100, scans.get(2).windows().get(0).re(0), 1e-12);
    assertEquals(-128 * 45.8e-6 / 100, scans.get(2).windows().get(1).re(0), 1e-12);
    assertEquals(0, scans.get(2).windows().get(1).im(0), 1e-12);
    assertTrue(scans.get(2).restSeconds() >= 1.25);
  }

  @ParameterizedTest
  @ValueSource(ints = {1, 7, 100_000})
  void radioFrame(int mostAtOnce) throws Exception {
    List<Double> temperatures = new ArrayList<>();
    List<Scan> scans = play("radio-frame", mostAtOnce, temperatures);
    assertEquals(List.of(27.25), temperatures);
    assertEquals(3, scans.size());
    Fid first = scans.get(0).fid();
    assertEquals(8, first.points());
    double volts = 65536 * 1.2e-7 / Math.pow(10, 20.5 / 20);
    for (int k = 0; k < 8; k++) {
      assertEquals(volts * Math.cos(Math.PI / 2 * k), first.re(k), 1e-15);
      assertEquals(volts * Math.sin(Math.PI / 2 * k), first.im(k), 1e-15);
    }
    assertEquals(5e-6 + 20e-6, first.startSeconds(), 1e-15);
    assertEquals(65536.0 / 8388607, scans.get(0).peakFraction(), 1e-12);
    assertEquals(-1.2e-7 / Math.pow(10, 20.5 / 20), scans.get(1).fid().im(7), 1e-18);
    // The board turns its receiver itself: nothing is turned here.
    assertEquals(256 * 1.2e-7 / 100, scans.get(2).windows().get(0).re(0), 1e-15);
    assertEquals(128 * 1.2e-7 / 100, scans.get(2).windows().get(1).re(7), 1e-15);
  }

  @ParameterizedTest
  @ValueSource(ints = {1, 7, 100_000})
  void directSampling(int mostAtOnce) throws Exception {
    List<Scan> scans = play("direct-sampling", mostAtOnce, new ArrayList<>());
    assertEquals(3, scans.size());
    // 1000 counts of 30.5 uV behind 20 dB on the carrier: the mixed-down amplitude of the cosine.
    // One
    // point is lost to the board's filter, seven to the host's.
    Fid first = scans.get(0).fid();
    assertEquals(16 - 1 - 7, first.points());
    assertEquals(2e-6, first.dwellSeconds(), 1e-18);
    double volts = 1000 * 30.5e-6 / 10;
    for (int k = 0; k < first.points(); k++) {
      assertEquals(volts, first.re(k), 2e-3 * volts);
      assertEquals(0, first.im(k), 2e-3 * volts);
      assertEquals(volts, scans.get(1).fid().im(k), 2e-3 * volts);
    }
    // Half the pulse, the wait, 4 samples lost and 2 of delay at 0.5 us; then the middle of the
    // host's filter, 3.5 points and half a sample on.
    assertEquals(
        5e-6 + 20e-6 + (4 - 2) * 0.5e-6 + (8 * 4 - 1) / 2.0 * 0.5e-6, first.startSeconds(), 0.3e-6);
    assertEquals(1000 / 32767.0, scans.get(1).peakFraction(), 1e-9);
    assertEquals(200 * 30.5e-6 / 100, scans.get(2).windows().get(0).re(3), 2e-7);
    assertEquals(100 * 30.5e-6 / 100, scans.get(2).windows().get(1).re(3), 2e-7);
  }

  @ParameterizedTest
  @ValueSource(ints = {1, 7, 100_000})
  void pulseAndReceive(int mostAtOnce) throws Exception {
    List<Scan> scans = play("pulse-and-receive", mostAtOnce, new ArrayList<>());
    assertEquals(3, scans.size());
    Fid first = scans.get(0).fid();
    double volts = 4096 * 30.5e-6 / 10;
    for (int k = 0; k < 16; k++) {
      assertEquals(volts * Math.cos(Math.PI / 2 * k), first.re(k), 1e-15);
      assertEquals(volts * Math.sin(Math.PI / 2 * k), first.im(k), 1e-15);
    }
    assertEquals(5e-6 + 20e-6, first.startSeconds(), 1e-15);
    // 2570 + 35 i turned by a quarter turn: -35 + 2570 i.
    assertEquals(-35 * 30.5e-6 / 10, scans.get(1).fid().re(2), 1e-15);
    assertEquals(2570 * 30.5e-6 / 10, scans.get(1).fid().im(2), 1e-15);
    assertEquals(30.5e-6 / 10, scans.get(2).fid().re(0), 1e-18);
    assertEquals(-2 * 30.5e-6 / 10, scans.get(2).fid().im(15), 1e-18);
    assertEquals(0, scans.get(2).fid().startSeconds());
  }
}
