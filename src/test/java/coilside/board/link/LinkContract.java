package coilside.board.link;

import static org.junit.jupiter.api.Assertions.assertArrayEquals;
import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.link.LinkException.Kind;
import java.nio.charset.StandardCharsets;
import java.time.Duration;
import java.util.Arrays;
import java.util.Random;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.AfterEach;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;

/** What every link must do, whatever it runs over. */
@Timeout(value = 30, threadMode = Timeout.ThreadMode.SEPARATE_THREAD)
abstract class LinkContract {
  static final long LONG = TimeUnit.SECONDS.toNanos(20);

  /** The link under test and the other end. */
  record Ends(Link near, Link far) {}

  private Ends ends;

  /** Two connected ends; the near one is under test. */
  abstract Ends connect() throws Exception;

  /** A link whose other end takes no bytes, with a short write limit. */
  abstract Link connectToNobody(Duration writeLimit) throws Exception;

  /** Whether this kind of line tells when the other end goes away. */
  boolean noticesHangUp() {
    return true;
  }

  @BeforeEach
  void open() throws Exception {
    ends = connect();
  }

  @AfterEach
  void close() {
    ends.near().close();
    ends.far().close();
  }

  static byte[] bytes(String text) {
    return text.getBytes(StandardCharsets.ISO_8859_1);
  }

  static byte[] receiveAll(Link link, int length) throws LinkException {
    byte[] out = new byte[length];
    byte[] some = new byte[4096];
    int have = 0;
    while (have < length) {
      byte[] into = length - have < some.length ? new byte[length - have] : some;
      int n = link.receive(into, LONG);
      assertTrue(n > 0, "nothing came after " + have + " of " + length + " bytes");
      System.arraycopy(into, 0, out, have, n);
      have += n;
    }
    return out;
  }

  static byte[] noise(int length) {
    byte[] all = new byte[length];
    new Random(7).nextBytes(all);
    return all;
  }

  @Test
  void bytesGoThereAndBack() throws Exception {
    ends.near().send(bytes("*IDN?\n"));
    assertArrayEquals(bytes("*IDN?\n"), receiveAll(ends.far(), 6));
    ends.far().send(bytes("bench,1\r\n"));
    assertArrayEquals(bytes("bench,1\r\n"), receiveAll(ends.near(), 9));
  }

  @Test
  void everyByteValueArrivesUnchanged() throws Exception {
    byte[] all = new byte[512];
    for (int i = 0; i < all.length; i++) {
      all[i] = (byte) i;
    }
    ends.near().send(all);
    assertArrayEquals(all, receiveAll(ends.far(), all.length));
    ends.far().send(all);
    assertArrayEquals(all, receiveAll(ends.near(), all.length));
  }

  @Test
  void aPartOfAnArrayIsSent() throws Exception {
    ends.near().send(bytes("xxABCyy"), 2, 3);
    assertArrayEquals(bytes("ABC"), receiveAll(ends.far(), 3));
    assertThrows(IndexOutOfBoundsException.class, () -> ends.near().send(new byte[3], 2, 2));
  }

  @Test
  void sendingNothingIsAllowed() throws Exception {
    ends.near().send(new byte[0]);
    ends.near().send(bytes("a"));
    assertArrayEquals(bytes("a"), receiveAll(ends.far(), 1));
  }

  @Test
  void nothingThereGivesZeroAtOnceAndAfterAWait() throws Exception {
    assertEquals(0, ends.near().receive(new byte[8], 0));
    assertEquals(0, ends.near().receive(new byte[8], 1_000_000));
  }

  @Test
  void aSmallArrayTakesAPartAndTheRestStays() throws Exception {
    ends.far().send(bytes("abcdef"));
    assertArrayEquals(bytes("ab"), receiveAll(ends.near(), 2));
    assertArrayEquals(bytes("cdef"), receiveAll(ends.near(), 4));
  }

  @Test
  void bigTransfersArriveWholeInBothDirections() throws Exception {
    byte[] big = noise(3 << 20);
    for (Ends e : new Ends[] {ends, new Ends(ends.far(), ends.near())}) {
      CompletableFuture<Void> sender =
          CompletableFuture.runAsync(
              () -> {
                try {
                  e.near().send(big);
                } catch (LinkException x) {
                  throw new IllegalStateException(x);
                }
              });
      byte[] got = receiveAll(e.far(), big.length);
      sender.get(20, TimeUnit.SECONDS);
      assertTrue(Arrays.equals(big, got), "the bytes changed on their way");
    }
  }

  @Test
  void whatWasSentBeforeTheHangUpStillArrivesThenTheLossIsTold() throws Exception {
    ends.far().send(bytes("last words"));
    assertArrayEquals(bytes("last"), receiveAll(ends.near(), 4));
    if (!noticesHangUp()) {
      return;
    }
    ends.far().close();
    assertArrayEquals(bytes(" words"), receiveAll(ends.near(), 6));
    LinkException e =
        assertThrows(LinkException.class, () -> ends.near().receive(new byte[8], LONG));
    assertEquals(Kind.LOST, e.kind());
    assertTrue(e.getMessage().contains(ends.near().description()), e.getMessage());
  }

  @Test
  void aHangUpWakesWhoWaitsAndStaysTold() throws Exception {
    if (!noticesHangUp()) {
      return;
    }
    CompletableFuture<LinkException> waiting = receiveLater(ends.near());
    ends.far().close();
    assertEquals(Kind.LOST, waiting.get(20, TimeUnit.SECONDS).kind());
    assertEquals(
        Kind.LOST,
        assertThrows(LinkException.class, () -> ends.near().receive(new byte[1], 0)).kind());
    assertEquals(
        Kind.LOST,
        assertThrows(LinkException.class, () -> ends.near().send(bytes("hello"))).kind());
  }

  private static CompletableFuture<LinkException> receiveLater(Link link) {
    return CompletableFuture.supplyAsync(
        () -> {
          try {
            link.receive(new byte[8], LONG);
            return null;
          } catch (LinkException e) {
            return e;
          }
        });
  }

  @Test
  void closingWakesWhoWaitsForBytes() throws Exception {
    CompletableFuture<LinkException> waiting = receiveLater(ends.near());
    ends.near().close();
    assertEquals(Kind.CLOSED, waiting.get(20, TimeUnit.SECONDS).kind());
  }

  @Test
  void aClosedLinkSaysSoAndMayBeClosedAgain() throws Exception {
    ends.far().send(bytes("unread"));
    ends.near().close();
    ends.near().close();
    assertEquals(
        Kind.CLOSED, assertThrows(LinkException.class, () -> ends.near().send(bytes("x"))).kind());
    assertEquals(
        Kind.CLOSED,
        assertThrows(LinkException.class, () -> ends.near().receive(new byte[8], 0)).kind());
  }

  @Test
  void anEndThatTakesNothingStallsTheSender() throws Exception {
    Link link = connectToNobody(Duration.ofMillis(150));
    try {
      LinkException e = assertThrows(LinkException.class, () -> link.send(new byte[32 << 20]));
      assertEquals(Kind.STALLED, e.kind());
      assertTrue(e.getMessage().contains("150 ms"), e.getMessage());
    } finally {
      link.close();
    }
  }

  @Test
  void closingFreesABlockedSender() throws Exception {
    Link link = connectToNobody(Duration.ofSeconds(25));
    CompletableFuture<LinkException> blocked =
        CompletableFuture.supplyAsync(
            () -> {
              try {
                link.send(new byte[32 << 20]);
                return null;
              } catch (LinkException e) {
                return e;
              }
            });
    assertThrows(
        java.util.concurrent.TimeoutException.class, () -> blocked.get(50, TimeUnit.MILLISECONDS));
    link.close();
    assertEquals(Kind.CLOSED, blocked.get(20, TimeUnit.SECONDS).kind());
  }

  @Test
  void theDescriptionIsForPeople() {
    assertTrue(ends.near().description().matches("\\P{Cntrl}{3,80}"), ends.near().description());
  }
}
