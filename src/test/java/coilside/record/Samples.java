package coilside.record;

import coilside.bench.Capture;
import coilside.bench.Conditions;
import coilside.bench.Finding;
import coilside.bench.LogRow;
import coilside.bench.Refusal;
import coilside.bench.Rung;
import coilside.quantity.Measured;
import coilside.quantity.Unit;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Repeat;
import coilside.shot.Shot;
import coilside.shot.Step;
import coilside.shot.Wait;
import coilside.signal.Fid;
import coilside.signal.Scan;
import java.time.Instant;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalDouble;
import java.util.Random;

/** Findings, log rows and captures for tests: every field used, awkward values among them. */
final class Samples {
  static final Instant START = Instant.parse("2026-11-03T09:15:30.123456789Z");

  private Samples() {}

  static Conditions conditions(String sample) {
    return new Conditions(
        "Teaching console 3",
        "ab".repeat(32),
        8.0895e6,
        0.5,
        37.5,
        sample,
        "6 mm solenoid, Q 60",
        OptionalDouble.of(23.4));
  }

  static Finding finding(String id, Rung rung, String capture) {
    Map<String, Measured> values = new LinkedHashMap<>();
    values.put("pulse_90", Measured.of(1.0999999999999999e-5, 9e-8, Unit.SECOND));
    values.put("nutation_rate", Measured.of(22727.272727272728, 186, Unit.HERTZ));
    values.put("dc_offset", Measured.of(-0.0, 0, Unit.VOLT));
    values.put("tiny", Measured.of(Double.MIN_VALUE, Double.MAX_VALUE, Unit.ONE));
    values.put("nothing", Measured.withoutUncertainty(Double.NaN, Unit.ONE, "not determined"));
    return new Finding(
        id,
        rung,
        START,
        1.9,
        14,
        values,
        List.of("Drop; of\nink", "second"),
        Optional.empty(),
        conditions("doped water é \"quoted\""),
        capture,
        Map.of(Rung.RESONANCE, "r-1", Rung.GAIN, "g-1"),
        true);
  }

  static Finding refused(String id, Rung rung) {
    return new Finding(
        id,
        rung,
        START.plusSeconds(60),
        Double.NaN,
        64,
        Map.of(),
        List.of(),
        Optional.of(
            new Refusal(
                "no resonance within 7.9-8.3 MHz above 5 sigma after 64 scans",
                List.of("no sample in the coil: put one in", "coil off tune: look at its Q"))),
        new Conditions(
            "Teaching console 3", "", Double.NaN, 0.5, 0, "", "", OptionalDouble.empty()),
        "",
        Map.of(),
        false);
  }

  static LogRow row(String run, long number, String capture) {
    Map<String, Measured> values = new LinkedHashMap<>();
    values.put("larmor_frequency", Measured.of(8089500.125 + number, 0.25, Unit.HERTZ));
    values.put("field", Measured.of(0.19, 1e-8, Unit.TESLA));
    values.put("amplitude", Measured.of(1.25e-5, 2e-8, Unit.VOLT));
    values.put("linewidth", Measured.of(35.5, 0.5, Unit.HERTZ));
    values.put("t2_star", Measured.of(0.009, 1e-4, Unit.SECOND));
    values.put("snr", Measured.withoutUncertainty(41, Unit.ONE, "one scan"));
    return new LogRow(
        run,
        number,
        START.plusSeconds(30 * number),
        START.plusSeconds(30 * number).plusMillis(3),
        values,
        OptionalDouble.of(24.5),
        1,
        "",
        capture);
  }

  static LogRow gap(String run, long number) {
    return new LogRow(
        run,
        number,
        START.plusSeconds(30 * number),
        START.plusSeconds(30 * number),
        Map.of(),
        OptionalDouble.empty(),
        0,
        "link lost, \"again\" after 12 s",
        "");
  }

  /** A nutation-like capture: two shots, several scans, an echo train with two windows in it. */
  static Capture capture(String purpose, String sample, int scans, int points, long seed) {
    Random random = new Random(seed);
    double dwell = 1e-5;
    Shot one =
        new Shot(
            8.0895e6,
            37.5,
            0.5,
            List.of(new Pulse(11e-6, 0, 0.5), new Wait(2e-4), new Receive(points, dwell, 0)));
    Shot train =
        new Shot(
            8.0895e6,
            37.5,
            1.25,
            List.of(
                new Pulse(11e-6, 0, 0.5),
                new Wait(1e-3),
                new Repeat(
                    2,
                    List.of(
                        new Pulse(22e-6, Math.PI / 2, 0.5),
                        new Wait(1e-3),
                        new Receive(points, dwell, Math.PI)))));
    List<Shot> shots = new ArrayList<>();
    List<Scan> played = new ArrayList<>();
    for (int i = 0; i < scans; i++) {
      Shot shot = i % 2 == 0 ? one : train;
      List<Fid> windows = new ArrayList<>();
      for (Step step : shot.flat()) {
        if (step instanceof Receive) {
          windows.add(noisy(random, points, dwell));
        }
      }
      shots.add(shot);
      played.add(
          new Scan(
              windows,
              0.1 * random.nextDouble(),
              i == 1 ? 3 : 0,
              START.plusMillis(1700L * i),
              shot.restSeconds() + 1e-3 * random.nextDouble(),
              i % 2 == 0 ? OptionalDouble.of(23 + random.nextDouble()) : OptionalDouble.empty(),
              i));
    }
    return new Capture(
        purpose,
        START,
        shots,
        played,
        conditions(sample),
        Map.of("t1_expected_seconds", "0.12", "note", "line\nbreak \u0007 bell"),
        "Teaching console 3",
        true);
  }

  private static Fid noisy(Random random, int points, double dwell) {
    double[] re = new double[points];
    double[] im = new double[points];
    for (int k = 0; k < points; k++) {
      re[k] = 1e-5 * random.nextGaussian();
      im[k] = 1e-5 * random.nextGaussian();
    }
    return new Fid(re, im, dwell, 2e-4 + 5.5e-6, 8.0895e6);
  }
}
