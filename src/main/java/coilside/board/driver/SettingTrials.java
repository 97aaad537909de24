package coilside.board.driver;

import coilside.board.BoardException;
import coilside.board.BoardException.Refused;
import coilside.board.BoardLimits;
import coilside.board.BoardLimits.Range;
import coilside.board.driver.Conformance.Row;
import coilside.board.driver.Conformance.Row.Verdict;
import coilside.board.driver.Conversation.Outgoing;
import coilside.board.profile.CommandName;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.Replies;
import coilside.board.profile.ValueName;
import java.util.ArrayList;
import java.util.EnumMap;
import java.util.List;
import java.util.Map;
import java.util.function.Consumer;

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
  private final Consumer<Row> rows;

  SettingTrials(DeviceProfile profile, ProfilePlayer player, Consumer<Row> rows) {
    this.profile = profile;
    this.player = player;
    this.rows = rows;
  }

  void all() {
    BoardLimits l = profile.boardLimits();
    setting("carrier", CommandName.CARRIER, ValueName.CARRIER, l.carrierHertz(), "Hz", 1);
    setting("receiver gain", CommandName.GAIN, ValueName.GAIN, l.gainDecibels(), "dB", 1);
    setting("pulse width", CommandName.PULSE, ValueName.WIDTH, l.pulseSeconds(), "us", 1e6);
    setting("amplitude", CommandName.PULSE, ValueName.AMPLITUDE, l.amplitude(), "", 1);
    setting("wait", CommandName.WAIT, ValueName.WAIT, l.waitSeconds(), "us", 1e6);
    setting("dwell time", CommandName.RECEIVE, ValueName.DWELL, l.dwellSeconds(), "us", 1e6);
    setting(
        "points",
        CommandName.RECEIVE,
        ValueName.POINTS,
        new Range(l.minPoints(), l.maxPoints(), 1),
        "",
        1);
  }

  private void setting(
      String what, CommandName command, ValueName value, Range range, String unit, double scale) {
    String name =
        what
            + " "
            + text(range.min(), scale)
            + " to "
            + text(range.max(), scale)
            + (unit.isEmpty() ? "" : " " + unit);
    if (!profile.command(command).map(c -> c.template().mentions(value)).orElse(false)) {
      rows.accept(
          new Row(
              name,
              "edges taken, beyond refused",
              "the profile has no command that only sets it",
              Verdict.SKIPPED));
      return;
    }
    if (profile.replies().mode() == Replies.Mode.NONE) {
      rows.accept(
          new Row(
              name,
              "edges taken, beyond refused",
              "this board confirms nothing, so a refusal could not be seen",
              Verdict.SKIPPED));
      return;
    }
    double step = range.step() > 0 ? range.step() : Math.max(range.max() - range.min(), 1e-9) / 100;
    one(what, command, value, range.min(), true, unit, scale);
    one(what, command, value, range.max(), true, unit, scale);
    if (range.min() - step > 0 || value == ValueName.GAIN) {
      one(what, command, value, range.min() - step, false, unit, scale);
    }
    if (value != ValueName.AMPLITUDE || range.max() + step <= 1) {
      one(what, command, value, range.max() + step, false, unit, scale);
    }
  }

  private void one(
      String what,
      CommandName command,
      ValueName value,
      double x,
      boolean allowed,
      String unit,
      double scale) {
    String tried = what + " " + text(x, scale) + (unit.isEmpty() ? "" : " " + unit);
    String expected = allowed ? "taken" : "refused";
    List<Outgoing> commands;
    try {
      commands = commands(command, value, x);
    } catch (Refused cannotSay) {
      rows.accept(
          allowed
              ? new Row(tried, expected, cannotSay.getMessage(), Verdict.BAD)
              : new Row(
                  tried, expected, "cannot be said in the profile's format", Verdict.SKIPPED));
      return;
    }
    try {
      player.describe(commands);
      rows.accept(
          allowed
              ? new Row(tried, expected, "taken", Verdict.GOOD)
              : new Row(
                  tried,
                  expected,
                  "taken: the board allows more than the profile, or does not check",
                  Verdict.LOOK));
    } catch (Refused refused) {
      rows.accept(
          allowed
              ? new Row(
                  tried,
                  expected,
                  refused.getMessage() + ": narrow the profile's limits",
                  Verdict.BAD)
              : new Row(tried, expected, "refused", Verdict.GOOD));
    } catch (BoardException e) {
      rows.accept(new Row(tried, expected, e.getMessage(), Verdict.BAD));
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

  private static String text(double x, double scale) {
    return new java.math.BigDecimal(x * scale)
        .round(new java.math.MathContext(12))
        .stripTrailingZeros()
        .toPlainString();
  }
}
