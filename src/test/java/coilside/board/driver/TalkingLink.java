package coilside.board.driver;

import coilside.board.link.Link;
import coilside.board.link.LinkException;
import java.io.ByteArrayOutputStream;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.List;
import java.util.function.Function;
import java.util.function.LongSupplier;

/**
 * A link to a board that is a function from a command line to what it says. Its clock moves by what
 * is waited in vain, and by a millisecond a piece that is received.
 */
final class TalkingLink implements Link, LongSupplier {
  final List<String> heard = new ArrayList<>();
  Function<String, byte[]> board;
  boolean lost;
  boolean closed;
  Runnable whenWaitingInVain = () -> {};
  private final StringBuilder line = new StringBuilder();
  private final ByteArrayOutputStream toHost = new ByteArrayOutputStream();
  private long nanos;

  TalkingLink(Function<String, byte[]> board) {
    this.board = board;
  }

  static byte[] latin(String text) {
    return text.getBytes(StandardCharsets.ISO_8859_1);
  }

  void pass(long moreNanos) {
    nanos += moreNanos;
  }

  void say(byte[] bytes) {
    toHost.writeBytes(bytes);
  }

  @Override
  public String description() {
    return "a talking link";
  }

  @Override
  public void send(byte[] bytes, int offset, int length) throws LinkException {
    if (lost || closed) {
      throw new LinkException(LinkException.Kind.LOST, "the other end is gone");
    }
    for (int i = offset; i < offset + length; i++) {
      char c = (char) (bytes[i] & 0xff);
      if (c != '\n') {
        line.append(c);
        continue;
      }
      String command = line.toString();
      line.setLength(0);
      heard.add(command);
      toHost.writeBytes(board.apply(command));
    }
  }

  @Override
  public int receive(byte[] into, long timeoutNanos) throws LinkException {
    if (lost || closed) {
      throw new LinkException(LinkException.Kind.LOST, "the other end is gone");
    }
    byte[] waiting = toHost.toByteArray();
    if (waiting.length == 0) {
      nanos += Math.max(1000, timeoutNanos);
      whenWaitingInVain.run();
      return 0;
    }
    nanos += 1_000_000;
    int n = Math.min(waiting.length, into.length);
    System.arraycopy(waiting, 0, into, 0, n);
    toHost.reset();
    toHost.write(waiting, n, waiting.length - n);
    return n;
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
