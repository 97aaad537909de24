package coilside.command;

import coilside.board.link.Link;
import coilside.board.link.MemoryLink;
import coilside.board.profile.DeviceProfile;
import coilside.board.simulated.Firmware;
import coilside.board.simulated.FirmwareFaults;
import coilside.board.simulated.FirmwareServer;
import coilside.board.simulated.Scenario;
import coilside.board.simulated.ScenarioReader;
import coilside.board.simulated.ScenarioReading;
import coilside.board.simulated.SimulatedBench;
import coilside.board.simulated.SimulatedDigitiser;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;

/** The simulated bench: a firmware that speaks the profile in front of the scenario's magnet. */
final class Simulation {
  private static final int QUEUE_BYTES = 1 << 22;
  private static final Duration WRITE_LIMIT = Duration.ofSeconds(5);

  private Simulation() {}

  /** A simulated board in this process; closing the link ends it. */
  static Link link(DeviceProfile profile, CommonOptions options) {
    MemoryLink.Pair pair = MemoryLink.pair("in this process", QUEUE_BYTES, WRITE_LIMIT);
    FirmwareServer.over(
        pair.far(),
        firmware(profile, options.scenario, options.seed, options.paced),
        System::nanoTime);
    return pair.near();
  }

  static Firmware firmware(DeviceProfile profile, String scenario, long seed, boolean paced) {
    try {
      return new Firmware(
          profile,
          new SimulatedBench(scenario(scenario), SimulatedDigitiser.of(profile.samples()), seed),
          paced,
          FirmwareFaults.none());
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
