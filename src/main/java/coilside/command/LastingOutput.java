package coilside.command;

import java.io.IOException;
import java.io.PrintWriter;
import java.io.Writer;
import java.util.concurrent.ArrayBlockingQueue;
import java.util.concurrent.BlockingQueue;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.atomic.AtomicLong;

/**
 * An output that never holds up the bench: what is written waits in a bounded queue and is handed
 * on by a thread of its own, so that a frozen terminal or a reader that does not read stops
 * nothing. Where nobody reads for long, lines are dropped and counted; the record has them all.
 */
final class LastingOutput implements AutoCloseable {
  private static final int QUEUE = 20_000;
  private static final int PATIENCE_SECONDS = 3;

  private final Output under;
  private final Output output;
  private final BlockingQueue<Runnable> queue = new ArrayBlockingQueue<>(QUEUE);
  private final AtomicLong dropped = new AtomicLong();
  private final AtomicLong handedOn = new AtomicLong();
  private final Thread thread = new Thread(this::handOn, "output");
  private volatile boolean closed;

  private LastingOutput(Output under) {
    this.under = under;
    this.output =
        new Output(
            new PrintWriter(new Queued(under.out()), true),
            new PrintWriter(new Queued(under.err()), true),
            under.progressTerminal());
    thread.setDaemon(true);
  }

  static LastingOutput over(Output under) {
    LastingOutput lasting = new LastingOutput(under);
    lasting.thread.start();
    return lasting;
  }

  /** What the command writes to. */
  Output output() {
    return output;
  }

  /** How many pieces of text were dropped because nobody read them. */
  long dropped() {
    return dropped.get();
  }

  private void handOn() {
    try {
      while (!closed || !queue.isEmpty()) {
        Runnable next = queue.poll(50, TimeUnit.MILLISECONDS);
        if (next != null) {
          next.run();
          handedOn.incrementAndGet();
        }
      }
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
    }
  }

  /** Waits until all is handed on, or nothing moves for some seconds. */
  @Override
  public void close() {
    closed = true;
    try {
      long before;
      do {
        before = handedOn.get();
        thread.join(TimeUnit.SECONDS.toMillis(PATIENCE_SECONDS));
      } while (thread.isAlive() && handedOn.get() != before);
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
    }
    if (dropped.get() > 0 && !thread.isAlive()) {
      under.aside(
          dropped.get()
              + " lines were not shown, since nobody read them; the record has all rows.");
    }
  }

  /** Gathers text up to a flush and queues it as one piece. */
  private final class Queued extends Writer {
    private final PrintWriter to;
    private final StringBuilder gathered = new StringBuilder();

    Queued(PrintWriter to) {
      this.to = to;
    }

    @Override
    public void write(char[] text, int offset, int length) {
      synchronized (lock) {
        gathered.append(text, offset, length);
      }
    }

    @Override
    public void flush() {
      String piece;
      synchronized (lock) {
        piece = gathered.toString();
        gathered.setLength(0);
      }
      boolean taken =
          piece.isEmpty()
              || queue.offer(
                  () -> {
                    to.write(piece);
                    to.flush();
                  });
      if (!taken) {
        dropped.incrementAndGet();
      }
    }

    @Override
    public void close() throws IOException {
      flush();
    }
  }
}
