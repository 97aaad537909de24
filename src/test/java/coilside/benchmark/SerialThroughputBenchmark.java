package coilside.benchmark;

import coilside.board.link.LinkException;
import coilside.board.link.PortLocks;
import coilside.board.link.PseudoTerminal;
import coilside.board.link.SerialLink;
import coilside.board.link.SerialSettings;
import com.fazecast.jSerialComm.SerialPort;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.InstantSource;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.Semaphore;
import java.util.concurrent.TimeUnit;
import org.openjdk.jmh.annotations.AuxCounters;
import org.openjdk.jmh.annotations.Benchmark;
import org.openjdk.jmh.annotations.BenchmarkMode;
import org.openjdk.jmh.annotations.Fork;
import org.openjdk.jmh.annotations.Level;
import org.openjdk.jmh.annotations.Measurement;
import org.openjdk.jmh.annotations.Mode;
import org.openjdk.jmh.annotations.OutputTimeUnit;
import org.openjdk.jmh.annotations.Scope;
import org.openjdk.jmh.annotations.Setup;
import org.openjdk.jmh.annotations.State;
import org.openjdk.jmh.annotations.TearDown;
import org.openjdk.jmh.annotations.Warmup;

/**
 * Reading through a pseudo-terminal: the serial link with its thread and queue, and a bare loop on
 * the same library's reads, eight megabytes in turn. {@code percentOfBareLoop} should be 80 or
 * more; it is the ratio of the medians, so that whatever else the computer does meets both alike.
 */
@State(Scope.Thread)
@BenchmarkMode(Mode.SampleTime)
@OutputTimeUnit(TimeUnit.MILLISECONDS)
@Warmup(iterations = 1, time = 5)
@Measurement(iterations = 1, time = 20)
@Fork(1)
public class SerialThroughputBenchmark {
  private static final int MEGABYTE = 1 << 20;
  private static final int IN_TURN = 8;

  private final byte[] into = new byte[1 << 16];
  private Path folder;
  private Feeder linkFeeder;
  private Feeder bareFeeder;
  private SerialLink link;
  private SerialPort port;

  /** What is to be read of the two. */
  @State(Scope.Thread)
  @AuxCounters(AuxCounters.Type.EVENTS)
  public static class Speeds {
    private final List<Double> link = new ArrayList<>();
    private final List<Double> bare = new ArrayList<>();

    @Setup(Level.Iteration)
    public void forget() {
      link.clear();
      bare.clear();
    }

    private static double median(List<Double> seconds) {
      return seconds.stream().sorted().skip(seconds.size() / 2).findFirst().orElse(Double.NaN);
    }

    public double linkMegabytesPerSecond() {
      return IN_TURN / median(link);
    }

    public double bareMegabytesPerSecond() {
      return IN_TURN / median(bare);
    }

    public double percentOfBareLoop() {
      return 100 * median(bare) / median(link);
    }
  }

  /** A board that sends as many megabytes as are wanted. */
  private static final class Feeder {
    private final PseudoTerminal board;
    private final Semaphore wanted = new Semaphore(0);

    Feeder() throws LinkException {
      board = PseudoTerminal.open(PseudoTerminal.WhenNobodyReads.STALL);
      Thread thread = new Thread(this::feed, "feeder");
      thread.setDaemon(true);
      thread.start();
    }

    private void feed() {
      byte[] some = new byte[MEGABYTE];
      try {
        while (true) {
          wanted.acquireUninterruptibly();
          board.send(some);
        }
      } catch (LinkException e) {
        // The trial is over.
      }
    }
  }

  @Setup(Level.Trial)
  public void open() throws IOException {
    folder = Files.createTempDirectory("throughput");
    linkFeeder = new Feeder();
    bareFeeder = new Feeder();
    link =
        SerialLink.open(
            linkFeeder.board.path().toString(),
            SerialSettings.at(115_200),
            new PortLocks(folder, "a benchmark", InstantSource.system()));
    port = SerialPort.getCommPort(bareFeeder.board.path().toString());
    port.setComPortTimeouts(SerialPort.TIMEOUT_READ_SEMI_BLOCKING, 100, 0);
    if (!port.openPort(0)) {
      throw new IOException("error " + port.getLastErrorCode());
    }
  }

  @Benchmark
  public void inTurn(Speeds speeds) throws LinkException {
    long from = System.nanoTime();
    linkFeeder.wanted.release(IN_TURN);
    for (int have = 0; have < IN_TURN * MEGABYTE; ) {
      have += link.receive(into, TimeUnit.SECONDS.toNanos(5));
    }
    long between = System.nanoTime();
    bareFeeder.wanted.release(IN_TURN);
    for (int have = 0; have < IN_TURN * MEGABYTE; ) {
      have += port.readBytes(into, into.length);
    }
    speeds.link.add((between - from) * 1e-9);
    speeds.bare.add((System.nanoTime() - between) * 1e-9);
  }

  @TearDown(Level.Trial)
  public void close() throws IOException {
    linkFeeder.board.close();
    bareFeeder.board.close();
    link.close();
    port.closePort();
    try (var files = Files.list(folder)) {
      for (Path file : files.toList()) {
        Files.delete(file);
      }
    }
    Files.delete(folder);
  }
}
