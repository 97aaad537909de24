package coilside.board.driver;

import coilside.board.BoardException;
import coilside.board.BoardException.BadAnswer;
import coilside.board.BoardException.Refused;
import coilside.board.BoardException.Stopped;
import coilside.board.BoardIdentity;
import coilside.board.ClearedShot;
import coilside.board.ShotPlayer;
import coilside.board.driver.Conversation.Outgoing;
import coilside.board.link.Link;
import coilside.board.profile.Command;
import coilside.board.profile.CommandName;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.Replies;
import coilside.board.profile.Template;
import coilside.board.wire.Clean;
import coilside.shot.Shot;
import coilside.signal.Scan;
import java.time.Clock;
import java.time.Instant;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalDouble;
import java.util.concurrent.locks.ReentrantLock;
import java.util.function.LongSupplier;

/**
 * The transmitting side of a board that speaks a profile over a link.
 *
 * <p>What the board keeps is not sent again. After any trouble the board is told to stop, the line
 * is drained before the next shot, and everything is sent afresh.
 */
final class ProfilePlayer implements ShotPlayer {
  private static final double QUIET_SECONDS = 0.05;
  private static final double LONGEST_DRAIN_SECONDS = 5;

  private final DeviceProfile profile;
  private final Link link;
  private final Clock wallClock;
  private final Conversation conversation;
  private final ShotWriter writer;
  private final Recognition recognition;
  private final SampleFetch fetch;
  private final ReentrantLock wire = new ReentrantLock();

  private BoardIdentity identity;
  private List<Outgoing> sentSettings = List.of();
  private List<Outgoing> sentBody = List.of();
  private boolean unsettled;
  private boolean stopped = true;
  private volatile boolean closed;
  private long lastRunNanos;
  private double lastShotSeconds = Double.NaN;
  private boolean aheadOfClock;

  ProfilePlayer(DeviceProfile profile, Link link, LongSupplier nanoClock, Clock wallClock) {
    this.profile = profile;
    this.link = link;
    this.wallClock = wallClock;
    this.conversation = new Conversation(profile, link, nanoClock);
    this.writer = new ShotWriter(profile, conversation);
    this.recognition = new Recognition(profile, conversation);
    this.fetch = new SampleFetch(profile, conversation, writer);
  }

  /**
   * Greets and recognises the board and sends the profile's set-up.
   *
   * @param simulated true for the simulated bench in this process, which needs no time to settle
   */
  void open(boolean simulated) throws BoardException {
    wire.lock();
    try {
      String name = recognition.identify(simulated);
      identity =
          new BoardIdentity(name, profile.name(), profile.digest(), link.description(), simulated);
      List<Outgoing> setup = new ArrayList<>();
      for (Template template : profile.setup()) {
        setup.add(conversation.usual(template));
      }
      conversation.say(setup);
    } finally {
      wire.unlock();
    }
  }

  @Override
  public BoardIdentity identity() {
    return identity;
  }

  @Override
  public Scan play(ClearedShot cleared) throws BoardException {
    wire.lock();
    try {
      ready();
      boolean done = false;
      try {
        Scan scan = scan(cleared.shot());
        done = true;
        return scan;
      } finally {
        if (!done) {
          sendStop();
        }
      }
    } finally {
      wire.unlock();
    }
  }

  private void ready() throws BoardException {
    if (closed) {
      throw new Stopped("the board has been closed; open it again");
    }
    conversation.clearStop();
    if (unsettled) {
      conversation.drain(QUIET_SECONDS, LONGEST_DRAIN_SECONDS);
      unsettled = false;
    }
  }

  private Scan scan(Shot shot) throws BoardException {
    ScanBuilder builder = new ScanBuilder(profile, writer, conversation.encoder(), shot);
    stopped = false;
    conversation.say(news(shot));
    if (writer.hostRests(shot)) {
      conversation.pause(shot.restSeconds());
    }
    Outgoing run = writer.run(shot);
    conversation.expectBlocks(builder.blockLengths());
    conversation.await(run.answer());
    Instant started = wallClock.instant();
    long runNanos = conversation.now();
    double sinceLastScan = (runNanos - lastRunNanos) * 1e-9 - lastShotSeconds;
    conversation.send(run.bytes());
    lastRunNanos = runNanos;
    lastShotSeconds = writer.hostRests(shot) ? shot.playedSeconds() : shot.seconds();
    long deadline = fetch.deadline(shot, builder.blockLengths());
    if (run.answer().isPresent()) {
      fetch.acknowledged(run, deadline);
    }
    fetch.fetchAll(builder, deadline);
    return builder.scan(started, restAsItWas(shot, runNanos, sinceLastScan));
  }

  /** What the board does not know yet. */
  private List<Outgoing> news(Shot shot) throws BoardException {
    List<Outgoing> settings = writer.settings(shot);
    List<Outgoing> body = writer.body(shot);
    List<Outgoing> out = new ArrayList<>();
    for (int i = 0; i < settings.size(); i++) {
      if (sentSettings.size() <= i || !same(settings.get(i), sentSettings.get(i))) {
        out.add(settings.get(i));
      }
    }
    boolean sameBody = body.size() == sentBody.size();
    for (int i = 0; sameBody && i < body.size(); i++) {
      sameBody = same(body.get(i), sentBody.get(i));
    }
    if (!sameBody) {
      out.addAll(body);
    }
    sentSettings = profile.keepsShot() ? settings : List.of();
    sentBody = profile.keepsShot() ? body : List.of();
    return out;
  }

  private static boolean same(Outgoing a, Outgoing b) {
    return java.util.Arrays.equals(a.bytes(), b.bytes());
  }

  /**
   * The rest before a scan as it really was: what the board was told, and what passed on the clock
   * between the end of the last scan and this run. A board that ever gave back a scan sooner than
   * it takes to play (a simulated one that is not paced) does not live by our clock: its rest is
   * what it was told.
   */
  private double restAsItWas(Shot shot, long runNanos, double sinceLastScan) {
    double told = writer.hostRests(shot) ? 0 : shot.restSeconds();
    double least = told + shot.playedSeconds();
    double took = (conversation.now() - runNanos) * 1e-9;
    if (least - took > Math.max(1e-3, 0.1 * least)) {
      aheadOfClock = true;
    }
    return aheadOfClock || Double.isNaN(sinceLastScan)
        ? shot.restSeconds()
        : Math.max(shot.restSeconds(), told + Math.max(0, sinceLastScan));
  }

  /** The bytes of the sample block that came last; empty before the first. Do not change. */
  byte[] lastBlock() {
    return fetch.lastBlock();
  }

  /** Sends commands that describe, but never run, a shot; whatever the board knew is sent again. */
  void describe(List<Outgoing> commands) throws BoardException {
    wire.lock();
    try {
      ready();
      sentSettings = List.of();
      sentBody = List.of();
      unsettled = true;
      try {
        conversation.say(commands);
        if (silentButComplains()) {
          recognition.again();
        }
        unsettled = false;
      } catch (Refused refused) {
        // One by one, or asked until there is no error left: nothing more is on its way.
        unsettled = profile.replies().ahead() > 1 || silentButComplains();
        throw refused;
      }
    } finally {
      wire.unlock();
    }
  }

  /** The answer to a question shows that all before it was taken, or brings the complaint. */
  private boolean silentButComplains() {
    return profile.replies().mode() == Replies.Mode.NONE
        && profile.replies().error().isPresent()
        && profile.identification().ask().isPresent();
  }

  /** Asks once more who is there. */
  void identifyAgain() throws BoardException {
    wire.lock();
    try {
      ready();
      recognition.again();
    } finally {
      wire.unlock();
    }
  }

  /** Sends bytes that mean nothing; what comes back is thrown away before the next command. */
  void babble(byte[] bytes) throws BoardException {
    wire.lock();
    try {
      ready();
      conversation.send(bytes);
      unsettled = true;
    } finally {
      wire.unlock();
    }
  }

  /** Lets a board of mode "asked" tell its errors until it has none left. */
  void clearErrors() throws BoardException {
    wire.lock();
    try {
      ready();
      conversation.errors();
    } finally {
      wire.unlock();
    }
  }

  ShotWriter writer() {
    return writer;
  }

  @Override
  public OptionalDouble temperature() throws BoardException {
    Optional<Command> command = profile.command(CommandName.TEMPERATURE);
    if (command.isEmpty()) {
      return OptionalDouble.empty();
    }
    wire.lock();
    try {
      ready();
      Map<String, String> fields =
          conversation.ask(
              writer.named(CommandName.TEMPERATURE, Map.of()),
              profile.replies().timeLimitSeconds());
      conversation.await(Optional.empty());
      String text = fields.getOrDefault("celsius", "");
      try {
        double celsius = Double.parseDouble(text);
        if (celsius > -100 && celsius < 200) {
          return OptionalDouble.of(celsius);
        }
      } catch (NumberFormatException e) {
        // Falls through: said below, like a temperature out of all reason.
      }
      throw new BadAnswer("the board says its temperature is '" + Clean.text(text) + "' degC");
    } finally {
      wire.unlock();
    }
  }

  @Override
  public void stop() {
    conversation.requestStop();
    if (wire.tryLock()) {
      try {
        sendStop();
      } finally {
        wire.unlock();
      }
    }
  }

  /** Only with the wire held. Whatever the board knew is sent again afterwards. */
  private void sendStop() {
    if (stopped) {
      return;
    }
    stopped = true;
    unsettled = true;
    sentSettings = List.of();
    sentBody = List.of();
    try {
      if (profile.command(CommandName.STOP).isPresent()) {
        conversation.send(writer.named(CommandName.STOP, Map.of()).bytes());
      }
    } catch (BoardException e) {
      closeQuietly();
    }
  }

  private void closeQuietly() {
    closed = true;
    link.close();
  }

  @Override
  public void close() {
    conversation.requestStop();
    wire.lock();
    try {
      if (closed) {
        return;
      }
      sendStop();
      closed = true;
      conversation.clearStop();
      farewell();
    } finally {
      link.close();
      wire.unlock();
    }
  }

  /** Best effort: the answers are waited for, since some boards drop what comes while busy. */
  private void farewell() {
    try {
      if (unsettled && !profile.farewell().isEmpty()) {
        conversation.drain(QUIET_SECONDS, 1);
      }
      List<Outgoing> commands = new ArrayList<>();
      for (Template template : profile.farewell()) {
        commands.add(conversation.usual(template));
      }
      conversation.say(commands);
    } catch (BoardException e) {
      // The board is gone or does not answer; the link is let go in any case.
    }
  }
}
