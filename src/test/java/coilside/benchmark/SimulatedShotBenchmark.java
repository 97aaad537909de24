package coilside.benchmark;

import coilside.board.simulated.FirmwareReceiver.Counts;
import coilside.board.simulated.ScenarioReader;
import coilside.board.simulated.SimulatedBench;
import coilside.board.simulated.SimulatedDigitiser;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Repeat;
import coilside.shot.Shot;
import coilside.shot.Wait;
import java.util.List;
import java.util.concurrent.TimeUnit;
import org.openjdk.jmh.annotations.Benchmark;
import org.openjdk.jmh.annotations.BenchmarkMode;
import org.openjdk.jmh.annotations.Fork;
import org.openjdk.jmh.annotations.Measurement;
import org.openjdk.jmh.annotations.Mode;
import org.openjdk.jmh.annotations.OutputTimeUnit;
import org.openjdk.jmh.annotations.Param;
import org.openjdk.jmh.annotations.Scope;
import org.openjdk.jmh.annotations.Setup;
import org.openjdk.jmh.annotations.State;
import org.openjdk.jmh.annotations.Warmup;

/** A simulated shot: one FID of 16384 points (to be within 2 ms), and a train of 500 echoes. */
@State(Scope.Benchmark)
@BenchmarkMode(Mode.AverageTime)
@OutputTimeUnit(TimeUnit.MICROSECONDS)
@Warmup(iterations = 3, time = 1)
@Measurement(iterations = 5, time = 1)
@Fork(1)
public class SimulatedShotBenchmark {
  private static final Shot FID =
      new Shot(
          8.0895e6,
          20,
          0.6,
          List.of(new Pulse(40e-6, 0, 0.5), new Wait(50e-6), new Receive(16_384, 5e-6, 0)));
  private static final Shot TRAIN =
      new Shot(
          8.0895e6,
          20,
          0.6,
          List.of(
              new Pulse(40e-6, 0, 0.5),
              new Wait(440e-6),
              new Repeat(
                  500,
                  List.of(
                      new Pulse(80e-6, Math.PI / 2, 0.5),
                      new Wait(300e-6),
                      new Receive(64, 5e-6, 0),
                      new Wait(300e-6)))));

  @Param({"doped-water", "bad-day"})
  public String scenario;

  private SimulatedBench bench;

  @Setup
  public void switchOn() {
    bench = new SimulatedBench(ScenarioReader.named(scenario), SimulatedDigitiser.ideal(), 1);
  }

  @Benchmark
  public List<Counts> fid() {
    return bench.play(FID);
  }

  @Benchmark
  public List<Counts> train() {
    return bench.play(TRAIN);
  }
}
