package coilside.board.simulated;

import coilside.board.Board;
import coilside.board.BoardException;
import coilside.board.driver.Boards;
import coilside.board.link.Link;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.ProfileReader;
import java.io.IOException;
import java.io.InputStream;
import java.io.UncheckedIOException;
import java.time.Clock;

/**
 * A board in this process, reached through driver and firmware as a real one is, whose simulated
 * truth a test may look at. Its bench's time is the simulated one.
 */
public final class ObservedBoard implements AutoCloseable {
  private final Scenario scenario;
  private final SimulatedBench bench;
  private final DeviceProfile profile;
  private final Board board;

  private ObservedBoard(Scenario scenario, DeviceProfile profile, long seed) throws BoardException {
    this.scenario = scenario;
    this.profile = profile;
    this.bench = new SimulatedBench(scenario, SimulatedDigitiser.of(profile.samples()), seed);
    Link link =
        SimulatedBoards.inProcess(new Firmware(profile, bench, false, FirmwareFaults.none()));
    this.board = Boards.open(profile, link, System::nanoTime, Clock.systemUTC(), true);
  }

  /** Opens and arms a board of a shipped profile. */
  public static ObservedBoard open(Scenario scenario, String profile, long seed)
      throws BoardException {
    ObservedBoard out = new ObservedBoard(scenario, profile(profile), seed);
    out.board.arm();
    return out;
  }

  private static DeviceProfile profile(String name) {
    try (InputStream in =
        ObservedBoard.class.getResourceAsStream("/device-profiles/" + name + ".toml")) {
      return ProfileReader.read(name + ".toml", in.readAllBytes()).profile().orElseThrow();
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    }
  }

  public Board board() {
    return board;
  }

  public DeviceProfile profile() {
    return profile;
  }

  public Scenario scenario() {
    return scenario;
  }

  public SimulatedTruth truth() {
    return bench.truth();
  }

  /** Amplitude time constant of the coil's ringing, s. */
  public double ringSeconds() {
    return scenario.coil().ringSeconds();
  }

  /**
   * Mean gain (rms) of the receiver's two channels over the nominal one: a receiver whose channels
   * differ has the noise of both.
   */
  public double channelGain() {
    double q = 1 + scenario.receiver().gainError();
    return Math.sqrt((1 + q * q) / 2);
  }

  /** Simulated time since the bench was switched on, s. */
  public double nowSeconds() {
    return bench.nowSeconds();
  }

  @Override
  public void close() {
    board.close();
  }
}
