package coilside.board.link;

import coilside.board.link.LinkException.Kind;
import java.io.IOException;
import java.net.BindException;
import java.net.InetAddress;
import java.net.InetSocketAddress;
import java.net.ServerSocket;
import java.net.Socket;
import java.net.SocketTimeoutException;
import java.time.Duration;
import java.util.Optional;

/**
 * The serving side of TCP links: takes connections and makes a {@link Link} of each. Who listens
 * beyond loopback opens the board to everyone on the network: there is no password.
 */
public final class TcpListener implements AutoCloseable {
  private final ServerSocket server;

  private TcpListener(ServerSocket server) {
    this.server = server;
  }

  /** Listens on loopback; port 0 takes any free one. */
  public static TcpListener onLoopback(int port) throws LinkException {
    return open(InetAddress.getLoopbackAddress().getHostAddress(), port);
  }

  /**
   * Listens.
   *
   * @param host which of our own addresses
   * @param port 0 takes any free one
   * @throws LinkException port in use or not allowed, no such address here
   */
  public static TcpListener open(String host, int port) throws LinkException {
    String where = HostPort.text(host, port);
    InetSocketAddress address = new InetSocketAddress(host, port);
    if (address.isUnresolved()) {
      throw new LinkException(
          Kind.MISSING, where + ": this computer has no such address; use 127.0.0.1:" + port);
    }
    ServerSocket server = null;
    try {
      server = new ServerSocket();
      server.setReuseAddress(true);
      server.bind(address, 4);
      return new TcpListener(server);
    } catch (IOException | SecurityException e) {
      if (server != null) {
        TcpLink.quietly(server);
      }
      throw new LinkException(
          e instanceof BindException ? Kind.BUSY : Kind.FORBIDDEN,
          where
              + ": cannot listen there ("
              + e.getMessage()
              + "); choose a free port above 1023 on one of this computer's own addresses",
          e);
    }
  }

  public int port() {
    return server.getLocalPort();
  }

  /** Where it listens: "127.0.0.1:5025". */
  public String address() {
    return HostPort.text(server.getInetAddress().getHostAddress(), server.getLocalPort());
  }

  /**
   * Waits for the next connection.
   *
   * @return the link; empty when the time passed
   * @throws LinkException closed
   */
  public Optional<Link> accept(Duration timeout) throws LinkException {
    try {
      server.setSoTimeout((int) Math.max(1, Math.min(Integer.MAX_VALUE, timeout.toMillis())));
      return Optional.of(linkOf(server.accept()));
    } catch (SocketTimeoutException e) {
      return Optional.empty();
    } catch (IOException e) {
      throw server.isClosed()
          ? QueuedLink.closed(address())
          : QueuedLink.lost(address(), String.valueOf(e.getMessage()), e);
    }
  }

  private static Link linkOf(Socket socket) throws IOException {
    try {
      InetSocketAddress peer = (InetSocketAddress) socket.getRemoteSocketAddress();
      String who = HostPort.text(peer.getAddress().getHostAddress(), peer.getPort());
      return TcpLink.adopt(socket, who, QueuedLink.WRITE_LIMIT, QueuedLink.QUEUE_BYTES, () -> {});
    } catch (IOException e) {
      TcpLink.quietly(socket);
      throw e;
    }
  }

  @Override
  public void close() {
    TcpLink.quietly(server);
  }
}
