package coilside.board.driver;

import coilside.board.Board;
import coilside.board.BoardException;
import coilside.board.GuardedBoard;
import coilside.board.link.Link;
import coilside.board.profile.DeviceProfile;
import java.time.Clock;
import java.util.function.LongSupplier;

/**
 * Opens boards: the one place where a profile and a link become a {@link Board}, behind the guard.
 */
public final class Boards {
  private Boards() {}

  /**
   * Recognises the board at the other end of a link and puts the guard in front of it. The link
   * belongs to the board from here on: it is closed when this fails, and with the board.
   *
   * @param profile how the board is spoken to
   * @param link open, nothing sent yet
   * @param nanoClock for deadlines and the duty cycle, ns, such as System::nanoTime
   * @param wallClock for the time a scan was started
   * @param simulated true only for the simulated bench in this process: it starts armed
   * @return the board, disarmed unless simulated
   * @throws BoardException board silent, wrong answer, link lost
   */
  public static Board open(
      DeviceProfile profile, Link link, LongSupplier nanoClock, Clock wallClock, boolean simulated)
      throws BoardException {
    ProfilePlayer player = new ProfilePlayer(profile, link, nanoClock, wallClock);
    boolean opened = false;
    try {
      player.open(simulated);
      opened = true;
    } finally {
      if (!opened) {
        link.close();
      }
    }
    return new GuardedBoard(player, profile.limits(), nanoClock, !simulated);
  }
}
