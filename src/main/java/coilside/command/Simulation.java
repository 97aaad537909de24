package coilside.command;

import coilside.board.link.Link;
import coilside.board.profile.DeviceProfile;

/** The simulated bench in this process. */
final class Simulation {
  private Simulation() {}

  static Link link(DeviceProfile profile, CommonOptions options) {
    throw new UsageException("the simulated bench is not in this build");
  }
}
