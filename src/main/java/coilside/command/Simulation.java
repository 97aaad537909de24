package coilside.command;

import coilside.board.link.Link;
import coilside.board.profile.DeviceProfile;
import coilside.board.simulated.Firmware;
import coilside.board.simulated.Scenario;
import coilside.board.simulated.ScenarioReader;
import coilside.board.simulated.ScenarioReading;
import coilside.board.simulated.SimulatedBoards;
import java.nio.file.Files;
import java.nio.file.Path;

/** The simulated bench: a firmware that speaks the profile in front of the scenario's magnet. */
final class Simulation {
  private Simulation() {}

  /** A simulated board in this process; closing the link ends it. */
  static Link link(DeviceProfile profile, CommonOptions options) {
    return SimulatedBoards.inProcess(
        firmware(profile, options.scenario, options.seed, options.paced));
  }

  static Firmware firmware(DeviceProfile profile, String scenario, long seed, boolean paced) {
    try {
      return SimulatedBoards.firmware(profile, scenario(scenario), seed, paced);
    } catch (IllegalArgumentException e) {
      throw new UsageException(
          "the profile '" + profile.name() + "' cannot be simulated: " + e.getMessage());
    }
  }

  private static Scenario scenario(String name) {
    String wanted = name == null ? ScenarioReader.DEFAULT : name;
    if (ScenarioReader.shipped().contains(wanted) && !Files.exists(Path.of(wanted))) {
      return ScenarioReader.named(wanted);
    }
    if (!Files.exists(Path.of(wanted))) {
      throw new UsageException(
          "there is no scenario '"
              + wanted
              + "': give a file, or one of the shipped "
              + String.join(", ", ScenarioReader.shipped()));
    }
    ScenarioReading reading = ScenarioReader.read(Path.of(wanted));
    return reading
        .scenario()
        .orElseThrow(
            () ->
                new UsageException(
                    "the scenario is not sound:\n  "
                        + reading.problems().stream()
                            .map(p -> p.message())
                            .collect(java.util.stream.Collectors.joining("\n  "))));
  }
}
