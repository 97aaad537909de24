package coilside.board.link;

import static coilside.board.link.LinkContract.LONG;
import static coilside.board.link.LinkContract.bytes;
import static coilside.board.link.LinkContract.receiveAll;
import static org.junit.jupiter.api.Assertions.assertArrayEquals;
import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.link.LinkException.Kind;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Instant;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.io.TempDir;

/**
 * The replay of a recorded exchange. It has no other end to talk freely with, so it keeps the link
 * contract by these tests of its own.
 */
@Timeout(value = 30, threadMode = Timeout.ThreadMode.SEPARATE_THREAD)
class ReplayLinkTest {
  @TempDir Path folder;

  private static ReplayLink replay(String text) throws IOException {
    return new ReplayLink("test", RecordedExchange.parse(text, "test"));
  }

  @Test
  void itAnswersAsTheBoardDid() throws Exception {
    try (ReplayLink link = replay("< hello\\n\n> who\\n\n0.5 < me\n< \\x00\\n\n")) {
      assertArrayEquals(bytes("hello\n"), receiveAll(link, 6));
      assertEquals(0, link.receive(new byte[4], 0));
      link.send(bytes("wh"));
      assertEquals(0, link.receive(new byte[4], 1_000_000));
      assertFalse(link.finished());
      link.send(bytes("o\n"));
      assertArrayEquals(bytes("me\0\n"), receiveAll(link, 4));
      assertTrue(link.finished());
      assertEquals(
          Kind.LOST,
          assertThrows(LinkException.class, () -> link.receive(new byte[4], LONG)).kind());
    }
  }

  @Test
  void aDifferenceIsToldWithItsLine() throws Exception {
    try (ReplayLink link = replay("# a comment\n= shot one\n> gain 20\\n\n< ok\\n\n")) {
      LinkException e = assertThrows(LinkException.class, () -> link.send(bytes("gain 30\n")));
      assertTrue(
          e.getMessage().contains("line 3, byte 5: recorded '20\\n', sent '30\\n'"),
          e.getMessage());
      assertThrows(LinkException.class, () -> link.receive(new byte[1], LONG));
    }
  }

  @Test
  void recordedTroubleComesAgain() throws Exception {
    try (ReplayLink link = replay("> go\\n\n< da\n1.0 ! overflow\n")) {
      link.send(bytes("go\n"));
      assertArrayEquals(bytes("da"), receiveAll(link, 2));
      assertEquals(
          Kind.OVERFLOW,
          assertThrows(LinkException.class, () -> link.receive(new byte[4], LONG)).kind());
    }
    try (ReplayLink link = replay("> go\\n\n! stalled\n")) {
      link.send(bytes("go\n"));
      assertEquals(
          Kind.STALLED, assertThrows(LinkException.class, () -> link.send(bytes("x"))).kind());
    }
  }

  @Test
  void closingWakesWhoWaits() throws Exception {
    ReplayLink link = replay("> go\\n\n");
    CompletableFuture<Kind> waiting =
        CompletableFuture.supplyAsync(
            () -> {
              try {
                link.receive(new byte[1], LONG);
                return null;
              } catch (LinkException e) {
                return e.kind();
              }
            });
    link.close();
    link.close();
    assertEquals(Kind.CLOSED, waiting.get(20, TimeUnit.SECONDS));
    assertEquals(
        Kind.CLOSED, assertThrows(LinkException.class, () -> link.send(bytes("go"))).kind());
  }

  @Test
  void aLoggedExchangePlaysBackByteForByte() throws Exception {
    MemoryLink.Pair pair = MemoryLink.pair("in this process");
    Path file = folder.resolve("log.txt");
    byte[] block = LinkContract.noise(200_000);
    try (Link link = WireLog.over(pair.near(), file, () -> Instant.EPOCH, System::nanoTime)) {
      link.send(bytes("data?\n"));
      pair.far().send(block);
      receiveAll(link, block.length);
      link.send(block, 0, 1000);
    }
    try (ReplayLink link = new ReplayLink("log", RecordedExchange.read(file))) {
      assertEquals(0, link.receive(new byte[4], 0));
      link.send(bytes("data?\n"));
      assertArrayEquals(block, receiveAll(link, block.length));
      link.send(block, 0, 1000);
      assertTrue(link.finished());
    }
    assertTrue(Files.size(file) < 5L * block.length, "the log is " + Files.size(file) + " bytes");
  }

  @Test
  void allByteValuesSurviveTheText() {
    byte[] all = new byte[256];
    for (int i = 0; i < 256; i++) {
      all[i] = (byte) i;
      byte[] one = {(byte) i};
      assertArrayEquals(one, WireText.parse(WireText.of(one, 0, 1)));
    }
    assertArrayEquals(all, WireText.parse(WireText.of(all, 0, 256)));
  }

  @Test
  void aBrokenLineIsNamed() {
    for (String wrong : new String[] {"hello", "> \\q", "> \\x4", "! rust", "> caf\u00e9"}) {
      IOException e = assertThrows(IOException.class, () -> replay("# one\n" + wrong + "\n"));
      assertTrue(e.getMessage().startsWith("test, line 2: "), e.getMessage());
    }
  }

  @Test
  void theHandwrittenExchangesCanBePlayed() throws Exception {
    for (String name : new String[] {"scpi-console", "plain-line-console"}) {
      Path file = Path.of("src/test/resources/exchanges", name + ".txt");
      assertTrue(RecordedExchange.read(file).passages().size() > 10, name);
    }
  }
}
