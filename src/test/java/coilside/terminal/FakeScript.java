package coilside.terminal;

import coilside.bench.BenchSettings;
import coilside.bench.Conditions;
import coilside.bench.Finding;
import coilside.bench.LogRow;
import coilside.bench.Picture;
import coilside.bench.Progress;
import coilside.bench.Refusal;
import coilside.bench.Rung;
import coilside.bench.Work;
import coilside.quantity.Measured;
import coilside.quantity.Unit;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Repeat;
import coilside.shot.Shot;
import coilside.shot.Wait;
import coilside.signal.Fid;
import coilside.signal.Scan;
import java.time.Instant;
import java.time.InstantSource;
import java.util.ArrayDeque;
import java.util.Arrays;
import java.util.Deque;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalDouble;

/** Events of invented work, one at a time, shaped as a bench would send them. */
final class FakeScript {
  static final double CARRIER = 8_089_400;
  private static final double T90 = 11e-6;
  private final Work work;
  private final InstantSource clock;
  private final BenchSettings settings;
  private final boolean simulated;
  private final Deque<Progress> queue = new ArrayDeque<>();
  private final FakeData data = new FakeData();
  private boolean stopped;
  private int turn;

  FakeScript(Work work, InstantSource clock, BenchSettings settings, boolean simulated) {
    this.work = work;
    this.clock = clock;
    this.settings = settings;
    this.simulated = simulated;
    if (work instanceof Work.Ready) {
      for (Rung rung : Rung.values()) {
        measure(rung);
      }
      end();
    } else if (work instanceof Work.Measure m) {
      measure(m.rung());
      end();
    } else if (work instanceof Work.TakeFid f) {
      for (int i = 0; i < f.scans(); i++) {
        live(i, f.scans(), true);
      }
      end();
    }
  }

  boolean keepsPictures() {
    return work instanceof Work.Ready || work instanceof Work.Measure;
  }

  void stop() {
    stopped = true;
  }

  Progress next() {
    if (stopped) {
      return new Progress.WorkEnded(
          false, Optional.of("Stopped by the operator; finished scans are kept."));
    }
    if (queue.isEmpty()) {
      if (work instanceof Work.Live l) {
        live(turn, 0, l.transmit());
      } else {
        log(turn);
      }
      turn++;
    }
    return queue.poll();
  }

  private void end() {
    queue.add(new Progress.WorkEnded(true, Optional.of("The bench is ready: all rungs fresh.")));
  }

  private Shot shot(Rung rung, int i) {
    Receive window = new Receive(2048, 20e-6, 0);
    Wait dead = new Wait(60e-6);
    return switch (rung) {
      case NOISE -> new Shot(CARRIER, 40, 0.1, List.of(window));
      case NUTATION ->
          new Shot(CARRIER, 40, 1.2, List.of(new Pulse(4e-6 + i * 4e-6, 0, 1), dead, window));
      case T1 ->
          new Shot(
              CARRIER,
              40,
              1.2,
              List.of(
                  new Pulse(2 * T90, 0, 1),
                  new Wait(2e-3 * Math.pow(1.8, i)),
                  new Pulse(T90, Math.PI / 2, 1),
                  dead,
                  window));
      case T2 ->
          new Shot(
              CARRIER,
              40,
              1.2,
              List.of(
                  new Pulse(T90, 0, 1),
                  new Wait(1e-3),
                  new Repeat(
                      64,
                      List.of(
                          new Pulse(2 * T90, Math.PI / 2, 1),
                          new Wait(0.8e-3),
                          new Receive(32, 12.5e-6, 0),
                          new Wait(0.8e-3)))));
      default -> new Shot(CARRIER, 40, 0.9, List.of(new Pulse(T90, 0, 1), dead, window));
    };
  }

  private Scan scan(Fid fid) {
    return new Scan(List.of(fid), 0.47, 0, clock.instant(), 0.9, OptionalDouble.of(24.3), 0);
  }

  private void scanOf(Rung rung, int i, int of, Fid fid) {
    Shot shot = shot(rung, i);
    queue.add(new Progress.ShotStarted(shot, i, of, clock.instant()));
    queue.add(new Progress.ScanArrived(shot, scan(fid), i));
    queue.add(
        new Progress.Step(
            rung.id() + ": point " + (i + 1) + " of " + of, (i + 1.0) / of, (of - i - 1) * 1.3));
  }

  private void measure(Rung rung) {
    queue.add(new Progress.RungStarted(rung, clock.instant()));
    int n = rung == Rung.RESONANCE ? 40 : 12;
    double[] x = new double[0];
    double[] y = new double[0];
    for (int i = 0; i < n; i++) {
      Picture.Trace trace = data.trace(rung, i + 1, rung == Rung.T2STAR);
      scanOf(rung, i, n, trace.fid());
      switch (rung) {
        case NOISE, RINGDOWN, T2STAR -> queue.add(new Progress.PictureChanged(trace));
        default -> {
          x = Arrays.copyOf(x, i + 1);
          y = Arrays.copyOf(y, i + 1);
          x[i] = data.x(rung, i, n);
          y[i] = data.y(rung, x[i]) + 0.02 * data.noise();
          queue.add(new Progress.PictureChanged(data.curve(rung, x.clone(), y.clone(), n)));
        }
      }
    }
    queue.add(new Progress.RungEnded(finding(rung)));
  }

  private Finding finding(Rung rung) {
    Map<String, Measured> v = new LinkedHashMap<>();
    switch (rung) {
      case NOISE -> {
        v.put("noise_density", Measured.of(1.234e-9, 2.1e-11, Unit.VOLT_PER_ROOT_HERTZ));
        v.put("dc_offset", Measured.of(1.2e-6, 4e-8, Unit.VOLT));
      }
      case RESONANCE -> {
        v.put("larmor_frequency", Measured.of(8_089_432.17, 0.12, Unit.HERTZ));
        v.put("field", Measured.of(0.190_001_23, 3e-9, Unit.TESLA));
        v.put("snr", Measured.of(84.2, 1.1, Unit.ONE));
      }
      case GAIN -> {
        v.put("receiver_gain", Measured.withoutUncertainty(42, Unit.DECIBEL, "a setting"));
        v.put("peak_fraction", Measured.of(0.472, 0.004, Unit.ONE));
      }
      case RINGDOWN -> {
        v.put("ring_down_time", Measured.of(8.31e-6, 2.2e-7, Unit.SECOND));
        v.put("receive_delay", Measured.of(60e-6, 1e-6, Unit.SECOND));
      }
      case NUTATION -> {
        v.put("pulse_90", Measured.of(11.02e-6, 0.09e-6, Unit.SECOND));
        v.put("pulse_180", Measured.of(22.04e-6, 0.18e-6, Unit.SECOND));
        v.put("nutation_rate", Measured.of(22_690, 190, Unit.HERTZ));
        v.put("b1", Measured.of(5.329e-4, 4.4e-6, Unit.TESLA));
        v.put("b1_spread", Measured.of(0.031, 0.006, Unit.ONE));
      }
      case T1 -> {
        v.put("t1", Measured.of(0.2012, 0.0061, Unit.SECOND));
        v.put("repetition_time", Measured.of(1.006, 0.03, Unit.SECOND));
      }
      case T2STAR -> {
        v.put("t2_star", Measured.of(8.31e-3, 1.1e-4, Unit.SECOND));
        v.put("linewidth", Measured.of(38.3, 0.5, Unit.HERTZ));
        v.put("snr", Measured.of(84.2, 1.1, Unit.ONE));
        v.put("field_spread", Measured.of(4.73e-6, 6e-8, Unit.ONE));
      }
      case T2 -> {
        v.put("t2", Measured.of(0.1533, 0.004, Unit.SECOND));
        v.put("echo_spacing", Measured.withoutUncertainty(2e-3, Unit.SECOND, "a setting"));
      }
    }
    return finding(rung, v, Optional.empty());
  }

  Finding refused(Rung rung) {
    return finding(
        rung,
        Map.of(),
        Optional.of(
            new Refusal(
                "no resonance within 7.9 MHz to 8.3 MHz above 5 sigma after 64 scans; largest 2.1"
                    + " sigma at 8.012 MHz",
                List.of("the pulse does not reach the coil: check the cable to the coil"))));
  }

  private Finding finding(Rung rung, Map<String, Measured> v, Optional<Refusal> refusal) {
    Conditions conditions =
        new Conditions(
            "teaching bench",
            "0".repeat(64),
            CARRIER,
            settings.amplitude(),
            42,
            settings.sample(),
            settings.coil(),
            OptionalDouble.of(24.3));
    return new Finding(
        "finding-" + rung.id() + clock.instant(),
        rung,
        clock.instant(),
        14.2,
        12,
        v,
        List.of(),
        refusal,
        conditions,
        "2026-12-01T120000Z-" + rung.id(),
        Map.of(),
        simulated);
  }

  private void live(int i, int of, boolean transmit) {
    Rung rung = transmit ? Rung.T2STAR : Rung.NOISE;
    Picture.Trace trace = data.trace(rung, 1, transmit);
    Shot shot = shot(rung, 0);
    Instant now = clock.instant();
    queue.add(new Progress.ShotStarted(shot, i, of, now));
    queue.add(new Progress.ScanArrived(shot, scan(trace.fid()), i));
    queue.add(new Progress.PictureChanged(trace));
  }

  private void log(int i) {
    live(i, 0, true);
    Map<String, Measured> v = new LinkedHashMap<>();
    if (i % 17 != 16) {
      v.put(
          "larmor_frequency",
          Measured.of(CARRIER + 32 + 4 * Math.sin(i / 20.0) + 0.2 * data.noise(), 0.2, Unit.HERTZ));
      v.put("linewidth", Measured.of(38 + 0.3 * data.noise(), 0.3, Unit.HERTZ));
      v.put("amplitude", Measured.of(3e-5, 1e-7, Unit.VOLT));
    }
    Instant due = clock.instant();
    queue.add(
        new Progress.LogRowKept(
            new LogRow(
                "run",
                i,
                due,
                Instant.EPOCH.plusSeconds(30L * i),
                v,
                OptionalDouble.of(24 + 0.1 * Math.sin(i / 50.0)),
                0,
                v.isEmpty() ? "the board was silent" : "",
                "")));
  }
}
