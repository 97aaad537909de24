package coilside.command;

import coilside.board.Board;
import coilside.board.BoardException;
import coilside.board.driver.Boards;
import coilside.board.driver.ReconnectingBoard;
import coilside.board.link.Link;
import coilside.board.link.Reopening;
import coilside.board.link.WireLog;
import coilside.board.profile.DeviceProfile;
import java.io.IOException;
import java.nio.file.Files;
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
              profile,
              line(address, profile, options),
              System::nanoTime,
              Clock.systemUTC(),
              address.simulated());
      return address.simulated()
          ? board
          : new ReconnectingBoard(board, profile, reopening(), System::nanoTime, Clock.systemUTC());
    }

    private Reopening reopening() {
      return new Reopening(Links.again(address, profile), System::nanoTime);
    }
  }

  /** Opens the line to a board, or to the simulated one, and logs it where that is asked for. */
  static Link line(BoardAddress address, DeviceProfile profile, CommonOptions options)
      throws BoardException {
    if (options.wireLog != null && Files.exists(options.wireLog)) {
      throw new UsageException(
          "--wire-log "
              + options.wireLog
              + " exists already and is not written over: give another name, or move it away");
    }
    Link link =
        address.simulated() ? Simulation.link(profile, options) : Links.open(address, profile);
    if (options.wireLog == null) {
      return link;
    }
    try {
      return WireLog.over(link, options.wireLog, InstantSource.system(), System::nanoTime);
    } catch (IOException e) {
      link.close();
      throw new UsageException(
          "--wire-log "
              + options.wireLog
              + " cannot be written ("
              + e.getClass().getSimpleName().replace("Exception", "")
              + "): give a file in a folder that exists and is yours");
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
