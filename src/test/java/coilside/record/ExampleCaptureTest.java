package coilside.record;

import static org.junit.jupiter.api.Assertions.assertArrayEquals;
import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;

import coilside.bench.Capture;
import coilside.bench.Conditions;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.shot.Wait;
import coilside.signal.Fid;
import coilside.signal.Scan;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Instant;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.OptionalDouble;
import java.util.Random;
import org.junit.jupiter.api.Test;

/**
 * Holds the example capture of the captures folder to the writer of today: made anew, it must have
 * the same bytes (non-regression). With {@code -Dcoilside.example.write=true} it is written
 * instead.
 */
class ExampleCaptureTest {
  private static final Path BASE = Path.of("captures", "example-doped-water");
  private static final double CARRIER_HERTZ = 8.0895e6;
  private static final double OFFSET_HERTZ = 120;
  private static final double T2_STAR_SECONDS = 0.009;
  private static final double AMPLITUDE_VOLTS = 1.2e-5;
  private static final double SIGMA_VOLTS = 2.4e-7;
  private static final double DWELL_SECONDS = 1e-4;
  private static final int POINTS = 512;
  private static final int SCANS = 4;

  /** One line of a synthetic FID in white noise: the model is what the description says it is. */
  private static Capture example() {
    Random random = new Random(190);
    Instant started = Instant.parse("2026-11-03T09:15:30Z");
    Shot shot =
        new Shot(
            CARRIER_HERTZ,
            36,
            0.6,
            List.of(
                new Pulse(11e-6, 0, 0.5), new Wait(1e-4), new Receive(POINTS, DWELL_SECONDS, 0)));
    double start = 11e-6 / 2 + 1e-4;
    List<Shot> shots = new ArrayList<>();
    List<Scan> scans = new ArrayList<>();
    for (int i = 0; i < SCANS; i++) {
      double[] re = new double[POINTS];
      double[] im = new double[POINTS];
      for (int k = 0; k < POINTS; k++) {
        double t = start + k * DWELL_SECONDS;
        double a = AMPLITUDE_VOLTS * StrictMath.exp(-t / T2_STAR_SECONDS);
        double phase = 2 * Math.PI * OFFSET_HERTZ * t + 0.4;
        re[k] = a * StrictMath.cos(phase) + SIGMA_VOLTS * random.nextGaussian();
        im[k] = a * StrictMath.sin(phase) + SIGMA_VOLTS * random.nextGaussian();
      }
      Fid fid = new Fid(re, im, DWELL_SECONDS, start, CARRIER_HERTZ);
      shots.add(shot);
      scans.add(
          new Scan(
              List.of(fid),
              0.42,
              0,
              started.plusMillis(652L * i),
              0.6,
              OptionalDouble.of(23.4),
              0));
    }
    return new Capture(
        "fid",
        started,
        shots,
        scans,
        new Conditions(
            "synthetic example, no board",
            "0".repeat(64),
            CARRIER_HERTZ,
            0.5,
            36,
            "doped water",
            "6 mm solenoid",
            OptionalDouble.of(23.4)),
        Map.of("note", "synthetic: one exponential decay in white noise"),
        "synthetic example, no board",
        true);
  }

  @Test
  void theExampleIsWhatTheWriterMakesToday() throws Exception {
    Capture capture = example();
    if (Boolean.getBoolean("coilside.example.write")) {
      FileWriter writer = new FileWriter();
      String sha512 =
          writer.writeData(CaptureReader.sibling(BASE, ".sigmf-data"), CaptureData.of(capture));
      writer.writeText(
          CaptureReader.sibling(BASE, ".sigmf-meta"), CaptureMetadata.text(capture, sha512));
    }
    assertEquals(List.of(), CaptureChecks.problems(BASE));
    Capture read = CaptureReader.read(BASE);
    CaptureTest.assertSame(capture, read);
    String sha512 = new FileWriter().writeData(scratch(), CaptureData.of(capture));
    assertEquals(
        CaptureMetadata.text(capture, sha512),
        Files.readString(CaptureReader.sibling(BASE, ".sigmf-meta")));
    assertFalse(read.scans().get(0).fid().re(0) == 0);
    assertArrayEquals(capture.scans().get(3).fid().im(), read.scans().get(3).fid().im());
  }

  private static Path scratch() throws java.io.IOException {
    Path file = Files.createTempFile("example-", ".sigmf-data");
    file.toFile().deleteOnExit();
    return file;
  }
}
