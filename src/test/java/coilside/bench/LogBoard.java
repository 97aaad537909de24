package coilside.bench;

import coilside.board.Board;
import coilside.board.BoardException;
import coilside.board.BoardIdentity;
import coilside.board.BoardLimits;
import coilside.board.BoardLimits.Range;
import coilside.quantity.Measured;
import coilside.quantity.Unit;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.shot.Step;
import coilside.signal.Fid;
import coilside.signal.Scan;
import java.time.Duration;
import java.time.Instant;
import java.time.InstantSource;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalDouble;
import java.util.Random;
import java.util.function.BooleanSupplier;
import java.util.function.DoubleUnaryOperator;

/**
 * A board for logs that takes no time: an exponential decay in white noise after each pulse, on a
 * clock of its own that a shot moves on by its length. It fails as it is told to.
 */
final class LogBoard implements Board, Waiter, InstantSource {
  static final Instant START = Instant.parse("2026-03-02T08:00:00Z");
  static final double AMPLITUDE = 50e-6;
  static final double T2_STAR = 6e-3;
  static final double NOISE_DENSITY = 3e-9;

  /** What goes wrong with a shot. */
  interface Trouble {
    void at(int shot) throws BoardException;
  }

  private static final BoardLimits LIMITS =
      new BoardLimits(
          new Range(1e6, 30e6, 1),
          new Range(0, 60, 1),
          new Range(1e-6, 200e-6, 0.1e-6),
          new Range(0, 1, 0.01),
          new Range(0, 100, 1e-6),
          new Range(1e-6, 1e-3, 0.1e-6),
          1,
          512,
          1,
          100,
          1,
          1,
          0.5,
          1,
          true,
          true,
          false,
          true,
          true);

  private final Random random = new Random(4711);
  long nanos = 1_000_000_000L;
  Duration skew = Duration.ZERO;
  DoubleUnaryOperator larmor = seconds -> 8.09e6;
  DoubleUnaryOperator celsius = seconds -> 25;
  boolean sample = true;
  boolean brokenThermometer;
  Trouble trouble = shot -> {};
  int shots;
  double lastCarrier;
  Runnable afterShot = () -> {};

  double seconds() {
    return nanos * 1e-9 - 1;
  }

  @Override
  public Instant instant() {
    return START.plusNanos(nanos - 1_000_000_000L).plus(skew);
  }

  @Override
  public long nanos() {
    return nanos;
  }

  @Override
  public void await(long due, BooleanSupplier stop) {
    nanos = Math.max(nanos, due);
  }

  @Override
  public BoardIdentity identity() {
    return new BoardIdentity("log board", "log-board", "00", "nowhere", false);
  }

  @Override
  public BoardLimits limits() {
    return LIMITS;
  }

  @Override
  public boolean armed() {
    return true;
  }

  @Override
  public void arm() {}

  @Override
  public void disarm() {}

  @Override
  public Scan play(Shot shot) throws BoardException {
    shots++;
    nanos += Math.round(1e9 * shot.seconds());
    trouble.at(shots);
    lastCarrier = shot.carrierHertz();
    Receive window = null;
    Pulse pulse = null;
    double start = 0;
    for (Step step : shot.flat()) {
      if (step instanceof Pulse p) {
        pulse = p;
        start = p.seconds() / 2;
      } else if (step instanceof Receive r) {
        window = r;
        break;
      } else {
        start += step.seconds();
      }
    }
    int n = window.points();
    double dwell = window.dwellSeconds();
    double offset = larmor.applyAsDouble(seconds()) - shot.carrierHertz();
    boolean seen = sample && pulse != null && Math.abs(offset) < 0.45 / dwell;
    // Complex white noise of this density, half of its power in each part.
    double noise = NOISE_DENSITY * Math.sqrt(1 / dwell) / Math.sqrt(2);
    double[] re = new double[n];
    double[] im = new double[n];
    for (int k = 0; k < n; k++) {
      double t = start + k * dwell;
      double a = seen ? AMPLITUDE * Math.exp(-t / T2_STAR) : 0;
      double phase = 2 * Math.PI * offset * t + (pulse == null ? 0 : pulse.phaseRadians()) - 1;
      re[k] = a * Math.cos(phase) + noise * random.nextGaussian();
      im[k] = a * Math.sin(phase) + noise * random.nextGaussian();
    }
    afterShot.run();
    return new Scan(
        List.of(new Fid(re, im, dwell, start, shot.carrierHertz())),
        0.3,
        0,
        instant(),
        shot.restSeconds(),
        OptionalDouble.empty(),
        0);
  }

  @Override
  public OptionalDouble temperature() throws BoardException {
    if (brokenThermometer) {
      throw new BoardException.BadAnswer("the board says its temperature is 'nan' degC");
    }
    return OptionalDouble.of(celsius.applyAsDouble(seconds()));
  }

  @Override
  public void stop() {}

  @Override
  public void close() {}

  static BenchSettings settings() {
    return new BenchSettings(
        coilside.quantity.Nucleus.HYDROGEN_1,
        7.9e6,
        8.3e6,
        0.5,
        "doped water",
        "coil",
        OptionalDouble.empty(),
        0.01,
        0.05,
        0.02,
        64);
  }

  /** Tells a keeper the rungs a log rests on. */
  static void climb(Keeper keeper) throws KeepException {
    known(keeper, Rung.NOISE, "noise_density", NOISE_DENSITY, Unit.VOLT_PER_ROOT_HERTZ);
    known(keeper, Rung.RESONANCE, "larmor_frequency", 8.09e6, Unit.HERTZ);
    known(keeper, Rung.GAIN, "receiver_gain", 30, Unit.DECIBEL);
    known(keeper, Rung.RINGDOWN, "receive_delay", 80e-6, Unit.SECOND);
    known(keeper, Rung.NUTATION, "pulse_90", 20e-6, Unit.SECOND);
    known(keeper, Rung.T1, "repetition_time", 0.1, Unit.SECOND);
    known(keeper, Rung.T2STAR, "t2_star", T2_STAR, Unit.SECOND);
  }

  private static void known(Keeper keeper, Rung rung, String name, double value, Unit unit)
      throws KeepException {
    Map<String, Measured> values =
        rung == Rung.NUTATION
            ? Map.of(
                name,
                Measured.of(value, 1e-3 * value, unit),
                "nutation_rate",
                Measured.of(0.25 / value, 1e-3 / value, Unit.HERTZ))
            : Map.of(name, Measured.of(value, 1e-6 * value, unit));
    keeper.keep(
        new Finding(
            "known-" + rung.id(),
            rung,
            START,
            1,
            4,
            values,
            List.of(),
            Optional.empty(),
            new Conditions(
                "log board", "00", 8.09e6, 0.5, 30, "doped water", "coil", OptionalDouble.of(25)),
            "",
            Map.of(),
            false));
  }
}
