package coilside.benchmark;

import coilside.board.Board;
import coilside.board.BoardException;
import coilside.board.driver.Boards;
import coilside.board.link.Link;
import coilside.board.link.LinkException;
import coilside.board.link.PortLocks;
import coilside.board.link.SerialLink;
import coilside.board.link.SerialSettings;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.ProfileReader;
import coilside.board.simulated.Firmware;
import coilside.board.simulated.FirmwareFaults;
import coilside.board.simulated.FirmwareReceiver;
import coilside.board.simulated.FirmwareServer;
import coilside.board.simulated.SimulatedBoards;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.signal.Scan;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Clock;
import java.time.InstantSource;
import java.util.List;
import java.util.concurrent.TimeUnit;
import org.openjdk.jmh.annotations.Benchmark;
import org.openjdk.jmh.annotations.BenchmarkMode;
import org.openjdk.jmh.annotations.Fork;
import org.openjdk.jmh.annotations.Level;
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
 * One scan of 4096 points from a board that needs no time: all of it is host, firmware and wire, so
 * that it bounds the host's time between scans from above. It should stay under 2 ms at the median.
 */
@State(Scope.Thread)
@BenchmarkMode(Mode.SampleTime)
@OutputTimeUnit(TimeUnit.MILLISECONDS)
@Warmup(iterations = 3, time = 1)
@Measurement(iterations = 5, time = 1)
@Fork(1)
public class ScanTurnaroundBenchmark {
  private static final int POINTS = 4096;

  @Param({"scpi-console", "plain-line-console", "radio-frame"})
  public String profileName;

  @Param({"memory", "pseudoTerminal"})
  public String over;

  private final Shot shot = new Shot(8.09e6, 20, 0, List.of(new Receive(POINTS, 10e-6, 0)));
  private Path folder;
  private FirmwareServer server;
  private Board board;

  /** Gives the same counts every time. */
  private static final class Constant implements FirmwareReceiver {
    private final List<Counts> counts = List.of(new Counts(new double[POINTS], new double[POINTS]));

    @Override
    public List<Counts> play(Shot shot) {
      return counts;
    }

    @Override
    public void idle(double seconds) {}

    @Override
    public double temperatureCelsius() {
      return 25;
    }
  }

  @Setup(Level.Trial)
  public void open() throws IOException, BoardException {
    DeviceProfile profile =
        ProfileReader.read(Path.of("device-profiles", profileName + ".toml"))
            .profile()
            .orElseThrow();
    folder = Files.createTempDirectory("turnaround");
    Firmware firmware = new Firmware(profile, new Constant(), false, FirmwareFaults.none());
    board = Boards.open(profile, link(firmware), System::nanoTime, Clock.systemUTC(), true);
  }

  private Link link(Firmware firmware) throws LinkException {
    if (over.equals("memory")) {
      return SimulatedBoards.inProcess(firmware);
    }
    server = FirmwareServer.onPseudoTerminal(firmware, System::nanoTime);
    return SerialLink.open(
        server.address(),
        SerialSettings.at(115_200),
        new PortLocks(folder, "a benchmark", InstantSource.system()));
  }

  @Benchmark
  public Scan scan() throws BoardException {
    return board.play(shot);
  }

  @TearDown(Level.Trial)
  public void close() throws IOException {
    board.close();
    if (server != null) {
      server.close();
    }
    try (var files = Files.list(folder)) {
      for (Path file : files.toList()) {
        Files.delete(file);
      }
    }
    Files.delete(folder);
  }
}
