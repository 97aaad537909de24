package coilside.board.driver;

import coilside.board.BoardException.Refused;
import coilside.board.driver.Conversation.Outgoing;
import coilside.board.profile.Command;
import coilside.board.profile.CommandName;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.ValueName;
import coilside.board.wire.CommandEncoder;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Repeat;
import coilside.shot.Shot;
import coilside.shot.Step;
import coilside.shot.Wait;
import java.util.ArrayList;
import java.util.EnumMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;

/** Writes a shot as the commands of a profile. Stateless. */
final class ShotWriter {
  private static final double ANGLE_TOLERANCE = Math.toRadians(1);

  private final DeviceProfile profile;
  private final Conversation conversation;
  private final CommandEncoder encoder;

  ShotWriter(DeviceProfile profile, Conversation conversation) {
    this.profile = profile;
    this.conversation = conversation;
    this.encoder = conversation.encoder();
  }

  /** The settings that have a command of their own. */
  List<Outgoing> settings(Shot shot) throws Refused {
    List<Outgoing> out = new ArrayList<>();
    Map<ValueName, Double> values = common(shot);
    add(out, CommandName.CARRIER, values);
    add(out, CommandName.GAIN, values);
    return out;
  }

  /** Begin, the steps, end; empty for boards with one fixed command. */
  List<Outgoing> body(Shot shot) throws Refused {
    List<Outgoing> out = new ArrayList<>();
    if (profile.fixedShotOnly()) {
      return out;
    }
    add(out, CommandName.BEGIN, common(shot));
    if (shot.restSeconds() > 0 && !restIsSaid()) {
      steps(out, List.of(new Wait(shot.restSeconds())));
    }
    steps(out, profile.limits().repeatLoops() ? shot.steps() : shot.flat());
    add(out, CommandName.END, Map.of());
    return out;
  }

  private boolean restIsSaid() {
    return profile
        .command(CommandName.RUN)
        .map(c -> c.template().mentions(ValueName.REST) || c.template().mentions(ValueName.EVERY))
        .orElse(false);
  }

  /** What makes the board play the shot once. */
  Outgoing run(Shot shot) throws Refused {
    Map<ValueName, Double> values = common(shot);
    if (!profile.fixedShotOnly()) {
      values.put(ValueName.SCANS, 1.0);
      values.put(ValueName.EVERY, shot.seconds());
      return outgoing(CommandName.RUN, profile.command(CommandName.RUN).orElseThrow(), values);
    }
    CommandName name =
        shot.receiveOnly() ? CommandName.RECEIVE_ONLY : CommandName.PULSE_AND_RECEIVE;
    Optional<Command> command = profile.command(name);
    if (command.isEmpty()) {
      throw new Refused(
          "this board cannot receive without a pulse: the profile '"
              + profile.name()
              + "' has no commands.receive_only");
    }
    double delay = 0;
    for (Step step : shot.flat()) {
      if (step instanceof Pulse pulse) {
        values.putAll(pulse(pulse));
      } else if (step instanceof Wait wait) {
        delay += wait.seconds();
      } else if (step instanceof Receive receive) {
        values.putAll(receive(receive));
      }
    }
    if (delay > 0 && (shot.receiveOnly() || !command.get().template().mentions(ValueName.DELAY))) {
      if (!shot.receiveOnly()) {
        throw new Refused(
            "this board cannot wait between pulse and receive window: the profile's"
                + " pulse_and_receive has no {delay}");
      }
    }
    values.put(ValueName.DELAY, delay);
    return outgoing(name, command.get(), values);
  }

  /** True where the host has to let the rest pass before the run. */
  boolean hostRests(Shot shot) {
    CommandName name =
        shot.receiveOnly() ? CommandName.RECEIVE_ONLY : CommandName.PULSE_AND_RECEIVE;
    return profile.fixedShotOnly()
        && !profile.command(name).map(c -> c.template().mentions(ValueName.REST)).orElse(false);
  }

  private void steps(List<Outgoing> out, List<Step> steps) throws Refused {
    for (Step step : steps) {
      if (step instanceof Pulse pulse) {
        add(out, CommandName.PULSE, pulse(pulse));
      } else if (step instanceof Wait wait) {
        add(out, CommandName.WAIT, Map.of(ValueName.WAIT, wait.seconds()));
      } else if (step instanceof Receive receive) {
        add(out, CommandName.RECEIVE, receive(receive));
      } else if (step instanceof Repeat repeat) {
        add(out, CommandName.REPEAT, Map.of(ValueName.COUNT, (double) repeat.count()));
        steps(out, repeat.steps());
        add(out, CommandName.END_REPEAT, Map.of());
      }
    }
  }

  private static Map<ValueName, Double> common(Shot shot) {
    Map<ValueName, Double> out = new EnumMap<>(ValueName.class);
    out.put(ValueName.CARRIER, shot.carrierHertz());
    out.put(ValueName.GAIN, shot.gainDecibels());
    out.put(ValueName.REST, shot.restSeconds());
    return out;
  }

  private Map<ValueName, Double> pulse(Pulse pulse) throws Refused {
    Map<ValueName, Double> out = new EnumMap<>(ValueName.class);
    out.put(ValueName.WIDTH, pulse.seconds());
    out.put(ValueName.PHASE, pulse.phaseRadians());
    out.put(ValueName.AMPLITUDE, pulse.amplitude());
    if (saysPhase()) {
      double off =
          wrapped(encoder.asSent(ValueName.PHASE, pulse.phaseRadians()) - pulse.phaseRadians());
      if (Math.abs(off) > ANGLE_TOLERANCE) {
        throw new Refused(
            String.format(
                java.util.Locale.ROOT,
                "a pulse phase of %.1f deg cannot be said to this board; the nearest it knows is"
                    + " %.1f deg away",
                Math.toDegrees(pulse.phaseRadians()),
                Math.abs(Math.toDegrees(off))));
      }
    }
    if (profile.values().containsKey(ValueName.AMPLITUDE)
        && Math.abs(encoder.asSent(ValueName.AMPLITUDE, pulse.amplitude()) - pulse.amplitude())
            > 0.005) {
      throw new Refused(
          "a pulse amplitude of "
              + pulse.amplitude()
              + " cannot be said to this board closely enough; choose a multiple of its step");
    }
    return out;
  }

  private Map<ValueName, Double> receive(Receive receive) {
    Map<ValueName, Double> out = new EnumMap<>(ValueName.class);
    out.put(ValueName.POINTS, (double) receive.points());
    out.put(ValueName.SAMPLES, (double) samples(receive));
    out.put(ValueName.DWELL, receive.dwellSeconds());
    out.put(ValueName.RECEIVE_PHASE, receive.phaseRadians());
    return out;
  }

  /** Samples that the board sends for a window: complex points, or real samples. */
  int samples(Receive receive) {
    return profile
        .samples()
        .real()
        .map(r -> receive.points() * (int) Math.rint(receive.dwellSeconds() * r.rateHertz()))
        .orElse(receive.points());
  }

  /** True when pulses carry their phase on the wire. */
  boolean saysPhase() {
    CommandName name = profile.fixedShotOnly() ? CommandName.PULSE_AND_RECEIVE : CommandName.PULSE;
    return profile.command(name).map(c -> c.template().mentions(ValueName.PHASE)).orElse(false);
  }

  /**
   * The common phase of all pulses, which the host turns the samples by where the board knows no
   * pulse phase; 0 where it does.
   */
  double unsaidPhase(Shot shot) throws Refused {
    if (saysPhase()) {
      return 0;
    }
    Double common = null;
    for (Step step : shot.flat()) {
      if (step instanceof Pulse pulse) {
        if (common == null) {
          common = pulse.phaseRadians();
        } else if (Math.abs(wrapped(pulse.phaseRadians() - common)) > 1e-9) {
          throw new Refused(
              "this board knows no pulse phase, so a shot whose pulses differ in phase cannot be"
                  + " played");
        }
      }
    }
    return common == null ? 0 : common;
  }

  static double wrapped(double radians) {
    return radians - 2 * Math.PI * Math.rint(radians / (2 * Math.PI));
  }

  private void add(List<Outgoing> out, CommandName name, Map<ValueName, Double> values)
      throws Refused {
    Optional<Command> command = profile.command(name);
    if (command.isPresent()) {
      out.add(outgoing(name, command.get(), values));
    }
  }

  private Outgoing outgoing(CommandName name, Command command, Map<ValueName, Double> values)
      throws Refused {
    byte[] bytes = conversation.encode(command.template(), values);
    if (command.silent()) {
      return new Outgoing(bytes, Optional.empty());
    }
    boolean samplesAnswer = name == CommandName.FETCH;
    return new Outgoing(
        bytes,
        command.answer().isPresent() || samplesAnswer
            ? command.answer()
            : conversation.usualAnswer());
  }

  Outgoing named(CommandName name, Map<ValueName, Double> values) throws Refused {
    return outgoing(name, profile.command(name).orElseThrow(), values);
  }
}
