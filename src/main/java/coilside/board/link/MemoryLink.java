package coilside.board.link;

import coilside.board.link.LinkException.Kind;
import java.time.Duration;
import java.util.Objects;
import java.util.concurrent.atomic.AtomicBoolean;

/**
 * One end of a pair of links inside this program. Each end holds a bounded queue of what the other
 * sent. It needs no thread: {@link #send} puts the bytes straight into the other end's queue and
 * waits, up to the write limit, while that is full.
 */
public final class MemoryLink implements Link {
  /** Bytes each direction holds unless told otherwise. */
  public static final int QUEUE_BYTES = 1 << 20;

  /** Two connected ends. */
  public record Pair(MemoryLink near, MemoryLink far) {}

  private final String description;
  private final ByteQueue incoming;
  private final ByteQueue outgoing;
  private final Duration writeLimit;
  private final AtomicBoolean closed = new AtomicBoolean();

  private MemoryLink(
      String description, ByteQueue incoming, ByteQueue outgoing, Duration writeLimit) {
    this.description = description;
    this.incoming = incoming;
    this.outgoing = outgoing;
    this.writeLimit = writeLimit;
  }

  /** A pair with the usual queue and write limit. */
  public static Pair pair(String description) {
    return pair(description, QUEUE_BYTES, QueuedLink.WRITE_LIMIT);
  }

  /**
   * A pair of connected ends.
   *
   * @param description what both ends are called
   * @param queueBytes most bytes under way in each direction
   * @param writeLimit longest wait of a {@link #send} for room
   */
  public static Pair pair(String description, int queueBytes, Duration writeLimit) {
    Objects.requireNonNull(description, "description");
    ByteQueue there = new ByteQueue(queueBytes);
    ByteQueue back = new ByteQueue(queueBytes);
    return new Pair(
        new MemoryLink(description, back, there, writeLimit),
        new MemoryLink(description, there, back, writeLimit));
  }

  @Override
  public String description() {
    return description;
  }

  @Override
  public void send(byte[] bytes, int offset, int length) throws LinkException {
    Objects.checkFromIndexSize(offset, length, bytes.length);
    long deadline = System.nanoTime() + writeLimit.toNanos();
    int sent = 0;
    try {
      do {
        int n =
            outgoing.offerSome(bytes, offset + sent, length - sent, deadline - System.nanoTime());
        if (closed.get()) {
          throw QueuedLink.closed(description);
        }
        if (n < 0) {
          throw QueuedLink.lost(description, "the other end closed it", null);
        }
        if (n == 0 && sent < length) {
          throw QueuedLink.stalled(description, writeLimit, sent, length);
        }
        sent += n;
      } while (sent < length);
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
      throw new LinkException(Kind.CLOSED, description + ": sending was interrupted", e);
    }
  }

  @Override
  public int receive(byte[] into, long timeoutNanos) throws LinkException {
    return incoming.takeFor(description, into, timeoutNanos);
  }

  @Override
  public void close() {
    if (closed.compareAndSet(false, true)) {
      incoming.close(QueuedLink.closed(description));
      outgoing.end(QueuedLink.lost(description, "the other end closed it", null));
    }
  }
}
