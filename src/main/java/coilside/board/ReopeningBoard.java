package coilside.board;

import coilside.shot.Shot;
import coilside.signal.Scan;
import java.util.OptionalDouble;

/**
 * A board that is opened again after its link was lost: the next shot looks for the same board with
 * growing pauses, recognises it, arms it if it was armed, and goes on.
 *
 * <p>Used from one thread at a time; {@link #stop()} and {@link #close()} from any.
 */
public final class ReopeningBoard implements Board {
  private static final long FIRST_PAUSE_MILLIS = 200;
  private static final long LONGEST_PAUSE_MILLIS = 5000;

  /** Opens the board, at first and again. */
  @FunctionalInterface
  public interface Opener {
    Board open() throws BoardException;
  }

  /** Waits; injected, so that tests need not sleep. */
  @FunctionalInterface
  public interface Pause {
    void millis(long milliseconds) throws InterruptedException;
  }

  private final Opener opener;
  private final Pause pause;
  private final int attempts;
  private final BoardIdentity identity;
  private final BoardLimits limits;
  private volatile Board current;
  private volatile boolean wasArmed;
  private volatile boolean closed;
  private volatile boolean stopped;

  /**
   * @param opener how it is opened
   * @param attempts how often it is tried before a shot fails
   * @param pause how to wait between attempts
   */
  public ReopeningBoard(Opener opener, int attempts, Pause pause) throws BoardException {
    this.opener = opener;
    this.attempts = attempts;
    this.pause = pause;
    this.current = opener.open();
    this.identity = current.identity();
    this.limits = current.limits();
    this.wasArmed = current.armed();
  }

  @Override
  public BoardIdentity identity() {
    return identity;
  }

  @Override
  public BoardLimits limits() {
    return limits;
  }

  @Override
  public boolean armed() {
    return wasArmed;
  }

  @Override
  public void arm() {
    wasArmed = true;
    Board board = current;
    if (board != null) {
      board.arm();
    }
  }

  @Override
  public void disarm() {
    wasArmed = false;
    Board board = current;
    if (board != null) {
      board.disarm();
    }
  }

  @Override
  public Scan play(Shot shot) throws BoardException {
    stopped = false;
    Board board = current == null ? reopen() : current;
    try {
      return board.play(shot);
    } catch (BoardException.LinkLost | BoardException.Silent e) {
      letGo(board);
      throw e;
    }
  }

  private void letGo(Board board) {
    board.close();
    current = null;
  }

  private Board reopen() throws BoardException {
    long wait = FIRST_PAUSE_MILLIS;
    BoardException last = null;
    for (int i = 0; i < attempts; i++) {
      if (closed || stopped) {
        throw new BoardException.Stopped("stopped while looking for the board again");
      }
      try {
        Board board = opener.open();
        if (!board.identity().name().equals(identity.name())) {
          String other = board.identity().name();
          board.close();
          throw new BoardException.Unreachable(
              "another board answers now: '"
                  + other
                  + "' instead of '"
                  + identity.name()
                  + "'; plug the first one in again");
        }
        if (wasArmed) {
          board.arm();
        }
        current = board;
        return board;
      } catch (BoardException e) {
        last = e;
      }
      try {
        pause.millis(wait);
      } catch (InterruptedException e) {
        Thread.currentThread().interrupt();
        throw new BoardException.Stopped("interrupted while looking for the board again");
      }
      wait = Math.min(2 * wait, LONGEST_PAUSE_MILLIS);
    }
    throw last;
  }

  @Override
  public OptionalDouble temperature() throws BoardException {
    Board board = current;
    return board == null ? OptionalDouble.empty() : board.temperature();
  }

  @Override
  public void stop() {
    stopped = true;
    Board board = current;
    if (board != null) {
      board.stop();
    }
  }

  @Override
  public void close() {
    closed = true;
    Board board = current;
    if (board != null) {
      board.close();
    }
  }
}
