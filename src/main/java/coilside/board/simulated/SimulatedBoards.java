package coilside.board.simulated;

import coilside.board.link.Link;
import coilside.board.link.MemoryLink;
import coilside.board.profile.DeviceProfile;
import java.util.function.LongSupplier;

/** Simulated boards ready to be talked to. */
public final class SimulatedBoards {
  private static final int QUEUE_BYTES = 1 << 22;

  private SimulatedBoards() {}

  /**
   * A board in this process, in front of a bench.
   *
   * @param profile how it speaks
   * @param bench what it measures; belongs to the board's own thread from here on
   * @param paced true when it takes as long as a real one
   * @param faults what goes wrong with it
   * @param nanos a steady clock, ns, such as System::nanoTime
   * @return the host's end of the link; closing it ends the board
   */
  public static Link inProcess(
      DeviceProfile profile,
      AnalogBench bench,
      boolean paced,
      FirmwareFaults faults,
      LongSupplier nanos) {
    MemoryLink.Pair pair =
        MemoryLink.pair("in this process", QUEUE_BYTES, java.time.Duration.ofSeconds(5));
    Firmware firmware = new Firmware(profile, new FirmwareAdc(profile, bench), paced, faults);
    FirmwareServer.over(pair.far(), firmware, nanos);
    return pair.near();
  }
}
