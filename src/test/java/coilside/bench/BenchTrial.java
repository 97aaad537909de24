package coilside.bench;

import coilside.board.BoardException;
import coilside.board.profile.DeviceProfile;
import coilside.board.simulated.ObservedBoard;
import coilside.board.simulated.Scenario;
import coilside.quantity.Nucleus;
import coilside.shot.Shot;
import java.time.Instant;
import java.util.ArrayList;
import java.util.EnumMap;
import java.util.List;
import java.util.Map;
import java.util.OptionalDouble;

/**
 * A bench on a simulated board that a test may look behind: everything in memory, the clock is the
 * simulated time.
 */
final class BenchTrial implements AutoCloseable {
  static final Instant START = Instant.parse("2026-03-02T08:00:00Z");

  final ObservedBoard observed;
  final MemoryKeeper keeper = new MemoryKeeper();
  final Bench bench;
  final List<String> messages = new ArrayList<>();
  private final List<Double> larmorAtScans = new ArrayList<>();
  private final Map<Rung, Double> larmor = new EnumMap<>(Rung.class);
  private int scans;

  private BenchTrial(ObservedBoard observed, OptionalDouble expectedT1, int budget)
      throws KeepException {
    this.observed = observed;
    this.bench =
        new Bench(
            observed.board(),
            keeper,
            settings(observed.profile(), expectedT1, budget),
            this::now,
            (due, stop) -> {},
            this::listen);
  }

  static BenchTrial of(Scenario scenario, long seed) throws BoardException, KeepException {
    return of(scenario, "scpi-console", seed);
  }

  static BenchTrial of(Scenario scenario, String profile, long seed)
      throws BoardException, KeepException {
    return new BenchTrial(ObservedBoard.open(scenario, profile, seed), OptionalDouble.empty(), 400);
  }

  /** With an operator who says how long T1 is, rightly or not. */
  static BenchTrial told(Scenario scenario, String profile, double t1Seconds, long seed)
      throws BoardException, KeepException {
    return new BenchTrial(
        ObservedBoard.open(scenario, profile, seed), OptionalDouble.of(t1Seconds), 400);
  }

  /** On a board that differs from a shipped profile in one piece of its text. */
  static BenchTrial of(Scenario scenario, String profile, String text, String other, long seed)
      throws BoardException, KeepException {
    return new BenchTrial(
        ObservedBoard.open(scenario, profile, text, other, seed), OptionalDouble.empty(), 400);
  }

  static BenchSettings settings(DeviceProfile profile, OptionalDouble expectedT1, int budget) {
    return new BenchSettings(
        Nucleus.HYDROGEN_1,
        profile.operator().lowestResonanceHertz().orElse(profile.limits().carrierHertz().min()),
        profile.operator().highestResonanceHertz().orElse(profile.limits().carrierHertz().max()),
        profile.operator().amplitude(),
        "sample",
        profile.operator().coil(),
        expectedT1,
        0.01,
        0.05,
        0.02,
        budget);
  }

  private Instant now() {
    return START.plusNanos((long) (observed.nowSeconds() * 1e9));
  }

  private void listen(Progress event) {
    if (event instanceof Progress.RungStarted) {
      larmorAtScans.clear();
    } else if (event instanceof Progress.ScanArrived) {
      scans++;
      larmorAtScans.add(observed.truth().larmorHertz() + observed.truth().lineHertz());
    } else if (event instanceof Progress.Message m) {
      messages.add(m.text());
    } else if (event instanceof Progress.RungEnded ended && !ended.finding().refused()) {
      // The scans of the capture are the last ones played.
      Capture capture = capture(ended.finding());
      int from = larmorAtScans.size() - capture.scans().size();
      double sum = 0;
      int pulsed = 0;
      for (int i = 0; i < capture.scans().size(); i++) {
        Shot shot = capture.shots().get(i);
        if (!shot.receiveOnly()) {
          sum += larmorAtScans.get(from + i);
          pulsed++;
        }
      }
      larmor.put(ended.finding().rung(), sum / Math.max(1, pulsed));
    }
  }

  /** The capture that a finding came from. */
  Capture capture(Finding finding) {
    return keeper.capture(finding.capture()).orElseThrow();
  }

  /** All scans played so far. */
  int scans() {
    return scans;
  }

  Finding newest(Rung rung) {
    return keeper.newest(rung).orElseThrow();
  }

  /** What the scenario says this value was while it was measured. */
  double truth(Rung rung, String value) {
    double amplitude = bench.settings().amplitude();
    return switch (value) {
      case "larmor_frequency" -> larmor.get(rung);
      case "pulse_90" -> observed.truth().pulse90Seconds(amplitude);
      case "t1" -> observed.truth().t1Seconds();
      case "t2" -> observed.truth().t2Seconds();
      case "t2_star" -> observed.truth().t2StarSeconds();
      case "noise_density" -> observed.truth().noiseDensity() * observed.channelGain();
      case "ring_down_time" -> observed.ringSeconds();
      case "amplitude" -> observed.truth().signalVolts();
      case "b1_spread" -> observed.scenario().coil().b1Spread();
      default -> throw new IllegalArgumentException(value);
    };
  }

  /** (value - truth)/u. */
  double deviation(Rung rung, String value) {
    var m = newest(rung).value(value);
    return (m.value() - truth(rung, value)) / m.u();
  }

  @Override
  public void close() {
    observed.close();
  }
}
