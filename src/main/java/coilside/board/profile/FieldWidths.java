package coilside.board.profile;

import coilside.board.BoardLimits;
import coilside.board.BoardLimits.Range;
import java.util.Map;

/**
 * Checks that the limits' edges fit the binary fields and the unsigned text formats they are sent
 * in.
 */
record FieldWidths(Section values, Map<ValueName, WireValue> rules) {
  void check(BoardLimits limits) {
    one(ValueName.CARRIER, limits.carrierHertz());
    one(ValueName.GAIN, limits.gainDecibels());
    one(ValueName.WIDTH, limits.pulseSeconds());
    one(ValueName.AMPLITUDE, limits.amplitude());
    one(ValueName.WAIT, limits.waitSeconds());
    one(ValueName.REST, limits.waitSeconds());
    one(ValueName.DWELL, limits.dwellSeconds());
    one(ValueName.POINTS, new Range(limits.minPoints(), limits.maxPoints(), 1));
    if (limits.repeatLoops()) {
      one(ValueName.COUNT, new Range(1, limits.maxRepeats(), 1));
    }
  }

  private void one(ValueName name, Range range) {
    WireValue rule = rules.get(name);
    if (rule == null) {
      return;
    }
    double a = range.min() / rule.unitInSi() * rule.scale() + rule.offset();
    double b = range.max() / rule.unitInSi() * rule.scale() + rule.offset();
    double low = Math.rint(Math.min(a, b));
    double high = Math.rint(Math.max(a, b));
    NumberFormat.Kind kind = rule.format().kind();
    double least;
    double most;
    if (kind == NumberFormat.Kind.HEX) {
      least = 0;
      most = 0xffffffffL;
    } else if (kind.textual() || kind == NumberFormat.Kind.F32 || kind.bytes() == 0) {
      return;
    } else {
      int bits = 8 * kind.bytes();
      least = kind.signed() ? -Math.pow(2, bits - 1.0) : 0;
      most = Math.pow(2, kind.signed() ? bits - 1.0 : bits) - 1;
    }
    if (low < least || high > most) {
      values
          .section(name.word(), "NAME")
          .problem(
              "format",
              String.format(
                  java.util.Locale.ROOT,
                  "a field that holds %.0f to %.0f, which the limits of %s come to on the wire",
                  low,
                  high,
                  name.word()),
              "format = \"u32\"");
    }
  }
}
