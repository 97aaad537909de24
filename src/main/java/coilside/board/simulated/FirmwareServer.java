package coilside.board.simulated;

import coilside.board.link.Link;
import coilside.board.link.LinkException;
import coilside.board.link.PseudoTerminal;
import coilside.board.link.TcpListener;
import java.util.Optional;
import java.util.concurrent.atomic.AtomicBoolean;
import java.util.function.LongSupplier;

/**
 * Serves one simulated board, on a daemon thread of its own: on a pseudo-terminal, on TCP (one
 * program at a time; it may come and go, a second one is told who is there and turned away), or
 * over a link inside this program. Closing it stops the board and lets the line go.
 */
public final class FirmwareServer implements AutoCloseable {
  private static final long LONGEST_WAIT_NANOS = 200_000_000L;

  private final Firmware firmware;
  private final LongSupplier nanos;
  private final String address;
  private final AtomicBoolean closed = new AtomicBoolean();
  private final AutoCloseable line;
  private final Thread thread;
  private volatile Link serving;

  /** What the thread does. */
  private interface Job {
    void run() throws LinkException;
  }

  private FirmwareServer(
      Firmware firmware, LongSupplier nanos, String address, AutoCloseable line, Link link) {
    this.firmware = firmware;
    this.nanos = nanos;
    this.address = address;
    this.line = line;
    this.serving = link;
    Job job = line instanceof TcpListener listener ? () -> takeTurns(listener) : () -> serve(link);
    this.thread = new Thread(() -> work(job), "coilside simulated board on " + address);
    this.thread.setDaemon(true);
  }

  /** Serves on a new pseudo-terminal. */
  public static FirmwareServer onPseudoTerminal(Firmware firmware, LongSupplier nanos)
      throws LinkException {
    PseudoTerminal terminal = PseudoTerminal.open(PseudoTerminal.WhenNobodyReads.DROP);
    return started(
        new FirmwareServer(firmware, nanos, terminal.path().toString(), terminal, terminal));
  }

  /**
   * Serves on TCP.
   *
   * @param host one of our own addresses; loopback unless the operator says otherwise
   * @param port 0 takes any free one
   */
  public static FirmwareServer onTcp(Firmware firmware, String host, int port, LongSupplier nanos)
      throws LinkException {
    TcpListener listener = TcpListener.open(host, port);
    return started(new FirmwareServer(firmware, nanos, listener.address(), listener, null));
  }

  /**
   * Serves over a link: the board's end of it, which belongs to the server from here on.
   *
   * @param nanos a steady clock, ns
   */
  public static FirmwareServer over(Link link, Firmware firmware, LongSupplier nanos) {
    return started(new FirmwareServer(firmware, nanos, link.description(), link, link));
  }

  private static FirmwareServer started(FirmwareServer server) {
    server.thread.start();
    return server;
  }

  /** Where programs reach it: "/dev/pts/4", "127.0.0.1:5025". */
  public String address() {
    return address;
  }

  private void work(Job job) {
    try {
      job.run();
    } catch (LinkException e) {
      // The line is gone or was closed: nobody is left to serve.
    } finally {
      firmware.disconnect();
      close();
    }
  }

  private void takeTurns(TcpListener listener) throws LinkException {
    FirmwareDoor door = new FirmwareDoor(listener);
    while (!closed.get()) {
      Optional<Link> caller = door.next();
      if (caller.isEmpty()) {
        continue;
      }
      serving = caller.get();
      try (Link link = caller.get()) {
        serve(link);
      } catch (LinkException e) {
        // This caller went away; the next may come.
      } finally {
        firmware.disconnect();
        door.left();
      }
    }
  }

  private void serve(Link link) throws LinkException {
    byte[] heard = new byte[1 << 14];
    firmware.connect();
    while (!closed.get()) {
      // Between any two answers the board listens, so that it can be told to stop.
      long now = nanos.getAsLong();
      long wait = firmware.nextNanos(now) - now;
      int n = link.receive(heard, Math.max(0, Math.min(wait, LONGEST_WAIT_NANOS)));
      if (n > 0) {
        firmware.hear(heard, 0, n, nanos.getAsLong());
      }
      Optional<byte[]> answer = firmware.say(nanos.getAsLong());
      if (answer.isPresent()) {
        link.send(answer.get());
      }
    }
  }

  /** Waits until it is served no more; for a program that does nothing else. */
  public void join() throws InterruptedException {
    thread.join();
  }

  /** Stops the board and lets the line go; may be called twice, from any thread. */
  @Override
  public void close() {
    if (closed.compareAndSet(false, true)) {
      Link link = serving;
      if (link != null) {
        link.close();
      }
      try {
        line.close();
      } catch (Exception e) {
        // It is being given up.
      }
    }
  }
}
