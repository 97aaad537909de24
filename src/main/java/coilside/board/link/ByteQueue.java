package coilside.board.link;

import java.util.concurrent.TimeUnit;
import java.util.concurrent.locks.Condition;
import java.util.concurrent.locks.ReentrantLock;

/**
 * A bounded queue of bytes between one thread that fills it and one that empties it. It starts
 * small and grows to its bound only when it must. Once ended it hands out what it still holds, then
 * throws the reason of its end.
 */
final class ByteQueue {
  private static final int FIRST_CAPACITY = 1 << 16;

  private final ReentrantLock lock = new ReentrantLock();
  private final Condition filled = lock.newCondition();
  private final Condition emptied = lock.newCondition();
  private final int bound;
  private byte[] ring;
  private int head;
  private int size;
  private LinkException end;
  private boolean dropRest;

  /**
   * @param bound most bytes held, &gt;= 1
   */
  ByteQueue(int bound) {
    if (bound < 1) {
      throw new IllegalArgumentException("a queue of " + bound + " bytes holds nothing");
    }
    this.bound = bound;
    this.ring = new byte[Math.min(bound, FIRST_CAPACITY)];
  }

  int bound() {
    return bound;
  }

  /** Takes all bytes or none; false when they do not fit. Bytes after the end are dropped. */
  boolean offer(byte[] from, int offset, int length) {
    lock.lock();
    try {
      if (end != null) {
        return true;
      }
      if (length > bound - size) {
        return false;
      }
      put(from, offset, length);
      return true;
    } finally {
      lock.unlock();
    }
  }

  /**
   * Waits for room and takes as many bytes as fit.
   *
   * @return how many were taken; 0 when the time passed without any room, -1 when ended
   */
  int offerSome(byte[] from, int offset, int length, long timeoutNanos)
      throws InterruptedException {
    lock.lock();
    try {
      long left = timeoutNanos;
      while (end == null && size == bound) {
        if (left <= 0) {
          return 0;
        }
        left = emptied.awaitNanos(left);
      }
      if (end != null) {
        return -1;
      }
      int n = Math.min(length, bound - size);
      put(from, offset, n);
      return n;
    } finally {
      lock.unlock();
    }
  }

  private void put(byte[] from, int offset, int length) {
    if (length == 0) {
      return;
    }
    if (size + length > ring.length) {
      grow(size + length);
    }
    int tail = (int) (((long) head + size) % ring.length);
    int first = Math.min(length, ring.length - tail);
    System.arraycopy(from, offset, ring, tail, first);
    System.arraycopy(from, offset + first, ring, 0, length - first);
    size += length;
    filled.signalAll();
  }

  private void grow(int needed) {
    long wanted = Math.max(needed, Math.min(bound, 2L * ring.length));
    byte[] bigger = new byte[(int) wanted];
    copyOut(bigger, size);
    ring = bigger;
    head = 0;
  }

  private void copyOut(byte[] into, int n) {
    int first = Math.min(n, ring.length - head);
    System.arraycopy(ring, head, into, 0, first);
    System.arraycopy(ring, 0, into, first, n - first);
  }

  /**
   * Waits for bytes.
   *
   * @return how many came; 0 when the time passed
   * @throws LinkException the reason of the end, when ended and empty
   */
  int take(byte[] into, long timeoutNanos) throws LinkException, InterruptedException {
    lock.lock();
    try {
      long left = timeoutNanos;
      while (size == 0 && end == null) {
        if (left <= 0) {
          return 0;
        }
        left = filled.awaitNanos(left);
      }
      if (end != null && (size == 0 || dropRest)) {
        throw again(end);
      }
      int n = Math.min(into.length, size);
      copyOut(into, n);
      head = (head + n) % ring.length;
      size -= n;
      if (size == 0 && ring.length > FIRST_CAPACITY) {
        ring = new byte[Math.min(bound, FIRST_CAPACITY)];
        head = 0;
      }
      emptied.signalAll();
      return n;
    } finally {
      lock.unlock();
    }
  }

  /** Ends the queue; what it holds can still be taken. The first reason stands. */
  void end(LinkException reason) {
    lock.lock();
    try {
      if (end == null) {
        end = reason;
      }
      filled.signalAll();
      emptied.signalAll();
    } finally {
      lock.unlock();
    }
  }

  /** Ends the queue and drops what it holds: our own side has closed it. */
  void close(LinkException reason) {
    lock.lock();
    try {
      end = reason;
      dropRest = true;
      filled.signalAll();
      emptied.signalAll();
    } finally {
      lock.unlock();
    }
  }

  /** The reason of the end, or null while it goes on. */
  LinkException ended() {
    lock.lock();
    try {
      return end == null ? null : again(end);
    } finally {
      lock.unlock();
    }
  }

  static LinkException again(LinkException reason) {
    return new LinkException(reason.kind(), reason.getMessage(), reason);
  }

  /** Waits as {@link #take} does and turns an interrupt into a {@link LinkException}. */
  int takeFor(String description, byte[] into, long timeoutNanos) throws LinkException {
    if (into.length == 0) {
      throw new IllegalArgumentException("receive needs room for at least one byte");
    }
    try {
      return take(into, Math.min(timeoutNanos, TimeUnit.DAYS.toNanos(1)));
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
      throw new LinkException(
          LinkException.Kind.CLOSED, description + ": waiting for the board was interrupted", e);
    }
  }
}
