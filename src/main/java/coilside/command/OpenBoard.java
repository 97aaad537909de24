package coilside.command;

import coilside.board.Board;
import coilside.board.BoardException;
import coilside.board.driver.Boards;
import coilside.board.link.Link;
import coilside.board.profile.DeviceProfile;
import java.time.Clock;

/** Finds out which board is meant and opens it. */
final class OpenBoard {
  private OpenBoard() {}

  /** What is to be opened, checked as far as it can be without touching a port. */
  record Prepared(BoardAddress address, DeviceProfile profile, CommonOptions options) {
    Board open() throws BoardException {
      boolean simulated = address.simulated();
      Link link = simulated ? Simulation.link(profile, options) : Links.open(address, profile);
      return Boards.open(profile, link, System::nanoTime, Clock.systemUTC(), simulated);
    }
  }

  static Prepared prepare(CommonOptions options) {
    BoardAddress address = BoardAddress.parse(options.board);
    DeviceProfile profile = Profiles.read(address.profile());
    if (!address.simulated() && options.scenario != null) {
      throw new UsageException(
          "--scenario is for the simulated bench, and --board names a real port: leave one out");
    }
    return new Prepared(address, profile, options);
  }
}
