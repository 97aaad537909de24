package coilside.board.driver;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.driver.Conformance.Row;
import coilside.board.driver.Conformance.Row.Verdict;
import coilside.board.link.Link;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.ProfileReader;
import coilside.board.simulated.AnalogBench;
import coilside.board.simulated.Firmware;
import coilside.board.simulated.FirmwareAdc;
import coilside.board.simulated.FirmwareFaults;
import coilside.board.simulated.SimulatedBoards;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.shot.Step;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Clock;
import java.util.ArrayList;
import java.util.List;
import java.util.Random;
import java.util.concurrent.atomic.AtomicInteger;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

/**
 * The conformance run: a board that obeys its profile passes; one that is spoken to with a profile
 * that does not fit it is found out.
 */
@Timeout(value = 60, threadMode = Timeout.ThreadMode.SEPARATE_THREAD)
class ConformanceTest {
  /** Receiver noise of a few microvolts, and a count of the pulses that were played. */
  private static final class NoiseBench implements AnalogBench {
    final AtomicInteger pulses = new AtomicInteger();
    private final Random random = new Random(4);

    @Override
    public List<Trace> play(Shot shot) {
      List<Trace> out = new ArrayList<>();
      for (Step step : shot.flat()) {
        if (step instanceof Receive receive) {
          double[] re = new double[receive.points()];
          double[] im = new double[receive.points()];
          for (int k = 0; k < re.length; k++) {
            re[k] = 20e-6 * random.nextGaussian();
            im[k] = 20e-6 * random.nextGaussian();
          }
          out.add(new Trace(re, im));
        } else if (step instanceof coilside.shot.Pulse) {
          pulses.incrementAndGet();
        }
      }
      return out;
    }

    @Override
    public void idle(double seconds) {}

    @Override
    public double temperatureCelsius() {
      return 21;
    }
  }

  private static String text(String profile) throws IOException {
    return Files.readString(Path.of("device-profiles", profile + ".toml"));
  }

  private static DeviceProfile read(String toml) {
    var reading = ProfileReader.read("test.toml", toml.getBytes(StandardCharsets.UTF_8));
    assertTrue(reading.sound(), () -> reading.problems().toString());
    return reading.profile().orElseThrow();
  }

  private static List<Row> run(
      DeviceProfile board, DeviceProfile host, NoiseBench bench, boolean transmit, boolean paced) {
    Link link =
        SimulatedBoards.inProcess(
            new Firmware(board, new FirmwareAdc(board, bench), paced, FirmwareFaults.none()));
    return Conformance.run(host, link, System::nanoTime, Clock.systemUTC(), transmit, row -> {});
  }

  private static Row find(List<Row> rows, String tried) {
    return rows.stream()
        .filter(r -> r.tried().equals(tried))
        .findFirst()
        .orElseThrow(() -> new AssertionError(tried + " is not among " + rows));
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
  void aBoardThatObeysItsProfilePasses(String name) throws IOException {
    DeviceProfile profile = read(text(name));
    NoiseBench bench = new NoiseBench();
    List<Row> rows = run(profile, profile, bench, true, false);
    for (Row row : rows) {
      assertFalse(row.verdict() == Verdict.BAD, row.toString());
    }
    assertEquals(Verdict.GOOD, find(rows, "byte order and sign").verdict());
    assertEquals(Verdict.GOOD, find(rows, "recovery after garbage").verdict());
    assertEquals(
        Verdict.GOOD,
        find(
                rows,
                "one pulse, 10.0 us at amplitude "
                    + (name.equals("pulse-and-receive") ? "1.00" : "0.0500"))
            .verdict());
    assertEquals(1, bench.pulses.get());
    if (!name.equals("pulse-and-receive")) {
      assertEquals(Verdict.GOOD, find(rows, "two receive windows").verdict());
    }
    if (profile.limits().repeatLoops()) {
      assertEquals(Verdict.GOOD, find(rows, "three windows by a repeat").verdict());
    }
    if (profile.limits().reportsTemperature()) {
      assertEquals("21.00 degC", find(rows, "temperature").seen());
    }
  }

  @Test
  void aBoardThatConfirmsNothingIsCaughtByItsComplaints() throws IOException {
    String good = text("direct-sampling");
    String bad = good.replace("to = \"30MHz\"", "to = \"40MHz\"");
    List<Row> rows = run(read(good), read(bad), new NoiseBench(), false, false);
    assertEquals(Verdict.BAD, find(rows, "carrier 40 MHz").verdict(), rows.toString());
    assertEquals(Verdict.GOOD, find(rows, "carrier 1 MHz").verdict(), rows.toString());
    assertEquals(Verdict.GOOD, find(rows, "recovery after garbage").verdict());
  }

  @Test
  void nothingIsTransmittedUnlessTold() throws IOException {
    DeviceProfile profile = read(text("scpi-console"));
    NoiseBench bench = new NoiseBench();
    List<Row> rows = run(profile, profile, bench, false, false);
    assertEquals(0, bench.pulses.get());
    assertEquals(Verdict.SKIPPED, find(rows, "one pulse, 10.0 us at amplitude 0.0500").verdict());
    assertEquals(
        List.of("999.999 kHz", "30.000001 MHz"),
        rows.stream()
            .filter(r -> r.tried().startsWith("carrier") && r.expected().equals("refused"))
            .map(r -> r.tried().substring("carrier ".length()))
            .toList());
    assertEquals(
        List.of(),
        rows.stream()
            .filter(r -> r.expected().equals("refused") && r.verdict() != Verdict.GOOD)
            .toList());
  }

  @Test
  void aPacedBoardIsStoppedInMidRun() throws IOException {
    DeviceProfile profile = read(text("plain-line-console"));
    List<Row> rows = run(profile, profile, new NoiseBench(), false, true);
    assertEquals(Verdict.GOOD, find(rows, "abort in mid-run").verdict(), rows.toString());
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "byte_order = \"big\"|byte_order = \"little\"|byte order and sign",
        "to = \"30MHz\"|to = \"40MHz\"|carrier 40 MHz",
        "to = \"60dB\"|to = \"66dB\"|receiver gain 66 dB",
        "to = 65536|to = 131072|points 131072",
        "Coilside Examples|Another Board|identify",
      })
  void aProfileThatDoesNotFitIsFoundOut(String from, String to, String tried) throws IOException {
    String good = text("scpi-console");
    String bad = good.replaceFirst(java.util.regex.Pattern.quote(from), to);
    if (tried.equals("identify")) {
      bad = good.replace(from, to).replace("time_limit = \"1s\"", "time_limit = \"50ms\"");
    }
    List<Row> rows = run(read(good), read(bad), new NoiseBench(), false, false);
    assertEquals(Verdict.BAD, find(rows, tried).verdict(), rows.toString());
  }

  @Test
  void offsetBinaryWronglySaidIsFoundOut() throws IOException {
    String good = text("plain-line-console");
    String bad = good.replace("offset_binary = true", "offset_binary = false");
    List<Row> rows = run(read(good), read(bad), new NoiseBench(), false, false);
    assertEquals(Verdict.BAD, find(rows, "byte order and sign").verdict(), rows.toString());
  }
}
