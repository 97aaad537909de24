package coilside.board.link;

import coilside.board.link.LinkException.Kind;
import java.util.List;
import java.util.Objects;

/**
 * A link whose other end is a recorded exchange: it answers as the board did, as long as it is told
 * what the board was told. The first byte that differs ends it, with the line where it differs.
 * What the board said comes as soon as all that was sent before it has been sent; the times of the
 * recording are not kept. It needs no thread.
 */
public final class ReplayLink implements Link {
  private final String name;
  private final List<RecordedExchange.Passage> passages;
  private final LinkException atEnd;
  private final ByteQueue incoming = new ByteQueue(Integer.MAX_VALUE - 16);
  private int next;
  private int position;
  private LinkException over;
  private boolean closed;

  /**
   * @param name what it is called in messages
   * @param exchange what to play
   */
  public ReplayLink(String name, RecordedExchange exchange) {
    this.name = Objects.requireNonNull(name, "name");
    this.passages = exchange.passages();
    Kind kind = exchange.end().orElse(Kind.LOST);
    String how =
        exchange.end().isEmpty()
            ? "the recorded exchange ends here"
            : "the link ended here when it was recorded (" + kind + ")";
    this.atEnd = new LinkException(kind, description() + ": " + how);
    letTheBoardSpeak();
  }

  @Override
  public String description() {
    return "replay of " + name;
  }

  /** Hands out what the board said up to the program's next turn. */
  private void letTheBoardSpeak() {
    while (next < passages.size() && !passages.get(next).toBoard()) {
      byte[] bytes = passages.get(next).bytes();
      incoming.offer(bytes, 0, bytes.length);
      next++;
    }
    if (next == passages.size()) {
      incoming.end(atEnd);
    }
  }

  @Override
  public synchronized void send(byte[] bytes, int offset, int length) throws LinkException {
    Objects.checkFromIndexSize(offset, length, bytes.length);
    if (closed) {
      throw QueuedLink.closed(description());
    }
    if (over != null) {
      throw ByteQueue.again(over);
    }
    for (int i = offset; i < offset + length; i++) {
      if (next == passages.size()) {
        throw end(atEnd);
      }
      RecordedExchange.Passage now = passages.get(next);
      if (now.bytes()[position] != bytes[i]) {
        throw end(different(now, bytes, i, offset + length - i));
      }
      position++;
      if (position == now.bytes().length) {
        position = 0;
        next++;
        letTheBoardSpeak();
      }
    }
  }

  private LinkException end(LinkException reason) {
    over = reason;
    incoming.end(reason);
    return reason;
  }

  private LinkException different(
      RecordedExchange.Passage now, byte[] bytes, int offset, int length) {
    int more = Math.min(24, now.bytes().length - position);
    return new LinkException(
        Kind.LOST,
        description()
            + ": what was sent differs from the recording, in the passage at line "
            + now.line()
            + ", byte "
            + position
            + ": recorded '"
            + WireText.of(now.bytes(), position, more)
            + "', sent '"
            + WireText.of(bytes, offset, Math.min(24, length))
            + "'");
  }

  /** True when everything recorded has been sent. */
  public synchronized boolean finished() {
    return next == passages.size();
  }

  @Override
  public int receive(byte[] into, long timeoutNanos) throws LinkException {
    return incoming.takeFor(description(), into, timeoutNanos);
  }

  @Override
  public synchronized void close() {
    closed = true;
    incoming.close(QueuedLink.closed(description()));
  }
}
