package coilside.board.simulated;

import coilside.board.link.Link;
import coilside.board.link.MemoryLink;
import coilside.board.profile.DeviceProfile;
import java.time.Duration;

/** Simulated boards ready to be talked to: a scenario's bench behind a profile's firmware. */
public final class SimulatedBoards {
  private static final int QUEUE_BYTES = 1 << 22;
  private static final Duration WRITE_LIMIT = Duration.ofSeconds(5);

  private SimulatedBoards() {}

  /**
   * A board in this process, served by a daemon thread of its own.
   *
   * @param profile how it speaks
   * @param scenario what it measures
   * @param seed of the noise
   * @param paced true when it takes as long as a real one
   * @return the host's end of the link; closing it ends the board
   * @throws IllegalArgumentException the profile does not say how its board's answers look
   */
  public static Link inProcess(DeviceProfile profile, Scenario scenario, long seed, boolean paced) {
    return inProcess(firmware(profile, scenario, seed, paced));
  }

  /** A board in this process whose firmware is given: to make it fail in a chosen way. */
  public static Link inProcess(Firmware firmware) {
    MemoryLink.Pair pair = MemoryLink.pair("in this process", QUEUE_BYTES, WRITE_LIMIT);
    FirmwareServer.over(pair.far(), firmware, System::nanoTime);
    return pair.near();
  }

  /**
   * The firmware of a board in front of a scenario's bench, to be served on a pseudo-terminal or on
   * TCP by {@link FirmwareServer}.
   */
  public static Firmware firmware(
      DeviceProfile profile, Scenario scenario, long seed, boolean paced) {
    SimulatedBench bench =
        new SimulatedBench(scenario, SimulatedDigitiser.of(profile.samples()), seed);
    return new Firmware(profile, bench, paced, FirmwareFaults.none());
  }
}
