package coilside.benchmark;

import coilside.board.Board;
import coilside.board.driver.Boards;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.ProfileReader;
import coilside.board.simulated.Firmware;
import coilside.board.simulated.FirmwareFaults;
import coilside.board.simulated.FirmwareReceiver;
import coilside.board.simulated.SimulatedBoards;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.shot.Wait;
import coilside.signal.Scan;
import java.nio.file.Path;
import java.time.Clock;
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
import org.openjdk.jmh.annotations.TearDown;
import org.openjdk.jmh.annotations.Warmup;

/**
 * A 4096-point scan of a board in this process whose bench takes no time: guard, driver, dialect
 * and the simulated firmware together. The limit is 2 ms between scans for the host alone.
 */
@State(Scope.Benchmark)
@BenchmarkMode(Mode.SampleTime)
@OutputTimeUnit(TimeUnit.MICROSECONDS)
@Warmup(iterations = 3, time = 1)
@Measurement(iterations = 5, time = 1)
@Fork(1)
public class ScanOverheadBenchmark {
  @Param({"scpi-console", "plain-line-console", "radio-frame", "direct-sampling"})
  public String profileName;

  private Board board;
  private final Shot shot =
      new Shot(
          8.09e6,
          20,
          0.5,
          List.of(new Pulse(10e-6, 0, 0.5), new Wait(20e-6), new Receive(4096, 10e-6, 0)));

  @Setup
  public void open() throws Exception {
    DeviceProfile profile =
        ProfileReader.read(Path.of("device-profiles", profileName + ".toml"))
            .profile()
            .orElseThrow();
    FirmwareReceiver.Counts window =
        new FirmwareReceiver.Counts(new double[4096], new double[4096]);
    FirmwareReceiver still =
        new FirmwareReceiver() {
          @Override
          public List<Counts> play(Shot played) {
            return List.of(window);
          }

          @Override
          public void idle(double seconds) {}

          @Override
          public double temperatureCelsius() {
            return 20;
          }
        };
    board =
        Boards.open(
            profile,
            SimulatedBoards.inProcess(new Firmware(profile, still, false, FirmwareFaults.none())),
            System::nanoTime,
            Clock.systemUTC(),
            true);
  }

  @TearDown
  public void close() {
    board.close();
  }

  @Benchmark
  public Scan scan() throws Exception {
    return board.play(shot);
  }
}
