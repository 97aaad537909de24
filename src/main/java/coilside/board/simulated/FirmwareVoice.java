package coilside.board.simulated;

import coilside.board.profile.Command;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.Expectation;
import coilside.board.profile.Framing;
import coilside.board.profile.Replies;
import java.nio.charset.StandardCharsets;
import java.util.ArrayDeque;
import java.util.Deque;
import java.util.Map;

/**
 * What the board says: confirmations and errors in the profile's reply mode, in the order they are
 * to leave, with the remarks and the rubbish that are wanted in between.
 */
final class FirmwareVoice {
  private static final int LONGEST_ERROR_QUEUE = 16;

  private final DeviceProfile profile;
  private final FirmwareDialect dialect;
  private final Deque<byte[]> outgoing = new ArrayDeque<>();
  private final Deque<FirmwareRefusal> errors = new ArrayDeque<>();
  private FirmwareFaults faults;
  private int answers;

  FirmwareVoice(DeviceProfile profile, FirmwareDialect dialect, FirmwareFaults faults) {
    this.profile = profile;
    this.dialect = dialect;
    this.faults = faults;
  }

  void setFaults(FirmwareFaults changed) {
    faults = changed;
  }

  /** What leaves next, in order. */
  Deque<byte[]> outgoing() {
    return outgoing;
  }

  void forgetErrors() {
    errors.clear();
  }

  void confirm(Command command) {
    if (command.silent()) {
      return;
    }
    if (command.answer().isPresent()) {
      answer(dialect.say(command.answer().get(), Map.of()));
    } else if (profile.replies().mode() == Replies.Mode.EACH) {
      profile.replies().success().ifPresent(e -> answer(dialect.say(e, Map.of())));
    }
  }

  void answerQuestion() {
    FirmwareRefusal first = errors.poll();
    if (first != null) {
      sayError(first);
    } else {
      profile.replies().success().ifPresent(e -> answer(dialect.say(e, Map.of())));
    }
  }

  void refuse(FirmwareRefusal e) {
    if (profile.replies().mode() != Replies.Mode.ASKED) {
      sayError(e);
    } else if (errors.size() < LONGEST_ERROR_QUEUE) {
      errors.add(e);
    } else {
      errors.removeLast();
      errors.add(FirmwareRefusal.queueOverflow());
    }
  }

  /** In place of an answer that cannot be given. */
  void answerWithError(FirmwareRefusal otherwise) {
    FirmwareRefusal first = errors.poll();
    sayError(first == null ? otherwise : first);
  }

  private void sayError(FirmwareRefusal e) {
    if (profile.replies().error().isEmpty()) {
      return;
    }
    Expectation error = profile.replies().error().get();
    String text = e.getMessage().length() > 200 ? e.getMessage().substring(0, 200) : e.getMessage();
    String line = dialect.say(error, Map.of("code", e.code(), "text", text));
    boolean fits =
        error instanceof Expectation.LinePattern p && p.pattern().match(line).isPresent();
    answer(fits ? line : dialect.say(error, Map.of("code", Math.abs(e.code()), "text", text)));
  }

  void answer(String message) {
    answers++;
    if (faults.rubbishBeforeOneAnswerIn() > 0 && answers % faults.rubbishBeforeOneAnswerIn() == 0) {
      outgoing.add(rubbish());
    }
    if (!faults.remark().isEmpty() && answers == faults.remarkBeforeAnswer()) {
      outgoing.add(dialect.wrap(faults.remark()));
    }
    outgoing.add(dialect.wrap(message));
  }

  private byte[] rubbish() {
    return profile.framing() instanceof Framing.Lines
        ? dialect.wrap("@\u00ff~#9\u001b[2J??")
        : "\u0007\u0001\u00ff#rubbish\u0000".getBytes(StandardCharsets.ISO_8859_1);
  }
}
