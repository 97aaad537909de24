package coilside.board.link;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.link.LinkException.Kind;
import java.net.InetAddress;
import java.net.ServerSocket;
import java.net.Socket;
import java.nio.file.Path;
import java.time.Duration;
import java.time.Instant;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.AfterEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

class TcpLinkTest extends LinkContract {
  private ServerSocket deaf;

  @Override
  Ends connect() throws Exception {
    try (TcpListener listener = TcpListener.onLoopback(0)) {
      Link near = TcpLink.open("127.0.0.1", listener.port());
      return new Ends(near, listener.accept(Duration.ofSeconds(10)).orElseThrow());
    }
  }

  @Override
  Link connectToNobody(Duration writeLimit) throws Exception {
    deaf = new ServerSocket(0, 1, InetAddress.getLoopbackAddress());
    return TcpLink.open(
        "127.0.0.1", deaf.getLocalPort(), Duration.ofSeconds(5), writeLimit, 1 << 20);
  }

  @AfterEach
  void closeDeaf() throws Exception {
    if (deaf != null) {
      deaf.close();
    }
  }

  @Test
  void whereNobodyListensTheMessageSaysWhatToDo() throws Exception {
    int free;
    try (ServerSocket probe = new ServerSocket(0, 1, InetAddress.getLoopbackAddress())) {
      free = probe.getLocalPort();
    }
    LinkException e = assertThrows(LinkException.class, () -> TcpLink.open("127.0.0.1", free));
    assertEquals(Kind.MISSING, e.kind());
    assertTrue(
        e.getMessage().startsWith("127.0.0.1:" + free + ": nothing listens"), e.getMessage());
  }

  @Test
  void aBoardOnTheNetworkIsHeldByOneProgram(@TempDir Path folder) throws Exception {
    PortLocks locks = new PortLocks(folder, "a test", () -> Instant.EPOCH);
    try (TcpListener listener = TcpListener.onLoopback(0)) {
      int port = listener.port();
      try (Link first = TcpLink.open("127.0.0.1", port, locks)) {
        LinkException e =
            assertThrows(LinkException.class, () -> TcpLink.open("127.0.0.1", port, locks));
        assertEquals(Kind.BUSY, e.kind());
        assertTrue(e.getMessage().contains("in use by 'a test' (process "), e.getMessage());
        assertEquals("127.0.0.1:" + port, first.description());
      }
      TcpLink.open("127.0.0.1", port, locks).close();
    }
    LinkException gone =
        assertThrows(LinkException.class, () -> TcpLink.open("no-such-host.invalid", 1, locks));
    assertEquals(Kind.MISSING, gone.kind());
  }

  @Test
  void anUnknownHostIsNamed() {
    LinkException e =
        assertThrows(LinkException.class, () -> TcpLink.open("no-such-host.invalid", 5025));
    assertEquals(Kind.MISSING, e.kind());
    assertTrue(e.getMessage().contains("no-such-host.invalid:5025"), e.getMessage());
  }

  @Test
  void aPortInUseIsBusy() throws Exception {
    try (TcpListener first = TcpListener.onLoopback(0)) {
      LinkException e =
          assertThrows(LinkException.class, () -> TcpListener.onLoopback(first.port()));
      assertEquals(Kind.BUSY, e.kind());
    }
  }

  @Test
  void listeningIsOnLoopbackUnlessToldOtherwise() throws Exception {
    try (TcpListener listener = TcpListener.onLoopback(0)) {
      assertTrue(
          InetAddress.getByName(HostPort.parse(listener.address()).host()).isLoopbackAddress(),
          listener.address());
    }
  }

  @Test
  void moreThanTheQueueHoldsIsAnErrorAndNotASilentGap() throws Exception {
    try (ServerSocket server = new ServerSocket(0, 1, InetAddress.getLoopbackAddress());
        Link link =
            TcpLink.open(
                "127.0.0.1",
                server.getLocalPort(),
                Duration.ofSeconds(5),
                Duration.ofSeconds(5),
                100_000);
        Socket peer = server.accept()) {
      // Larger than queue and socket buffers together: the writer is freed by the link's end.
      assertThrows(
          java.io.IOException.class, () -> peer.getOutputStream().write(new byte[32 << 20]));
      long got = 0;
      byte[] some = new byte[8192];
      LinkException end = null;
      while (end == null) {
        try {
          got += link.receive(some, TimeUnit.SECONDS.toNanos(10));
        } catch (LinkException e) {
          end = e;
        }
      }
      assertEquals(Kind.OVERFLOW, end.kind());
      assertTrue(got <= 100_000, got + " bytes were handed out");
      assertTrue(end.getMessage().contains("100000 bytes"), end.getMessage());
    }
  }

  @Test
  void hostAndPortAreReadAsPeopleWriteThem() {
    assertEquals(new HostPort("bench.lab", 5025), HostPort.parse("bench.lab:5025"));
    assertEquals(new HostPort("::1", 5025), HostPort.parse("[::1]:5025"));
    assertEquals("[::1]:5025", HostPort.parse("[::1]:5025").toString());
    for (String wrong : new String[] {"bench", "bench:", "bench:70000", "::1:5025", ":5025"}) {
      IllegalArgumentException e =
          assertThrows(IllegalArgumentException.class, () -> HostPort.parse(wrong));
      assertTrue(e.getMessage().length() > 20, e.getMessage());
    }
  }
}
