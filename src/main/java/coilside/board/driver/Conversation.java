package coilside.board.driver;

import coilside.board.BoardException;
import coilside.board.BoardException.BadAnswer;
import coilside.board.BoardException.LinkLost;
import coilside.board.BoardException.Refused;
import coilside.board.BoardException.Silent;
import coilside.board.BoardException.Stopped;
import coilside.board.link.Link;
import coilside.board.link.LinkException;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.Expectation;
import coilside.board.profile.Replies;
import coilside.board.profile.Template;
import coilside.board.wire.Clean;
import coilside.board.wire.CommandEncoder;
import coilside.board.wire.WireDecoder;
import coilside.board.wire.WireEvent;
import java.nio.charset.StandardCharsets;
import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Deque;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.Optional;
import java.util.function.LongSupplier;

/**
 * Bytes out and events in over one link, with deadlines on the injected clock. Used by one thread
 * at a time, all but {@link #requestStop}.
 */
final class Conversation {
  private static final long SLICE_NANOS = 20_000_000;
  private static final int MOST_ERRORS = 16;

  private final DeviceProfile profile;
  private final Link link;
  private final LongSupplier nanoClock;
  private final CommandEncoder encoder;
  private final WireDecoder decoder;
  private final Deque<WireEvent> pending = new ArrayDeque<>();
  private final byte[] buffer = new byte[65_536];
  private final LastWords ununderstood = new LastWords();
  private volatile boolean stopRequested;
  private String lastHeard = "";
  private long bytesHeard;

  /**
   * One command ready to be sent.
   *
   * @param bytes as they go out
   * @param answer what is to be waited for; empty where nothing comes back
   */
  record Outgoing(byte[] bytes, Optional<Expectation> answer) {
    String text() {
      return Clean.text(new String(bytes, StandardCharsets.ISO_8859_1).strip());
    }
  }

  Conversation(DeviceProfile profile, Link link, LongSupplier nanoClock) {
    this.profile = profile;
    this.link = link;
    this.nanoClock = nanoClock;
    this.encoder = new CommandEncoder(profile);
    this.decoder = WireDecoder.of(profile);
  }

  long now() {
    return nanoClock.getAsLong();
  }

  long inSeconds(double seconds) {
    return now() + (long) (Math.min(seconds, 1e6) * 1e9);
  }

  void requestStop() {
    stopRequested = true;
  }

  void clearStop() {
    stopRequested = false;
  }

  /** How many bytes have come since the beginning. */
  long bytesHeard() {
    return bytesHeard;
  }

  /** The last message nobody waited for; "" where there was none since {@link #forget}. */
  String lastHeard() {
    return lastHeard;
  }

  void expectBlocks(int[] lengths) {
    decoder.expectBlocks(lengths);
  }

  void send(byte[] bytes) throws LinkLost {
    try {
      decoder.sent(bytes);
      link.send(bytes);
    } catch (LinkException e) {
      throw lost(e);
    }
  }

  private LinkLost lost(LinkException e) {
    String last = lastText();
    return new LinkLost(
        "the link to the board on "
            + Clean.text(link.description())
            + " was lost"
            + (last.isEmpty() ? "" : " after it said '" + last + "'")
            + ": "
            + Clean.text(String.valueOf(e.getMessage()))
            + "; check cable and power, then open the board again",
        e);
  }

  /**
   * What came last, where it is a text that nobody understood: many who refuse a caller say why in
   * plain words before they hang up, whatever the board's own language.
   */
  private String lastText() {
    try {
      for (int n = 1; n > 0; ) {
        // What had come before the end is still there to be taken.
        n = link.receive(buffer, 0);
        ununderstood.add(buffer, n);
      }
    } catch (LinkException all) {
      // It has been taken.
    }
    return ununderstood.lastLine();
  }

  /**
   * The next event, or empty when the deadline passes without one.
   *
   * @throws Stopped as soon as a stop has been requested
   */
  Optional<WireEvent> next(long deadlineNanos) throws BoardException {
    while (true) {
      if (stopRequested) {
        throw new Stopped("stopped while the board was at work");
      }
      WireEvent event = pending.poll();
      if (event != null) {
        if (event instanceof WireEvent.Other other) {
          lastHeard = other.text();
        } else if (event instanceof WireEvent.Answer || event instanceof WireEvent.SampleBlock) {
          ununderstood.forget();
        }
        return Optional.of(event);
      }
      long left = deadlineNanos - now();
      if (read(Math.max(0, Math.min(left, SLICE_NANOS))) == 0 && left <= 0) {
        return Optional.empty();
      }
    }
  }

  private int read(long timeoutNanos) throws LinkLost {
    try {
      int n = link.receive(buffer, timeoutNanos);
      bytesHeard += n;
      ununderstood.add(buffer, n);
      decoder.feed(buffer, 0, n, pending::add);
      return n;
    } catch (LinkException e) {
      throw lost(e);
    }
  }

  /** Throws everything away that comes until the line has been quiet for so long. */
  void drain(double quietSeconds, double mostSeconds) throws BoardException {
    decoder.await(null);
    long end = inSeconds(mostSeconds);
    long quietSince = now();
    while (now() < end && now() - quietSince < quietSeconds * 1e9) {
      if (read(Math.min(SLICE_NANOS, (long) (quietSeconds * 1e9))) > 0) {
        quietSince = now();
      }
    }
    forget();
  }

  /** Waits while bytes are thrown away. */
  void pause(double seconds) throws BoardException {
    long end = inSeconds(seconds);
    while (next(end).isPresent()) {
      lastHeard = "";
    }
  }

  /** Forgets half messages and what was heard. */
  void forget() {
    decoder.reset();
    pending.clear();
    lastHeard = "";
  }

  Outgoing usual(Template template) throws Refused {
    return new Outgoing(encode(template, Map.of()), usualAnswer());
  }

  byte[] encode(Template template, Map<coilside.board.profile.ValueName, Double> values)
      throws Refused {
    try {
      return encoder.encode(template, values);
    } catch (CommandEncoder.Unencodable e) {
      throw new Refused("the profile '" + profile.name() + "' cannot say this: " + e.getMessage());
    }
  }

  CommandEncoder encoder() {
    return encoder;
  }

  /** What the board says to an ordinary command. */
  Optional<Expectation> usualAnswer() {
    return profile.replies().mode() == Replies.Mode.EACH
        ? profile.replies().success()
        : Optional.empty();
  }

  /** Sends a question and waits for its answer. */
  Map<String, String> ask(Outgoing question, double seconds) throws BoardException {
    decoder.await(question.answer().orElseThrow());
    send(question.bytes());
    return answer(question, inSeconds(seconds));
  }

  private Map<String, String> answer(Outgoing to, long deadline) throws BoardException {
    while (true) {
      WireEvent event = next(deadline).orElseThrow(() -> unanswered(to));
      if (event instanceof WireEvent.Answer answer) {
        return answer.fields();
      } else if (event instanceof WireEvent.ErrorReply error) {
        throw refused("'" + to.text() + "'", List.of(error));
      } else if (event instanceof WireEvent.Damaged damaged) {
        throw new BadAnswer("'" + to.text() + "' was answered by " + damaged.why() + ".");
      }
    }
  }

  private BoardException unanswered(Outgoing to) {
    String limit = String.format(Locale.ROOT, "%.3g s", profile.replies().timeLimitSeconds());
    if (lastHeard.isEmpty()) {
      return new Silent(
          "the board did not answer '"
              + to.text()
              + "' within "
              + limit
              + "; check that it is powered, that it is the right port, and speed and line ends in"
              + " the profile");
    }
    return new BadAnswer(
        "the board answered '"
            + to.text()
            + "' with '"
            + lastHeard
            + "', which is not what the profile '"
            + profile.name()
            + "' expects; check that profile and port belong together");
  }

  static Refused refused(String what, List<WireEvent.ErrorReply> errors) {
    StringBuilder out = new StringBuilder("the board refused " + what + ":");
    for (WireEvent.ErrorReply error : errors) {
      out.append(' ').append(error.code());
      if (!error.text().isEmpty()) {
        out.append(error.code().isEmpty() ? "" : " ").append("'").append(error.text()).append("'");
      }
    }
    out.append("; the profile's limits may be wider than the board's");
    return new Refused(out.toString());
  }

  /** Sends commands in the way the profile wants, until the board has agreed to all of them. */
  void say(List<Outgoing> commands) throws BoardException {
    if (commands.isEmpty()) {
      return;
    }
    Replies replies = profile.replies();
    Deque<Outgoing> open = new ArrayDeque<>();
    for (Outgoing command : commands) {
      while (open.size() >= replies.ahead()) {
        settle(open.remove());
      }
      if (open.isEmpty()) {
        decoder.await(command.answer().orElse(null));
      }
      send(command.bytes());
      if (command.answer().isPresent()) {
        open.add(command);
      }
    }
    while (!open.isEmpty()) {
      settle(open.remove());
    }
    if (replies.mode() == Replies.Mode.ASKED) {
      List<WireEvent.ErrorReply> errors = errors();
      if (!errors.isEmpty()) {
        throw refused("the last commands", errors);
      }
    }
  }

  private void settle(Outgoing command) throws BoardException {
    decoder.await(command.answer().orElseThrow());
    answer(command, inSeconds(profile.replies().timeLimitSeconds()));
  }

  /** Asks a board of mode "asked" for its errors until it has none left. */
  List<WireEvent.ErrorReply> errors() throws BoardException {
    List<WireEvent.ErrorReply> out = new ArrayList<>();
    Replies replies = profile.replies();
    Outgoing question =
        new Outgoing(encode(replies.question().orElseThrow(), Map.of()), replies.success());
    while (out.size() < MOST_ERRORS) {
      decoder.await(question.answer().orElseThrow());
      send(question.bytes());
      long deadline = inSeconds(replies.timeLimitSeconds());
      while (true) {
        WireEvent event = next(deadline).orElseThrow(() -> unanswered(question));
        if (event instanceof WireEvent.Answer) {
          return out;
        } else if (event instanceof WireEvent.ErrorReply error) {
          out.add(error);
          break;
        }
      }
    }
    return out;
  }

  void await(Optional<Expectation> answer) {
    decoder.await(answer.orElse(null));
  }
}
