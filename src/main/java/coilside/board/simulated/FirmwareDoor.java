package coilside.board.simulated;

import coilside.board.link.Link;
import coilside.board.link.LinkException;
import coilside.board.link.TcpListener;
import java.nio.charset.StandardCharsets;
import java.time.Duration;
import java.util.Optional;
import java.util.concurrent.Semaphore;
import java.util.concurrent.SynchronousQueue;
import java.util.concurrent.TimeUnit;

/**
 * The door of a board on TCP: one program is let in at a time, another is told in one line of text
 * who is there, and turned away. A daemon thread of its own takes the callers.
 */
final class FirmwareDoor {
  private static final Duration ACCEPT_WAIT = Duration.ofMillis(200);

  /** A program that has hung up is noticed by the board a little later. */
  private static final long GRACE_SECONDS = 1;

  /** So long a caller that was turned away may take to read why. */
  private static final long READING_NANOS = TimeUnit.SECONDS.toNanos(2);

  private final TcpListener listener;
  private final SynchronousQueue<Link> inside = new SynchronousQueue<>();
  private final Semaphore place = new Semaphore(1);
  private volatile String guest = "";
  private volatile LinkException end;

  FirmwareDoor(TcpListener listener) {
    this.listener = listener;
    Thread thread = new Thread(this::receive, "coilside door of " + listener.address());
    thread.setDaemon(true);
    thread.start();
  }

  /** The next caller; empty where none has come for a while. */
  Optional<Link> next() throws LinkException {
    try {
      Link link = inside.poll(ACCEPT_WAIT.toMillis(), TimeUnit.MILLISECONDS);
      if (link == null && end != null) {
        throw end;
      }
      return Optional.ofNullable(link);
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
      throw new LinkException(LinkException.Kind.CLOSED, "waiting for a caller was interrupted", e);
    }
  }

  /** The one who was let in has gone. */
  void left() {
    place.release();
  }

  private void receive() {
    try {
      while (true) {
        Optional<Link> caller = listener.accept(ACCEPT_WAIT);
        if (caller.isEmpty()) {
          continue;
        }
        if (place.tryAcquire(GRACE_SECONDS, TimeUnit.SECONDS)) {
          guest = caller.get().description();
          inside.put(caller.get());
        } else {
          turnAway(caller.get());
        }
      }
    } catch (LinkException e) {
      end = e;
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
    }
  }

  private void turnAway(Link caller) {
    String why = "busy: in use by " + guest + ", one program at a time\r\n";
    try (caller) {
      caller.send(why.getBytes(StandardCharsets.US_ASCII));
      byte[] ignored = new byte[256];
      long until = System.nanoTime() + READING_NANOS;
      // Closing on bytes that were not read could take the line back before it arrives.
      while (System.nanoTime() < until) {
        caller.receive(ignored, Math.max(0, until - System.nanoTime()));
      }
    } catch (LinkException e) {
      // It has gone by itself.
    }
  }
}
