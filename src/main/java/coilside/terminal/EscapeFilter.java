package coilside.terminal;

import java.io.IOException;
import java.io.InputStream;

/**
 * A key input that holds back a trailing Escape for a moment, so that a sequence split on the way
 * (over SSH) is not taken for a lone Escape.
 *
 * <p>A daemon thread of its own reads the source; {@link #available} never blocks and tells only
 * what may be read now.
 */
final class EscapeFilter extends InputStream {
  private static final int ESCAPE = 27;

  /** Escape, "[M", then button, column and row. */
  private static final int MOUSE_LENGTH = 6;

  private static final long HOLD_NANOS = 40_000_000L;
  private static final int CAPACITY = 4096;
  private final InputStream source;
  private final java.util.function.LongSupplier nanoTime;
  private final byte[] buffer = new byte[CAPACITY];
  private int count;
  private long lastArrival;
  private boolean ended;

  EscapeFilter(InputStream source, java.util.function.LongSupplier nanoTime) {
    this.source = source;
    this.nanoTime = nanoTime;
  }

  /** Starts the reading thread. */
  EscapeFilter start() {
    Thread reader = new Thread(this::readSource, "keyboard");
    reader.setDaemon(true);
    reader.start();
    return this;
  }

  private void readSource() {
    byte[] chunk = new byte[256];
    while (true) {
      int n;
      try {
        n = source.read(chunk);
      } catch (IOException e) {
        n = -1;
      }
      offer(chunk, n);
      if (n < 0) {
        return;
      }
    }
  }

  /** Takes bytes in; what does not fit is dropped, since nobody types 4096 keys ahead. */
  synchronized void offer(byte[] bytes, int n) {
    if (n < 0) {
      ended = true;
    } else {
      int taken = Math.min(n, CAPACITY - count);
      System.arraycopy(bytes, 0, buffer, count, taken);
      count += taken;
      lastArrival = nanoTime.getAsLong();
    }
    notifyAll();
  }

  @Override
  public synchronized int available() {
    if (count > 0 && !ended && nanoTime.getAsLong() - lastArrival < HOLD_NANOS) {
      int tail = unfinishedTail();
      return count - tail;
    }
    return count;
  }

  /** Length of an Escape sequence at the end that is not complete yet; 0 when there is none. */
  private int unfinishedTail() {
    for (int i = count - 1; i >= Math.max(0, count - 12); i--) {
      if (buffer[i] == ESCAPE) {
        int length = count - i;
        if (length == 1) {
          return 1;
        }
        int second = buffer[i + 1];
        if (second != '[' && second != 'O') {
          return 0;
        }
        if (second == '[' && length > 2 && buffer[i + 2] == 'M') {
          return length < MOUSE_LENGTH ? length : 0;
        }
        for (int k = i + 2; k < count; k++) {
          if (buffer[k] >= 0x40 && buffer[k] <= 0x7e) {
            return 0;
          }
        }
        return length;
      }
    }
    return 0;
  }

  /** Waits until a key can be read, at most so long. */
  synchronized void await(long millis) throws InterruptedException {
    if (available() == 0) {
      wait(millis);
    }
  }

  /** True when the source ended and all of it was read. */
  synchronized boolean ended() {
    return ended && count == 0;
  }

  @Override
  public int read() throws IOException {
    byte[] one = new byte[1];
    return read(one, 0, 1) < 0 ? -1 : one[0] & 0xff;
  }

  @Override
  public synchronized int read(byte[] target, int offset, int length) throws IOException {
    while (available() == 0) {
      if (ended) {
        return -1;
      }
      try {
        wait(count > 0 ? 10 : 0);
      } catch (InterruptedException e) {
        Thread.currentThread().interrupt();
        throw new IOException("interrupted while waiting for a key", e);
      }
    }
    int n = Math.min(length, available());
    System.arraycopy(buffer, 0, target, offset, n);
    System.arraycopy(buffer, n, buffer, 0, count - n);
    count -= n;
    return n;
  }
}
