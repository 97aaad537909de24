package coilside.board.driver;

import coilside.board.BoardException;
import coilside.board.BoardException.Refused;
import coilside.board.BoardLimits;
import coilside.board.BoardLimits.Range;
import coilside.board.driver.Conformance.Row.Verdict;
import coilside.board.driver.Conversation.Outgoing;
import coilside.board.profile.CommandName;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.Replies;
import coilside.board.profile.ValueName;
import java.math.BigDecimal;
import java.math.MathContext;
import java.util.ArrayList;
import java.util.EnumMap;
import java.util.List;
import java.util.Map;

/**
 * Tells the board each setting at its edges, which it must take, and one step beyond, which it must
 * refuse. Shots are described, never run, so nothing is transmitted.
 */
final class SettingTrials {
  private static final Map<CommandName, CommandName> WITHIN_A_SHOT =
      Map.of(
          CommandName.PULSE, CommandName.BEGIN,
          CommandName.WAIT, CommandName.BEGIN,
          CommandName.RECEIVE, CommandName.BEGIN);

  private final DeviceProfile profile;
  private final ProfilePlayer player;
  private final Trials trials;

  SettingTrials(DeviceProfile profile, ProfilePlayer player, Trials trials) {
    this.profile = profile;
    this.player = player;
    this.trials = trials;
  }

  void all() {
    BoardLimits l = profile.boardLimits();
    setting("carrier", CommandName.CARRIER, ValueName.CARRIER, l.carrierHertz(), "Hz");
    setting("receiver gain", CommandName.GAIN, ValueName.GAIN, l.gainDecibels(), "dB");
    setting("pulse width", CommandName.PULSE, ValueName.WIDTH, l.pulseSeconds(), "s");
    setting("amplitude", CommandName.PULSE, ValueName.AMPLITUDE, l.amplitude(), "");
    setting("wait", CommandName.WAIT, ValueName.WAIT, l.waitSeconds(), "s");
    setting("dwell time", CommandName.RECEIVE, ValueName.DWELL, l.dwellSeconds(), "s");
    Range points = new Range(l.minPoints(), l.maxPoints(), 1);
    setting("points", CommandName.RECEIVE, ValueName.POINTS, points, "");
  }

  private void setting(
      String what, CommandName command, ValueName value, Range range, String unit) {
    String name = what + " " + text(range.min(), unit) + " to " + text(range.max(), unit);
    if (!profile.command(command).map(c -> c.template().mentions(value)).orElse(false)) {
      if (profile.limits().arbitraryShots() || command == CommandName.PULSE) {
        skip(name, "no command sets it without running the shot");
      }
      return;
    }
    if (!refusalShows()) {
      skip(name, "this board reports no errors, so a refusal could not be seen");
      return;
    }
    double step = range.step() > 0 ? range.step() : Math.max(range.max() - range.min(), 1e-9) / 100;
    one(what, command, value, range.min(), true, unit);
    one(what, command, value, range.max(), true, unit);
    if (range.min() - step > 0 || value == ValueName.GAIN) {
      one(what, command, value, range.min() - step, false, unit);
    }
    if (value != ValueName.AMPLITUDE || range.max() + step <= 1) {
      one(what, command, value, range.max() + step, false, unit);
    }
  }

  private void skip(String tried, String why) {
    trials.row(tried, "edges taken, beyond refused", why, Verdict.SKIPPED);
  }

  /** A board that confirms nothing may still complain before it answers the next question. */
  private boolean refusalShows() {
    return profile.replies().mode() != Replies.Mode.NONE
        || profile.replies().error().isPresent() && profile.identification().ask().isPresent();
  }

  private void one(
      String what, CommandName command, ValueName value, double x, boolean allowed, String unit) {
    String tried = what + " " + text(x, unit);
    String expected = allowed ? "taken" : "refused";
    List<Outgoing> commands;
    try {
      commands = commands(command, value, x);
    } catch (Refused cannotSay) {
      if (allowed) {
        trials.row(tried, expected, cannotSay.getMessage(), Verdict.BAD);
      } else {
        trials.row(tried, expected, "cannot be said in the profile's format", Verdict.SKIPPED);
      }
      return;
    }
    try {
      player.describe(commands);
      if (allowed) {
        trials.row(tried, expected, "taken", Verdict.GOOD);
      } else {
        trials.row(
            tried,
            expected,
            "taken: the board allows more than the profile, or does not check",
            Verdict.LOOK);
      }
    } catch (Refused refused) {
      if (allowed) {
        trials.row(tried, expected, refused.getMessage(), Verdict.BAD);
      } else {
        trials.row(tried, expected, "refused", Verdict.GOOD);
      }
    } catch (BoardException e) {
      trials.row(tried, expected, e.getMessage(), Verdict.BAD);
    }
  }

  private List<Outgoing> commands(CommandName command, ValueName value, double x) throws Refused {
    Map<ValueName, Double> values = usual();
    values.put(value, x);
    if (value == ValueName.POINTS) {
      values.put(ValueName.DWELL, profile.boardLimits().dwellSeconds().min());
    }
    if (value == ValueName.DWELL) {
      values.put(ValueName.POINTS, (double) profile.boardLimits().minPoints());
    }
    List<Outgoing> out = new ArrayList<>();
    CommandName before = WITHIN_A_SHOT.get(command);
    if (before != null && profile.command(before).isPresent()) {
      out.add(player.writer().named(before, values));
    }
    out.add(player.writer().named(command, values));
    return out;
  }

  private Map<ValueName, Double> usual() {
    BoardLimits l = profile.boardLimits();
    Map<ValueName, Double> out = new EnumMap<>(ValueName.class);
    out.put(ValueName.CARRIER, l.carrierHertz().min());
    out.put(ValueName.GAIN, l.gainDecibels().min());
    out.put(ValueName.WIDTH, l.pulseSeconds().min());
    out.put(ValueName.PHASE, 0.0);
    out.put(ValueName.AMPLITUDE, l.amplitude().min());
    out.put(ValueName.WAIT, l.waitSeconds().min());
    out.put(ValueName.POINTS, (double) l.minPoints());
    out.put(ValueName.SAMPLES, (double) l.minPoints());
    out.put(ValueName.DWELL, l.dwellSeconds().min());
    out.put(ValueName.RECEIVE_PHASE, 0.0);
    return out;
  }

  /** The number in a unit that suits it, all its digits kept: one step beyond must show. */
  private static String text(double x, String unit) {
    double size = Math.abs(x);
    if (unit.equals("Hz")) {
      return size >= 1e6
          ? digits(x / 1e6) + " MHz"
          : size >= 1e3 ? digits(x / 1e3) + " kHz" : digits(x) + " Hz";
    }
    if (unit.equals("s")) {
      return size >= 1
          ? digits(x) + " s"
          : size >= 1e-3 ? digits(x * 1e3) + " ms" : digits(x * 1e6) + " us";
    }
    return digits(x) + (unit.isEmpty() ? "" : " " + unit);
  }

  private static String digits(double x) {
    return new BigDecimal(x).round(new MathContext(12)).stripTrailingZeros().toPlainString();
  }
}
