package coilside.board.driver;

import coilside.board.Board;
import coilside.board.BoardException;
import coilside.board.BoardException.LinkLost;
import coilside.board.BoardException.Stopped;
import coilside.board.BoardException.Unreachable;
import coilside.board.BoardIdentity;
import coilside.board.BoardLimits;
import coilside.board.link.Link;
import coilside.board.link.LinkException;
import coilside.board.link.Reopening;
import coilside.board.profile.DeviceProfile;
import coilside.shot.Shot;
import coilside.signal.Scan;
import java.time.Clock;
import java.util.Objects;
import java.util.OptionalDouble;
import java.util.function.LongSupplier;

/**
 * A board that is opened again after its link was lost, for logging over a pulled cable. The loss
 * itself is told; the next shot tries to open the board anew, no more often than {@link Reopening}
 * allows.
 *
 * <p>Only a board that names itself as before is taken, and it is armed again only then, if it was
 * armed before. The duty cycle starts afresh with it: the cable was out for longer than a window,
 * or the first tries fall into one that holds the transmitter's rest as well.
 */
public final class ReconnectingBoard implements Board {
  private final DeviceProfile profile;
  private final Reopening reopening;
  private final LongSupplier nanoClock;
  private final Clock wallClock;
  private final BoardIdentity first;
  private volatile Board board;
  private volatile boolean lost;
  private volatile boolean armed;
  private volatile boolean closed;

  /**
   * @param board open now; belongs to this one from here on
   * @param profile how it is spoken to
   * @param reopening how its link is opened again
   */
  public ReconnectingBoard(
      Board board,
      DeviceProfile profile,
      Reopening reopening,
      LongSupplier nanoClock,
      Clock wallClock) {
    this.board = Objects.requireNonNull(board, "board");
    this.profile = profile;
    this.reopening = reopening;
    this.nanoClock = nanoClock;
    this.wallClock = wallClock;
    this.first = board.identity();
    this.armed = board.armed();
  }

  @Override
  public BoardIdentity identity() {
    return board.identity();
  }

  @Override
  public BoardLimits limits() {
    return board.limits();
  }

  @Override
  public boolean armed() {
    return armed;
  }

  @Override
  public void arm() {
    armed = true;
    board.arm();
  }

  @Override
  public void disarm() {
    armed = false;
    board.disarm();
  }

  @Override
  public Scan play(Shot shot) throws BoardException {
    reopenIfLost();
    try {
      return board.play(shot);
    } catch (LinkLost e) {
      lost = true;
      throw e;
    }
  }

  @Override
  public OptionalDouble temperature() throws BoardException {
    reopenIfLost();
    try {
      return board.temperature();
    } catch (LinkLost e) {
      lost = true;
      throw e;
    }
  }

  private void reopenIfLost() throws BoardException {
    if (closed) {
      throw new Stopped("the board has been closed; open it again");
    }
    if (!lost) {
      return;
    }
    board.close();
    Link link;
    try {
      link = reopening.open();
    } catch (LinkException e) {
      throw new Unreachable("the board has not come back: " + e.getMessage(), e);
    }
    Board again = Boards.open(profile, link, nanoClock, wallClock, false);
    if (!again.identity().name().equals(first.name())) {
      again.close();
      throw new Unreachable(
          "where the board '"
              + first.name()
              + "' was, another one answers: '"
              + again.identity().name()
              + "'; plug the first one in again");
    }
    board = again;
    if (closed) {
      again.close();
      throw new Stopped("the board was closed while it was opened again");
    }
    if (armed) {
      again.arm();
    }
    lost = false;
  }

  @Override
  public void stop() {
    board.stop();
  }

  @Override
  public void close() {
    closed = true;
    board.close();
  }
}
