package coilside.board.link;

import coilside.board.link.LinkException.Kind;
import java.io.IOException;
import java.time.Duration;
import java.util.Objects;
import java.util.concurrent.Executors;
import java.util.concurrent.Future;
import java.util.concurrent.ScheduledThreadPoolExecutor;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.atomic.AtomicBoolean;
import java.util.concurrent.locks.ReentrantLock;

/**
 * What all links over a real line have in common: a daemon thread that reads the line into a
 * bounded queue, a watchdog over writes, and an end that frees whoever waits.
 *
 * <p>The reading thread runs no code of the user's. A full queue ends the link with {@link
 * Kind#OVERFLOW}. One more daemon thread, shared by all links, holds the watchdogs; it only ever
 * lets a line go.
 */
abstract class QueuedLink implements Link {
  /** Longest time a write may take unless told otherwise. */
  static final Duration WRITE_LIMIT = Duration.ofSeconds(5);

  /** Most bytes waiting to be taken unless told otherwise. */
  static final int QUEUE_BYTES = 16 << 20;

  private static final int READ_BYTES = 1 << 16;

  private static final ScheduledThreadPoolExecutor WATCHDOGS = watchdogs();

  private final String description;
  private final Duration writeLimit;
  private final ByteQueue queue;
  private final ReentrantLock sending = new ReentrantLock();
  private final AtomicBoolean closed = new AtomicBoolean();
  private final AtomicBoolean released = new AtomicBoolean();
  private final Object releasing = new Object();

  QueuedLink(String description, Duration writeLimit, int queueBytes) {
    this.description = Objects.requireNonNull(description, "description");
    this.writeLimit = Objects.requireNonNull(writeLimit, "writeLimit");
    this.queue = new ByteQueue(queueBytes);
  }

  private static ScheduledThreadPoolExecutor watchdogs() {
    ScheduledThreadPoolExecutor one =
        new ScheduledThreadPoolExecutor(1, job -> daemon(job, "coilside write watchdog"));
    one.setRemoveOnCancelPolicy(true);
    return one;
  }

  static Thread daemon(Runnable job, String name) {
    Thread thread = Executors.defaultThreadFactory().newThread(job);
    thread.setName(name);
    thread.setDaemon(true);
    return thread;
  }

  static LinkException closed(String description) {
    return new LinkException(Kind.CLOSED, description + ": the link was closed from our side");
  }

  static LinkException lost(String description, String how, Throwable cause) {
    return new LinkException(
        Kind.LOST,
        description
            + ": the link was lost: "
            + how
            + "; check the cable and the board's power, then open it again",
        cause);
  }

  static LinkException stalled(String description, Duration limit, int sent, int length) {
    return new LinkException(
        Kind.STALLED,
        description
            + ": the other end took "
            + sent
            + " of "
            + length
            + " bytes within "
            + limit.toMillis()
            + " ms; check that the board runs and reads its line, then open the link again");
  }

  /**
   * Reads what the line has; blocks until there is something or a while has passed.
   *
   * @return how many bytes came, 0 for none yet, -1 when the other end went away
   */
  abstract int readLine(byte[] into) throws IOException;

  /**
   * Writes to the line; may block, {@link #releaseLine()} must free it.
   *
   * @return how many bytes the line took; 0 or fewer when the other end went away
   */
  abstract int writeLine(byte[] from, int offset, int length) throws IOException;

  /** Lets the line go, which frees blocked reads and writes. Called once; never throws. */
  abstract void releaseLine();

  /** Starts the reading thread; the last thing a constructor's caller does. */
  final void start() {
    daemon(this::readOn, "coilside link " + description).start();
  }

  private void readOn() {
    byte[] buffer = new byte[READ_BYTES];
    try {
      while (!released.get()) {
        int n = readLine(buffer);
        if (n < 0) {
          queue.end(lost(description, "the other end went away", null));
          break;
        }
        if (n > 0 && !queue.offer(buffer, 0, n)) {
          queue.end(
              new LinkException(
                  Kind.OVERFLOW,
                  description
                      + ": more than "
                      + queue.bound()
                      + " bytes came without being taken; the link was dropped so that no sample"
                      + " is lost unseen: ask for fewer points or a longer repetition time"));
          break;
        }
      }
    } catch (IOException | RuntimeException | LinkageError e) {
      queue.end(lost(description, String.valueOf(e.getMessage()), e));
    } finally {
      release();
    }
  }

  /**
   * Whoever comes second waits until the line is really let go: its name may be used again then.
   */
  private void release() {
    synchronized (releasing) {
      if (released.compareAndSet(false, true)) {
        releaseLine();
      }
    }
  }

  @Override
  public final String description() {
    return description;
  }

  @Override
  public final void send(byte[] bytes, int offset, int length) throws LinkException {
    Objects.checkFromIndexSize(offset, length, bytes.length);
    sending.lock();
    try {
      LinkException end = queue.ended();
      if (end != null) {
        throw end;
      }
      writeWatched(bytes, offset, length);
    } finally {
      sending.unlock();
    }
  }

  private void writeWatched(byte[] bytes, int offset, int length) throws LinkException {
    AtomicBoolean barked = new AtomicBoolean();
    Future<?> watchdog =
        WATCHDOGS.schedule(
            () -> {
              barked.set(true);
              queue.end(stalled(description, writeLimit, 0, length));
              release();
            },
            writeLimit.toNanos(),
            TimeUnit.NANOSECONDS);
    int sent = 0;
    try {
      while (sent < length) {
        int n = writeLine(bytes, offset + sent, length - sent);
        if (n <= 0) {
          throw new IOException("the line takes no more bytes");
        }
        sent += n;
      }
    } catch (IOException | RuntimeException e) {
      if (closed.get()) {
        throw closed(description);
      }
      LinkException reason =
          barked.get()
              ? stalled(description, writeLimit, sent, length)
              : lost(description, String.valueOf(e.getMessage()), e);
      queue.end(reason);
      release();
      throw reason;
    } finally {
      watchdog.cancel(false);
    }
  }

  @Override
  public final int receive(byte[] into, long timeoutNanos) throws LinkException {
    return queue.takeFor(description, into, timeoutNanos);
  }

  @Override
  public final void close() {
    if (closed.compareAndSet(false, true)) {
      queue.close(closed(description));
      release();
    }
  }
}
