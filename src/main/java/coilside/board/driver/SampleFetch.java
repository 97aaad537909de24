package coilside.board.driver;

import coilside.board.BoardException;
import coilside.board.BoardException.BadAnswer;
import coilside.board.BoardException.Silent;
import coilside.board.driver.Conversation.Outgoing;
import coilside.board.profile.Command;
import coilside.board.profile.CommandName;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.Replies;
import coilside.board.profile.SampleBlocks;
import coilside.board.profile.ValueName;
import coilside.board.wire.WireEvent;
import coilside.shot.Shot;
import java.util.Arrays;
import java.util.List;
import java.util.Map;
import java.util.Optional;

/** Waits for what a run sends back: its confirmation, the sample blocks, the end mark. */
final class SampleFetch {
  private static final double SLOWEST_NETWORK_BYTES_PER_SECOND = 100_000;

  private final DeviceProfile profile;
  private final Conversation conversation;
  private final ShotWriter writer;
  private byte[] lastBlock = {};

  SampleFetch(DeviceProfile profile, Conversation conversation, ShotWriter writer) {
    this.profile = profile;
    this.conversation = conversation;
    this.writer = writer;
  }

  /** The bytes of the sample block that came last; empty before the first. Do not change. */
  byte[] lastBlock() {
    return lastBlock;
  }

  /** When all of a scan must be there: the shot, the wire and the time limit of replies. */
  long deadline(Shot shot, int[] lengths) {
    long bytes = Arrays.stream(lengths).asLongStream().sum() + 256L * lengths.length;
    double perSecond =
        profile.serial().map(s -> s.speedBaud() / 10.0).orElse(SLOWEST_NETWORK_BYTES_PER_SECOND);
    double wireSeconds = 1.5 * bytes / Math.min(perSecond, SLOWEST_NETWORK_BYTES_PER_SECOND);
    return conversation.inSeconds(
        shot.seconds() + wireSeconds + profile.replies().timeLimitSeconds());
  }

  void acknowledged(Outgoing run, long deadline) throws BoardException {
    while (true) {
      WireEvent event =
          conversation
              .next(deadline)
              .orElseThrow(
                  () ->
                      new Silent(
                          "the board did not answer '" + run.text() + "' in time; it may hang"));
      if (event instanceof WireEvent.Answer) {
        conversation.await(Optional.empty());
        return;
      }
      trouble(event, run.text());
    }
  }

  /** Fetches all blocks of a scan into the builder. */
  void fetchAll(ScanBuilder builder, long deadline) throws BoardException {
    Optional<Command> fetch = profile.command(CommandName.FETCH);
    boolean each =
        fetch.map(c -> c.template().mentions(ValueName.WINDOW)).orElse(false)
            && profile.blocks().per() == SampleBlocks.Per.WINDOW;
    int blocks = builder.blockLengths().length;
    long heard = conversation.bytesHeard();
    for (int i = 0; i < blocks; i++) {
      if (fetch.isPresent() && (each || i == 0)) {
        conversation.send(
            writer.named(CommandName.FETCH, Map.of(ValueName.WINDOW, (double) i)).bytes());
      }
      WireEvent.SampleBlock block = block(i, blocks, deadline, heard);
      lastBlock = block.bytes();
      builder.block(block.index(), block.bytes());
    }
    while (profile.blocks().endMark().isPresent()) {
      WireEvent event =
          conversation
              .next(deadline)
              .orElseThrow(() -> new BadAnswer("the end mark after the samples did not come."));
      if (event instanceof WireEvent.EndMark) {
        break;
      }
      trouble(event, "the samples");
    }
  }

  private WireEvent.SampleBlock block(int index, int blocks, long deadline, long heardBefore)
      throws BoardException {
    while (true) {
      Optional<WireEvent> event = conversation.next(deadline);
      if (event.isEmpty()) {
        throw missing(index, blocks, heardBefore);
      }
      if (event.get() instanceof WireEvent.SampleBlock block) {
        return block;
      }
      trouble(event.get(), "the shot");
    }
  }

  private static void trouble(WireEvent event, String what) throws BoardException {
    if (event instanceof WireEvent.ErrorReply error) {
      throw Conversation.refused("'" + what + "'", List.of(error));
    }
    if (event instanceof WireEvent.Damaged damaged) {
      throw new BadAnswer("the samples came back damaged: " + damaged.why() + ".");
    }
    if (event instanceof WireEvent.EndMark) {
      throw new BadAnswer("the end mark came before all samples had come.");
    }
  }

  private BoardException missing(int index, int blocks, long heardBefore) throws BoardException {
    if (conversation.bytesHeard() > heardBefore) {
      String heard = conversation.lastHeard();
      return new BadAnswer(
          "sample block "
              + (index + 1)
              + " of "
              + blocks
              + " did not come whole"
              + (heard.isEmpty() ? "." : "; the board said '" + heard + "'."));
    }
    if (profile.replies().mode() == Replies.Mode.ASKED) {
      conversation.forget();
      List<WireEvent.ErrorReply> errors = conversation.errors();
      if (!errors.isEmpty()) {
        return Conversation.refused("the shot", errors);
      }
    }
    return new Silent(
        "the board sent no samples in the time of the shot and its answer; check that it is still"
            + " powered and has not been reset");
  }
}
