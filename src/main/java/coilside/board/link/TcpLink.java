package coilside.board.link;

import coilside.board.link.LinkException.Kind;
import java.io.IOException;
import java.io.InputStream;
import java.io.OutputStream;
import java.net.ConnectException;
import java.net.InetSocketAddress;
import java.net.NoRouteToHostException;
import java.net.Socket;
import java.net.SocketTimeoutException;
import java.nio.file.Path;
import java.time.Duration;

/** A link over a raw TCP connection. Small writes leave at once (no gathering of packets). */
public final class TcpLink extends QueuedLink {
  private static final int SLICE_BYTES = 1 << 16;

  private final AutoCloseable held;
  private final Socket socket;
  private final InputStream in;
  private final OutputStream out;

  private TcpLink(
      Socket socket, String description, Duration writeLimit, int queueBytes, AutoCloseable held)
      throws IOException {
    super(description, writeLimit, queueBytes);
    this.held = held;
    this.socket = socket;
    this.in = socket.getInputStream();
    this.out = socket.getOutputStream();
  }

  /**
   * Connects with the usual limits, and holds the board as a serial port is held.
   *
   * @param locks where to say that we hold it
   * @throws LinkException held by another program, unknown host, nobody listening, out of reach
   */
  public static TcpLink open(String host, int port, PortLocks locks) throws LinkException {
    PortLocks.Held held = locks.take(Path.of(HostPort.text(host, port)));
    TcpLink link = null;
    try {
      link = open(host, port, Duration.ofSeconds(5), WRITE_LIMIT, QUEUE_BYTES, held);
      return link;
    } finally {
      if (link == null) {
        held.close();
      }
    }
  }

  /** Connects with the usual limits: 5 s to connect, 5 s to write. */
  public static TcpLink open(String host, int port) throws LinkException {
    return open(host, port, Duration.ofSeconds(5), WRITE_LIMIT, QUEUE_BYTES);
  }

  /**
   * Connects.
   *
   * @param host name or address
   * @param port 1..65535
   * @param connectLimit longest wait for the connection
   * @param writeLimit longest time a write may take
   * @param queueBytes most bytes waiting to be taken
   * @throws LinkException unknown host, nobody listening, out of reach
   */
  public static TcpLink open(
      String host, int port, Duration connectLimit, Duration writeLimit, int queueBytes)
      throws LinkException {
    return open(host, port, connectLimit, writeLimit, queueBytes, () -> {});
  }

  private static TcpLink open(
      String host,
      int port,
      Duration connectLimit,
      Duration writeLimit,
      int queueBytes,
      AutoCloseable held)
      throws LinkException {
    String where = HostPort.text(host, port);
    InetSocketAddress address = new InetSocketAddress(host, port);
    if (address.isUnresolved()) {
      throw new LinkException(
          Kind.MISSING,
          where + ": no host of this name is known; check its spelling or give its address");
    }
    Socket socket = new Socket();
    try {
      socket.connect(address, (int) Math.min(Integer.MAX_VALUE, connectLimit.toMillis()));
      return adopt(socket, where, writeLimit, queueBytes, held);
    } catch (IOException | SecurityException e) {
      quietly(socket);
      throw new LinkException(
          e instanceof SecurityException ? Kind.FORBIDDEN : Kind.MISSING,
          where + ": " + whyNot(e, connectLimit),
          e);
    }
  }

  private static String whyNot(Exception e, Duration connectLimit) {
    if (e instanceof SocketTimeoutException) {
      return "no answer within "
          + connectLimit.toMillis()
          + " ms; check that the board is on and the network reaches it";
    }
    if (e instanceof ConnectException) {
      return "nothing listens there; start the board or its server, or check the port number";
    }
    if (e instanceof NoRouteToHostException) {
      return "the network does not reach it; check cable and address";
    }
    return "cannot connect: " + e.getMessage();
  }

  static TcpLink adopt(
      Socket socket, String where, Duration writeLimit, int queueBytes, AutoCloseable held)
      throws IOException {
    socket.setTcpNoDelay(true);
    socket.setKeepAlive(true);
    TcpLink link = new TcpLink(socket, where, writeLimit, queueBytes, held);
    link.start();
    return link;
  }

  static void quietly(AutoCloseable thing) {
    try {
      thing.close();
    } catch (Exception e) {
      // It is being given up: there is nobody left to tell.
    }
  }

  @Override
  int readLine(byte[] into) throws IOException {
    return in.read(into);
  }

  @Override
  int writeLine(byte[] from, int offset, int length) throws IOException {
    int n = Math.min(length, SLICE_BYTES);
    out.write(from, offset, n);
    return n;
  }

  @Override
  void releaseLine() {
    quietly(socket);
    quietly(held);
  }
}
