package coilside.board.link;

import java.time.Duration;
import java.util.Objects;
import java.util.function.LongSupplier;

/**
 * Opens a lost line again, no more often than growing pauses allow: 50 ms after the first failure,
 * then twice as long each time, up to a longest pause. It does not wait: whoever asks too early is
 * told the last reason again.
 */
public final class Reopening {
  /** The first pause, as short as a port may be tried again. */
  public static final Duration FIRST_PAUSE = Duration.ofMillis(50);

  /** The longest pause. */
  public static final Duration LONGEST_PAUSE = Duration.ofSeconds(5);

  private final Opener opener;
  private final LongSupplier nanos;
  private long pauseNanos;
  private long notBeforeNanos;
  private LinkException last;

  /** How the line is opened. */
  @FunctionalInterface
  public interface Opener {
    /** Opens it anew. */
    Link open() throws LinkException;
  }

  /**
   * @param opener opens the line
   * @param nanos a steady clock, ns
   */
  public Reopening(Opener opener, LongSupplier nanos) {
    this.opener = Objects.requireNonNull(opener, "opener");
    this.nanos = Objects.requireNonNull(nanos, "nanos");
  }

  /** A serial port, found again by its USB numbers or its path. */
  public static Opener serial(
      PortIdentity identity, SerialSettings settings, PortLocks locks, Ports ports) {
    return () -> SerialLink.open(identity.find(ports), settings, locks);
  }

  /**
   * Tries once, unless it is too early.
   *
   * @throws LinkException why not
   */
  public Link open() throws LinkException {
    if (last != null && nanos.getAsLong() - notBeforeNanos < 0) {
      throw ByteQueue.again(last);
    }
    try {
      Link link = opener.open();
      last = null;
      pauseNanos = 0;
      return link;
    } catch (LinkException e) {
      last = e;
      pauseNanos =
          pauseNanos == 0
              ? FIRST_PAUSE.toNanos()
              : Math.min(2 * pauseNanos, LONGEST_PAUSE.toNanos());
      notBeforeNanos = nanos.getAsLong() + pauseNanos;
      throw e;
    }
  }

  /** How long until the next try may be made, ns; 0 for now. */
  public long waitNanos() {
    return last == null ? 0 : Math.max(0, notBeforeNanos - nanos.getAsLong());
  }
}
