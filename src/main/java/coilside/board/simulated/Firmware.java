package coilside.board.simulated;

import coilside.board.profile.Command;
import coilside.board.profile.CommandName;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.Expectation;
import coilside.board.profile.Framing;
import coilside.board.profile.Replies;
import coilside.board.profile.Template;
import coilside.board.profile.ValueName;
import coilside.board.profile.WireValue;
import coilside.board.simulated.FirmwareReceiver.Counts;
import coilside.shot.Shot;
import java.util.ArrayDeque;
import java.util.Deque;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;

/**
 * A simulated board's firmware: it speaks a device profile from the board's side, byte for byte.
 * Bytes go in, bytes come out; it has no thread and no clock of its own.
 *
 * <p>Written apart from the host's side: it shares the profile's values with it and nothing else,
 * so that no common mistake can hide. Unpaced it plays each scan as soon as it is asked to; paced,
 * answers come when they would on a real board. For use by one thread.
 */
public final class Firmware {
  private static final double MOST_SCANS = 1e6;

  private final DeviceProfile profile;
  private final FirmwareReceiver receiver;
  private final boolean paced;
  private final FirmwareDialect dialect;
  private final FirmwareBlocks blocks;
  private final FirmwareShot shot;
  private final FirmwareDuty duty;
  private final Map<String, WireValue> values = new HashMap<>();
  private final FirmwareVoice voice;
  private final Deque<Integer> fetches = new ArrayDeque<>();
  private FirmwareFaults faults;
  private FirmwareRun run;
  private long idleSinceNanos = Long.MIN_VALUE;
  private int commands;
  private int scansPlayed;
  private String echoed = "";

  /**
   * @param profile how it speaks
   * @param receiver what it plays shots on
   * @param paced true when answers come as late as a real board's
   * @param faults what goes wrong
   * @throws IllegalArgumentException the profile does not say how its board's answers look
   */
  public Firmware(
      DeviceProfile profile, FirmwareReceiver receiver, boolean paced, FirmwareFaults faults) {
    this.profile = profile;
    this.receiver = receiver;
    this.paced = paced;
    this.faults = faults;
    this.dialect =
        profile.framing() instanceof Framing.Lines lines
            ? new FirmwareLines(lines)
            : new FirmwareFrames((Framing.Cobs) profile.framing());
    this.voice = new FirmwareVoice(profile, dialect, faults);
    this.blocks = new FirmwareBlocks(profile, dialect);
    this.shot = new FirmwareShot(profile);
    this.duty = new FirmwareDuty(profile.boardLimits());
    for (Map.Entry<ValueName, WireValue> value : profile.values().entrySet()) {
      values.put(value.getKey().word(), value.getValue());
    }
    identity();
    profile.replies().success().ifPresent(e -> dialect.say(e, Map.of()));
    blocks.endMark();
  }

  /** From now on these things go wrong. */
  public void setFaults(FirmwareFaults changed) {
    faults = changed;
    voice.setFaults(changed);
  }

  /** Somebody has connected: the board starts anew and greets. */
  public void connect() {
    restart();
  }

  /** Nobody is connected any more: the board stops. */
  public void disconnect() {
    halt();
    dialect.forget();
    voice.outgoing().clear();
  }

  private void restart() {
    halt();
    dialect.forget();
    voice.outgoing().clear();
    voice.forgetErrors();
    shot.reset();
    profile
        .greeting()
        .ifPresent(g -> voice.outgoing().add(dialect.wrap(dialect.say(g, Map.of("name", name())))));
  }

  private void halt() {
    run = null;
    fetches.clear();
  }

  private String name() {
    return faults.wrongName().isEmpty() ? profile.name() : faults.wrongName();
  }

  private String identity() {
    Expectation expect = profile.identification().expect();
    String own = dialect.say(expect, Map.of("name", name()));
    boolean fixed = !faults.wrongName().isEmpty() && !own.contains(faults.wrongName());
    return fixed ? faults.wrongName() : own;
  }

  /**
   * Takes bytes from the host.
   *
   * @param nowNanos a steady clock, ns
   */
  public void hear(byte[] bytes, int offset, int length, long nowNanos) {
    dialect.hear(bytes, offset, length);
    boolean more = true;
    while (more) {
      try {
        Optional<String> message = dialect.nextMessage();
        more = message.isPresent();
        if (more) {
          obey(message.get(), nowNanos);
        }
      } catch (FirmwareRefusal e) {
        voice.refuse(e);
      }
    }
  }

  /**
   * What the board says next.
   *
   * @param nowNanos the same clock
   * @return the bytes; empty when there is nothing to say yet
   */
  public Optional<byte[]> say(long nowNanos) {
    while (voice.outgoing().isEmpty()
        && run != null
        && mayPlay()
        && dueNanos(nowNanos) <= nowNanos) {
      playOne(nowNanos);
    }
    return Optional.ofNullable(voice.outgoing().poll());
  }

  /** When the board will have something to say if it hears nothing; Long.MAX_VALUE for never. */
  public long nextNanos(long nowNanos) {
    if (!voice.outgoing().isEmpty()) {
      return nowNanos;
    }
    return run != null && mayPlay() ? dueNanos(nowNanos) : Long.MAX_VALUE;
  }

  private long dueNanos(long nowNanos) {
    return paced ? run.scanEndNanos() : nowNanos;
  }

  /** A board that is asked for its samples keeps one scan until all of it was fetched. */
  private boolean mayPlay() {
    return !run.allPlayed() && (!fetching() || run.windows().isEmpty() || run.fetchedAll());
  }

  private boolean fetching() {
    return profile.command(CommandName.FETCH).isPresent();
  }

  private void obey(String message, long nowNanos) throws FirmwareRefusal {
    commands++;
    if (faults.silentAfterCommands() > 0 && commands > faults.silentAfterCommands()) {
      return;
    }
    echoed = message;
    echo();
    Replies replies = profile.replies();
    if (replies.question().isPresent() && matches(replies.question().get(), message)) {
      voice.answerQuestion();
    } else if (profile.identification().ask().filter(t -> matches(t, message)).isPresent()) {
      voice.answer(identity());
    } else if (!command(message, nowNanos)) {
      settingUp(message);
    }
  }

  private void echo() {
    if (profile.framing() instanceof Framing.Lines lines && lines.echo()) {
      voice.outgoing().add(dialect.wrap(echoed));
    }
  }

  private boolean matches(Template template, String message) {
    try {
      return dialect.understand(template, message, values).isPresent();
    } catch (FirmwareRefusal e) {
      return false;
    }
  }

  /**
   * Carries out the command that the message is. One that looks like a command but holds a wrong
   * number is refused only when it is no other command either.
   */
  private boolean command(String message, long nowNanos) throws FirmwareRefusal {
    FirmwareRefusal nearly = null;
    boolean building = false;
    for (CommandName name : CommandName.values()) {
      Optional<Command> command = profile.command(name);
      if (command.isEmpty()) {
        continue;
      }
      Optional<Map<String, Double>> told = Optional.empty();
      try {
        told = dialect.understand(command.get().template(), message, values);
      } catch (FirmwareRefusal e) {
        nearly = nearly == null ? e : nearly;
        building |= builds(name);
      }
      if (told.isPresent()) {
        carryOut(name, command.get(), told.get(), nowNanos);
        return true;
      }
    }
    if (nearly != null) {
      if (building) {
        shot.spoil();
      }
      throw nearly;
    }
    return false;
  }

  private static boolean builds(CommandName name) {
    return switch (name) {
      case CARRIER, GAIN, BEGIN, PULSE, WAIT, RECEIVE, REPEAT, END_REPEAT, END -> true;
      default -> false;
    };
  }

  private void carryOut(CommandName name, Command command, Map<String, Double> told, long nowNanos)
      throws FirmwareRefusal {
    switch (name) {
      case RUN -> begin(shot.run(told), told.getOrDefault("scans", 1.0), command, nowNanos);
      case PULSE_AND_RECEIVE -> begin(shot.fixed(told, true), 1, command, nowNanos);
      case RECEIVE_ONLY -> begin(shot.fixed(told, false), 1, command, nowNanos);
      case FETCH -> fetch(told.getOrDefault("window", -1.0).intValue());
      case STOP -> {
        if (paced && run != null && !run.allPlayed()) {
          duty.stopped(nowNanos * 1e-9);
        }
        halt();
        idleSinceNanos = nowNanos;
        voice.outgoing().clear();
        echo();
        voice.confirm(command);
      }
      case TEMPERATURE ->
          voice.answer(
              dialect.say(
                  command.answer().orElseThrow(),
                  Map.of("celsius", receiver.temperatureCelsius())));
      default -> {
        refuseWhileRunning();
        build(name, told);
        voice.confirm(command);
      }
    }
  }

  private void build(CommandName name, Map<String, Double> told) throws FirmwareRefusal {
    try {
      shot.tell(name, told);
    } catch (FirmwareRefusal e) {
      shot.spoil();
      throw e;
    }
  }

  private void refuseWhileRunning() throws FirmwareRefusal {
    if (run != null && !run.allPlayed()) {
      throw FirmwareRefusal.conflict("a run is in hand");
    }
  }

  private void begin(Shot whole, double scans, Command command, long nowNanos)
      throws FirmwareRefusal {
    refuseWhileRunning();
    if (scans < 1 || scans > MOST_SCANS || scans != Math.rint(scans)) {
      throw FirmwareRefusal.range("scans " + scans + " outside 1.." + MOST_SCANS);
    }
    duty.admit(whole, (long) scans, nowNanos * 1e-9);
    if (paced && idleSinceNanos != Long.MIN_VALUE) {
      receiver.idle(Math.max(0, nowNanos - idleSinceNanos) * 1e-9);
    }
    fetches.clear();
    run = new FirmwareRun(whole, (long) scans, nowNanos);
    voice.confirm(command);
  }

  private void playOne(long nowNanos) {
    List<Counts> taken = receiver.play(run.shot());
    run.played(taken);
    scansPlayed++;
    if (run.allPlayed()) {
      idleSinceNanos = paced ? run.scanEndNanos() : nowNanos;
    }
    if (faults.restartAfterScans() > 0 && scansPlayed == faults.restartAfterScans()) {
      restart();
    } else if (fetching()) {
      deliverFetched();
    } else {
      deliver(taken);
    }
  }

  private void deliver(List<Counts> taken) {
    if (blocks.perWindow()) {
      for (int w = 0; w < taken.size(); w++) {
        voice.outgoing().add(blocks.window(taken.get(w), w, faults));
      }
    } else {
      voice.outgoing().add(blocks.scan(taken, faults));
    }
    tellEnd();
  }

  private void tellEnd() {
    byte[] mark = blocks.endMark();
    if (mark.length > 0) {
      voice.outgoing().add(mark);
    }
  }

  private void fetch(int window) throws FirmwareRefusal {
    if (run == null) {
      voice.answerWithError(FirmwareRefusal.conflict("there are no samples to fetch"));
      return;
    }
    fetches.add(window);
    if (!run.windows().isEmpty() && (run.allPlayed() || !run.fetchedAll())) {
      deliverFetched();
    }
  }

  private void deliverFetched() {
    while (!fetches.isEmpty()) {
      int window = fetches.remove();
      List<Counts> taken = run.windows();
      if (window >= taken.size()) {
        voice.answerWithError(
            FirmwareRefusal.range("window " + window + " outside 0.." + (taken.size() - 1)));
      } else if (window >= 0) {
        voice.outgoing().add(blocks.window(taken.get(window), window, faults));
        run.fetched(window);
        if (run.fetchedAll()) {
          tellEnd();
        }
      } else {
        run.fetched(taken.size());
        deliver(taken);
      }
    }
  }

  private void settingUp(String message) throws FirmwareRefusal {
    for (List<Template> known : List.of(profile.setup(), profile.farewell())) {
      for (Template template : known) {
        if (matches(template, message)) {
          if (message.equalsIgnoreCase("*CLS")) {
            voice.forgetErrors();
          } else if (message.equalsIgnoreCase("*RST")) {
            halt();
            shot.reset();
          }
          voice.confirm(new Command(template, Optional.empty(), false));
          return;
        }
      }
    }
    String shown = message.length() > 40 ? message.substring(0, 40) : message;
    throw FirmwareRefusal.undefined(shown.replaceAll("[^\\x20-\\x7e]|\"", "."));
  }
}
