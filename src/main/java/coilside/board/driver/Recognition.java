package coilside.board.driver;

import coilside.board.BoardException;
import coilside.board.BoardException.BadAnswer;
import coilside.board.BoardException.Silent;
import coilside.board.driver.Conversation.Outgoing;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.Identification;
import coilside.board.wire.Clean;
import coilside.board.wire.WireEvent;
import java.util.Locale;
import java.util.Map;
import java.util.Optional;

/** Greets a board and finds out whether it is the one of the profile. */
final class Recognition {
  private static final int TRIES = 3;

  private final DeviceProfile profile;
  private final Conversation conversation;

  Recognition(DeviceProfile profile, Conversation conversation) {
    this.profile = profile;
    this.conversation = conversation;
  }

  /**
   * What the board calls itself.
   *
   * @throws BoardException silent, or another board than the profile says
   */
  String identify(boolean simulated) throws BoardException {
    Identification how = profile.identification();
    double limit = profile.replies().timeLimitSeconds();
    String greeted = greeting(simulated, how, limit);
    if (how.ask().isEmpty()) {
      return greeted;
    }
    Outgoing question =
        new Outgoing(conversation.encode(how.ask().get(), Map.of()), Optional.of(how.expect()));
    BoardException last = null;
    for (int i = 0; i < TRIES; i++) {
      conversation.forget();
      try {
        return nameIn(conversation.ask(question, limit));
      } catch (Silent | BadAnswer e) {
        last = e;
      }
    }
    throw last;
  }

  private String greeting(boolean simulated, Identification how, double limit)
      throws BoardException {
    boolean mustTell = how.ask().isEmpty();
    conversation.await(mustTell ? Optional.of(how.expect()) : profile.greeting());
    double patience = mustTell ? profile.settleSeconds() + limit : profile.settleSeconds();
    if (simulated && !mustTell) {
      patience = 0;
    }
    long end = conversation.inSeconds(patience);
    boolean waits = mustTell || profile.greeting().isPresent();
    while (true) {
      Optional<WireEvent> event = conversation.next(end);
      if (event.isEmpty()) {
        break;
      }
      if (waits && event.get() instanceof WireEvent.Answer answer) {
        return nameIn(answer.fields());
      }
    }
    if (mustTell) {
      throw new Silent(
          String.format(
              Locale.ROOT,
              "the board did not greet within %.3g s; reset it, or check port, speed and line ends",
              patience));
    }
    return "";
  }

  private String nameIn(Map<String, String> fields) {
    return Clean.text(fields.getOrDefault("name", profile.name()).strip());
  }

  /** Asks once more who is there; empty where the profile has no question. */
  Optional<String> again() throws BoardException {
    if (profile.identification().ask().isEmpty()) {
      return Optional.empty();
    }
    String name = nameIn(conversation.ask(question(), profile.replies().timeLimitSeconds()));
    conversation.await(Optional.empty());
    return Optional.of(name);
  }

  private Outgoing question() throws BoardException {
    Identification how = profile.identification();
    return new Outgoing(
        conversation.encode(how.ask().orElseThrow(), Map.of()), Optional.of(how.expect()));
  }
}
