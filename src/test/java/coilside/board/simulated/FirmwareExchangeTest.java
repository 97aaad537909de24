package coilside.board.simulated;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.link.RecordedExchange;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.ProfileReader;
import coilside.board.profile.ProfileReading;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Repeat;
import coilside.shot.Shot;
import coilside.shot.Step;
import coilside.shot.Wait;
import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.Deque;
import java.util.List;
import java.util.Optional;
import org.junit.jupiter.api.Test;

/**
 * Holds the firmware, byte for byte, to the exchanges written by hand. The counts are those named
 * in the comments of the exchanges.
 */
class FirmwareExchangeTest {
  /** Gives counts laid down beforehand and keeps the shots it was given. */
  private static final class Stub implements FirmwareReceiver {
    private final Deque<List<Counts>> scans = new ArrayDeque<>();
    private final List<Shot> played = new ArrayList<>();
    private final double celsius;

    Stub(double celsius) {
      this.celsius = celsius;
    }

    @Override
    public List<Counts> play(Shot shot) {
      played.add(shot);
      return scans.remove();
    }

    @Override
    public void idle(double seconds) {}

    @Override
    public double temperatureCelsius() {
      return celsius;
    }
  }

  static DeviceProfile profile(String name) {
    ProfileReading reading = ProfileReader.read(Path.of("device-profiles", name + ".toml"));
    assertTrue(reading.sound(), reading.problems().toString());
    return reading.profile().orElseThrow();
  }

  /** Some points first, then a pattern repeated up to 16 points. */
  private static FirmwareReceiver.Counts counts(double[][] first, double[]... pattern) {
    double[] i = new double[16];
    double[] q = new double[16];
    for (int k = 0; k < 16; k++) {
      double[] point = k < first.length ? first[k] : pattern[(k - first.length) % pattern.length];
      i[k] = point[0];
      q[k] = point[1];
    }
    return new FirmwareReceiver.Counts(i, q);
  }

  private static double[] p(double i, double q) {
    return new double[] {i, q};
  }

  private static String text(byte[] bytes) {
    return new String(bytes, StandardCharsets.ISO_8859_1);
  }

  /** Plays the host's part of an exchange and compares the board's. */
  private static void hold(Firmware firmware, String name) throws IOException {
    RecordedExchange exchange =
        RecordedExchange.read(Path.of("src/test/resources/exchanges", name + ".txt"));
    assertTrue(exchange.passages().size() >= 10);
    firmware.connect();
    for (RecordedExchange.Passage passage : exchange.passages()) {
      if (passage.toBoard()) {
        firmware.hear(passage.bytes(), 0, passage.bytes().length, 0);
      } else {
        assertEquals(
            text(passage.bytes()),
            text(said(firmware, passage.bytes().length)),
            "in the passage at line " + passage.line());
      }
    }
    assertEquals("", text(said(firmware, Integer.MAX_VALUE)), "after the end");
  }

  private static byte[] said(Firmware firmware, int atLeast) {
    ByteArrayOutputStream out = new ByteArrayOutputStream();
    while (out.size() < atLeast) {
      Optional<byte[]> next = firmware.say(0);
      if (next.isEmpty()) {
        break;
      }
      out.writeBytes(next.get());
    }
    return out.toByteArray();
  }

  private static Shot singlePulse(double gain) {
    return new Shot(
        8.09e6,
        gain,
        0.5,
        List.of(new Pulse(10e-6, 0, 0.5), new Wait(20e-6), new Receive(16, 10e-6, 0)));
  }

  private static void assertSameShot(Shot expected, Shot actual) {
    assertEquals(expected.carrierHertz(), actual.carrierHertz(), 1e-6);
    assertEquals(expected.gainDecibels(), actual.gainDecibels(), 1e-12);
    assertEquals(expected.restSeconds(), actual.restSeconds(), 1e-9);
    List<Step> e = expected.flat();
    List<Step> a = actual.flat();
    assertEquals(e.size(), a.size());
    for (int k = 0; k < e.size(); k++) {
      assertEquals(e.get(k).getClass(), a.get(k).getClass());
      assertEquals(e.get(k).seconds(), a.get(k).seconds(), 1e-12);
      if (e.get(k) instanceof Pulse x && a.get(k) instanceof Pulse y) {
        assertEquals(x.phaseRadians(), y.phaseRadians(), 1e-9);
        assertEquals(x.amplitude(), y.amplitude(), 1e-12);
      }
      if (e.get(k) instanceof Receive x && a.get(k) instanceof Receive y) {
        assertEquals(x.points(), y.points());
        assertEquals(x.phaseRadians(), y.phaseRadians(), 1e-9);
      }
    }
  }

  @Test
  void theScpiConsoleAnswersAsWrittenByHand() throws Exception {
    Stub stub = new Stub(27.25);
    double[][] rubbish = {p(32767, -32768), p(32767, -32768), p(1, 1), p(-1, -1)};
    double[][] zeros = {p(0, 0), p(0, 0), p(0, 0), p(0, 0)};
    stub.scans.add(List.of(counts(rubbish, p(4096, 0), p(0, 4096), p(-4096, 0), p(0, -4096))));
    stub.scans.add(List.of(counts(zeros, p(10, 35))));
    stub.scans.add(List.of(counts(new double[0][], p(0x0a23, 0x0a23))));
    stub.scans.add(List.of(counts(zeros, p(256, 0)), counts(zeros, p(128, 0))));
    hold(new Firmware(profile("scpi-console"), stub, false, FirmwareFaults.none()), "scpi-console");
    assertEquals(4, stub.played.size());
    assertSameShot(singlePulse(20), stub.played.get(0));
    assertSameShot(singlePulse(20), stub.played.get(1));
    assertSameShot(singlePulse(40), stub.played.get(2));
    assertSameShot(
        new Shot(
            8_091_234,
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
                        new Receive(16, 5e-6, Math.PI))))),
        stub.played.get(3));
  }

  @Test
  void thePlainLineConsoleAnswersAsWrittenByHand() throws Exception {
    Stub stub = new Stub(27.3);
    double[][] rubbish = {p(32767, 32768), p(32767, 32768)};
    double[][] zeros = {p(0, 0), p(0, 0)};
    stub.scans.add(List.of(counts(rubbish, p(4096, 0), p(0, 4096), p(-4096, 0), p(0, -4096))));
    double lineEnds = 0x0a0d - 0x8000;
    stub.scans.add(List.of(counts(zeros, p(lineEnds, -lineEnds))));
    stub.scans.add(List.of(counts(zeros, p(256, 0)), counts(zeros, p(128, 0))));
    FirmwareFaults chatty = FirmwareFaults.none().withRemark("# uptime 17 s", 1);
    hold(new Firmware(profile("plain-line-console"), stub, false, chatty), "plain-line-console");
    assertEquals(3, stub.played.size());
    assertSameShot(singlePulse(20), stub.played.get(0));
    Step[] twice = {
      new Wait(500e-6),
      new Pulse(21e-6, Math.PI / 2, 0.5),
      new Wait(420e-6),
      new Receive(16, 5e-6, 0)
    };
    List<Step> steps = new ArrayList<>(List.of(new Pulse(10.5e-6, 0, 0.5)));
    steps.addAll(Arrays.asList(twice));
    steps.addAll(Arrays.asList(twice));
    assertSameShot(new Shot(8_091_234, 40, 1.25, steps), stub.played.get(2));
  }

  /** A pattern repeated over a window of {@code n}. */
  private static FirmwareReceiver.Counts window(int n, double[]... pattern) {
    double[] i = new double[n];
    double[] q = new double[n];
    for (int k = 0; k < n; k++) {
      i[k] = pattern[k % pattern.length][0];
      q[k] = pattern[k % pattern.length][1];
    }
    return new FirmwareReceiver.Counts(i, q);
  }

  private static FirmwareReceiver.Counts real(int n, double... pattern) {
    double[] x = new double[n];
    for (int k = 0; k < n; k++) {
      x[k] = pattern[k % pattern.length];
    }
    return new FirmwareReceiver.Counts(x, new double[0]);
  }

  private static Shot echoTrain(double amplitude, Receive window) {
    return new Shot(
        8_091_234,
        40,
        1.25,
        List.of(
            new Pulse(10.5e-6, 0, amplitude),
            new Repeat(
                2,
                List.of(
                    new Wait(500e-6),
                    new Pulse(21e-6, Math.PI / 2, amplitude),
                    new Wait(420e-6),
                    window))));
  }

  @Test
  void theRadioFrameBoardAnswersAsWrittenByHand() throws Exception {
    Stub stub = new Stub(27.25);
    stub.scans.add(List.of(window(8, p(65536, 0), p(0, 65536), p(-65536, 0), p(0, -65536))));
    stub.scans.add(List.of(window(8, p(10, -1))));
    stub.scans.add(List.of(window(8, p(256, 0)), window(8, p(128, 0))));
    hold(new Firmware(profile("radio-frame"), stub, false, FirmwareFaults.none()), "radio-frame");
    assertEquals(3, stub.played.size());
    assertSameShot(
        new Shot(
            8.09e6,
            20.5,
            0.5,
            List.of(new Pulse(10e-6, Math.PI / 2, 0.4), new Wait(20e-6), new Receive(8, 10e-6, 0))),
        stub.played.get(0));
    assertSameShot(echoTrain(0.4, new Receive(8, 5e-6, Math.PI)), stub.played.get(2));
  }

  @Test
  void theDirectSamplingBoardAnswersAsWrittenByHand() throws Exception {
    Stub stub = new Stub(25);
    double[] first = real(64, 1000, 0, -1000, 0).i();
    System.arraycopy(new double[] {32767, -32768, 32767, -32768}, 0, first, 0, 4);
    stub.scans.add(List.of(new FirmwareReceiver.Counts(first, new double[0])));
    stub.scans.add(List.of(real(64, 0, -1000, 0, 1000)));
    stub.scans.add(List.of(real(64, 200, 0, -200, 0), real(64, 100, 0, -100, 0)));
    hold(
        new Firmware(profile("direct-sampling"), stub, false, FirmwareFaults.none()),
        "direct-sampling");
    assertEquals(3, stub.played.size());
    double code = 409 / 1023.0;
    // The board counts raw samples at its own rate; the rest came to it as a wait.
    Step[] pulse = {
      new Wait(0.5), new Pulse(10e-6, Math.PI / 2, code), new Wait(20e-6), new Receive(64, 5e-7, 0)
    };
    assertSameShot(new Shot(8.09e6, 20, 0, Arrays.asList(pulse)), stub.played.get(0));
    List<Step> train = new ArrayList<>(List.of(new Wait(1.25)));
    train.addAll(echoTrain(code, new Receive(64, 5e-7, 0)).steps());
    assertSameShot(new Shot(8_091_234, 40, 0, train), stub.played.get(2));
  }

  @Test
  void thePulseAndReceiveBoardAnswersAsWrittenByHand() throws Exception {
    Stub stub = new Stub(25);
    stub.scans.add(List.of(window(16, p(4096, 0), p(0, 4096), p(-4096, 0), p(0, -4096))));
    stub.scans.add(List.of(window(16, p(0x0a0a, 35))));
    stub.scans.add(List.of(window(16, p(1, -2))));
    hold(
        new Firmware(profile("pulse-and-receive"), stub, false, FirmwareFaults.none()),
        "pulse-and-receive");
    assertEquals(3, stub.played.size());
    Shot pulse =
        new Shot(
            8.09e6,
            20,
            0.5,
            List.of(new Pulse(10e-6, 0, 1), new Wait(20e-6), new Receive(16, 10e-6, 0)));
    assertSameShot(pulse, stub.played.get(0));
    assertSameShot(pulse, stub.played.get(1));
    assertSameShot(
        new Shot(8.09e6, 20, 0.5, List.of(new Receive(16, 10e-6, 0))), stub.played.get(2));
  }
}
