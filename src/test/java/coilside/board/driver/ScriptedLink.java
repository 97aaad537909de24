package coilside.board.driver;

import coilside.board.link.Link;
import coilside.board.link.LinkException;
import java.nio.charset.StandardCharsets;
import java.util.ArrayDeque;
import java.util.Arrays;
import java.util.Deque;
import java.util.function.LongSupplier;

/**
 * A link that plays the board's side of a handwritten exchange and holds the host to its own, byte
 * for byte. Its clock moves only when the host waits in vain.
 */
final class ScriptedLink implements Link, LongSupplier {
  private final Deque<ExchangeFile.Part> parts;
  private final int mostAtOnce;
  private int at;
  private long nanos;
  private boolean closed;

  /**
   * @param mostAtOnce most bytes handed over in one receive, to cut the stream in other places
   */
  ScriptedLink(ExchangeFile file, int mostAtOnce) {
    this.parts = new ArrayDeque<>(file.parts());
    this.mostAtOnce = mostAtOnce;
  }

  /** The announcement that is due now, or null at the end. */
  String announced() {
    ExchangeFile.Part part = parts.peek();
    if (part == null || closed && part.mark() == '<' && parts.size() == 1) {
      return null; // nobody waits for what a board says to a host that has hung up
    }
    if (part.mark() != '=') {
      throw new AssertionError(
          "still due: "
              + part.mark()
              + " "
              + new String(part.bytes(), StandardCharsets.ISO_8859_1).substring(at));
    }
    return parts.remove().text();
  }

  @Override
  public String description() {
    return "handwritten exchange";
  }

  @Override
  public void send(byte[] bytes, int offset, int length) throws LinkException {
    if (closed) {
      throw new LinkException(LinkException.Kind.CLOSED, "closed");
    }
    int sent = 0;
    while (sent < length) {
      ExchangeFile.Part part = parts.peek();
      String said = new String(bytes, offset + sent, length - sent, StandardCharsets.ISO_8859_1);
      if (part == null || part.mark() != '>') {
        throw new AssertionError("the host said '" + said + "' when it should have listened");
      }
      int n = Math.min(length - sent, part.bytes().length - at);
      byte[] due = Arrays.copyOfRange(part.bytes(), at, at + n);
      byte[] got = Arrays.copyOfRange(bytes, offset + sent, offset + sent + n);
      if (!Arrays.equals(due, got)) {
        throw new AssertionError(
            "the host said '"
                + said
                + "' where '"
                + new String(
                    part.bytes(), at, part.bytes().length - at, StandardCharsets.ISO_8859_1)
                + "' was due");
      }
      sent += n;
      forward(part, n);
    }
  }

  @Override
  public int receive(byte[] into, long timeoutNanos) {
    ExchangeFile.Part part = parts.peek();
    if (part == null || part.mark() != '<') {
      nanos += Math.max(timeoutNanos, 1000);
      return 0;
    }
    int n = Math.min(Math.min(into.length, mostAtOnce), part.bytes().length - at);
    System.arraycopy(part.bytes(), at, into, 0, n);
    forward(part, n);
    return n;
  }

  private void forward(ExchangeFile.Part part, int n) {
    at += n;
    if (at == part.bytes().length) {
      parts.remove();
      at = 0;
    }
  }

  @Override
  public void close() {
    closed = true;
  }

  @Override
  public long getAsLong() {
    return nanos;
  }
}
