package coilside.command;

import coilside.board.Board;
import coilside.board.BoardException;
import coilside.board.driver.Boards;
import coilside.board.driver.ReconnectingBoard;
import coilside.board.link.Link;
import coilside.board.link.LinkException;
import coilside.board.link.Reopening;
import coilside.board.link.WireLog;
import coilside.board.profile.DeviceProfile;
import java.io.IOException;
import java.time.Clock;
import java.time.InstantSource;

/** Finds out which board is meant and opens it. */
final class OpenBoard {
  private OpenBoard() {}

  /** What is to be opened, checked as far as it can be without touching a port. */
  record Prepared(BoardAddress address, DeviceProfile profile, CommonOptions options) {
    Board open() throws BoardException {
      Board board =
          Boards.open(
              profile, logged(line()), System::nanoTime, Clock.systemUTC(), address.simulated());
      return address.simulated()
          ? board
          : new ReconnectingBoard(board, profile, reopening(), System::nanoTime, Clock.systemUTC());
    }

    private Link line() throws BoardException {
      return address.simulated() ? Simulation.link(profile, options) : Links.open(address, profile);
    }

    private Reopening reopening() {
      return new Reopening(
          () -> {
            try {
              return Links.open(address, profile);
            } catch (BoardException e) {
              throw new LinkException(LinkException.Kind.MISSING, e.getMessage(), e);
            }
          },
          System::nanoTime);
    }

    private Link logged(Link link) throws BoardException {
      if (options.wireLog == null) {
        return link;
      }
      try {
        return WireLog.over(link, options.wireLog, InstantSource.system(), System::nanoTime);
      } catch (IOException e) {
        link.close();
        throw new UsageException(
            "--wire-log " + options.wireLog + " cannot be written: " + e.getMessage());
      }
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
