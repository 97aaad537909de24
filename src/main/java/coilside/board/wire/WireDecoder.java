package coilside.board.wire;

import coilside.board.profile.DeviceProfile;
import coilside.board.profile.Expectation;
import coilside.board.profile.Framing;
import java.util.function.Consumer;

/**
 * Turns bytes from a board into {@link WireEvent}s, piece by piece, in whatever pieces they come.
 *
 * <p>It never throws for what the bytes say and never holds more than one longest message and one
 * expected block. After damage it goes on at the next good message.
 */
public interface WireDecoder {
  /**
   * What {@link WireEvent.Answer} means from now on; null where no answer is waited for. Takes
   * precedence over errors, so that an answer may look like one.
   */
  void await(Expectation answer);

  /**
   * Sample blocks are expected from now on, with these lengths in bytes, in this order. Before
   * this, and after the last one, none is believed.
   */
  void expectBlocks(int[] lengths);

  /** Tells what was sent, for boards that send it back before they answer. */
  default void sent(byte[] command) {}

  /** Takes bytes; events are handed to the consumer before this returns. */
  void feed(byte[] bytes, int offset, int length, Consumer<WireEvent> events);

  /** Forgets half-finished messages and expected blocks. */
  void reset();

  /** The decoder for a profile's framing. */
  static WireDecoder of(DeviceProfile profile) {
    return profile.framing() instanceof Framing.Cobs
        ? new FrameDecoder(profile)
        : new LineDecoder(profile);
  }
}
