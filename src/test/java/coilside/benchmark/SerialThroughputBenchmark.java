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
import java.util.concurrent.Semaphore;
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
 * Time of one megabyte through a pseudo-terminal: the serial link with its thread and queue against
 * a bare loop on the same library's reads. At the median the link should take at most 1.25 times as
 * long as the loop (80 % of its speed). Some megabytes are always under way, so that the line is
 * never idle.
 */
@State(Scope.Thread)
@BenchmarkMode(Mode.SampleTime)
@OutputTimeUnit(TimeUnit.MILLISECONDS)
@Warmup(iterations = 3, time = 2)
@Measurement(iterations = 5, time = 2)
@Fork(2)
public class SerialThroughputBenchmark {
  private static final int MEGABYTE = 1 << 20;
  private static final int UNDER_WAY = 4;

  @Param({"link", "bareLoop"})
  public String reader;

  private final byte[] into = new byte[1 << 16];
  private final Semaphore wanted = new Semaphore(UNDER_WAY);
  private Path folder;
  private PseudoTerminal board;
  private Thread feeder;
  private SerialLink link;
  private SerialPort port;
  private int have;

  @Setup(Level.Trial)
  public void open() throws IOException {
    folder = Files.createTempDirectory("throughput");
    board = PseudoTerminal.open(PseudoTerminal.WhenNobodyReads.STALL);
    link =
        SerialLink.open(
            board.path().toString(),
            SerialSettings.at(115_200),
            new PortLocks(folder, "a benchmark", InstantSource.system()));
    if (reader.equals("bareLoop")) {
      link.close();
      port = SerialPort.getCommPort(board.path().toString());
      port.setComPortTimeouts(SerialPort.TIMEOUT_READ_SEMI_BLOCKING, 100, 0);
      if (!port.openPort(0)) {
        throw new IOException("error " + port.getLastErrorCode());
      }
    }
    feeder = new Thread(this::feed, "feeder");
    feeder.setDaemon(true);
    feeder.start();
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

  /** One operation is one megabyte. */
  @Benchmark
  public int megabytes() throws LinkException {
    wanted.release();
    while (have < MEGABYTE) {
      have +=
          port == null
              ? link.receive(into, TimeUnit.SECONDS.toNanos(5))
              : port.readBytes(into, into.length);
    }
    have -= MEGABYTE;
    return have;
  }

  @TearDown(Level.Trial)
  public void close() throws IOException {
    board.close();
    link.close();
    if (port != null) {
      port.closePort();
    }
    try (var files = Files.list(folder)) {
      for (Path file : files.toList()) {
        Files.delete(file);
      }
    }
    Files.delete(folder);
  }
}
