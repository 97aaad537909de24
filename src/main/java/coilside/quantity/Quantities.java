package coilside.quantity;

import java.util.LinkedHashMap;
import java.util.Map;
import java.util.regex.Matcher;
import java.util.regex.Pattern;

/**
 * Reads values with units as people write them: "12.5us", "8.1 MHz", "2h". The result is in the
 * coherent unit. Every refusal says what stands there, what is allowed, and an example.
 */
public final class Quantities {
  private static final Pattern FORM =
      Pattern.compile("([+-]?(?:[0-9]+\\.?[0-9]*|\\.[0-9]+)(?:[eE][+-]?[0-9]{1,3})?)\\s*(\\S*)");
  private static final int LONGEST = 40;
  private static final double LARGEST = 1e15;

  private Quantities() {}

  /**
   * The value in {@code unit}.
   *
   * @throws IllegalArgumentException with one sentence for people
   */
  public static double parse(String text, Unit unit) {
    String shown = clean(text);
    String allowed = allowed(unit);
    Matcher m = FORM.matcher(text.strip());
    if (text.length() > LONGEST || !m.matches()) {
      throw new IllegalArgumentException(
          "'" + shown + "' is not a number with a unit; write " + allowed);
    }
    String name = m.group(2).replace('µ', 'u').replace('μ', 'u');
    Size size = units(unit).get(name);
    if (size == null) {
      throw new IllegalArgumentException(
          name.isEmpty()
              ? "'" + shown + "' has no unit; write " + allowed
              : "'"
                  + shown
                  + "': '"
                  + clean(m.group(2))
                  + "' is not a unit of "
                  + what(unit)
                  + "; write "
                  + allowed);
    }
    double number = Double.parseDouble(m.group(1));
    double value = size.divide() ? number / size.by() : number * size.by();
    if (!(Math.abs(value) <= LARGEST)) {
      throw new IllegalArgumentException(
          "'" + shown + "' is beyond any " + what(unit) + " of a bench; write " + allowed);
    }
    return value;
  }

  /** As {@link #parse}, and above 0. */
  public static double parsePositive(String text, Unit unit) {
    double value = parse(text, unit);
    if (!(value > 0)) {
      throw new IllegalArgumentException(
          "'" + clean(text) + "' must be above 0; write " + allowed(unit));
    }
    return value;
  }

  /** As {@link #parse}, and 0 or more. */
  public static double parseNotNegative(String text, Unit unit) {
    double value = parse(text, unit);
    if (!(value >= 0)) {
      throw new IllegalArgumentException(
          "'" + clean(text) + "' must be 0 or more; write " + allowed(unit));
    }
    return value;
  }

  /** What is allowed for this unit, with an example: "ns, us, ms, s, min, h or d, as in 12.5us". */
  public static String allowed(Unit unit) {
    StringBuilder names = new StringBuilder();
    int left = units(unit).size();
    for (String name : units(unit).keySet()) {
      names.append(name.isEmpty() ? "no unit" : name);
      left--;
      names.append(left > 1 ? ", " : left == 1 ? " or " : "");
    }
    return names + ", as in " + example(unit);
  }

  /** Text from outside as it may be shown: no control characters, not too long. */
  static String clean(String text) {
    StringBuilder out = new StringBuilder();
    text.codePoints()
        .limit(LONGEST)
        .forEach(c -> out.appendCodePoint(Character.isISOControl(c) ? '?' : c));
    return text.codePointCount(0, text.length()) > LONGEST ? out + "..." : out.toString();
  }

  /** Size of a named unit. Dividing by a whole power of ten is exact where multiplying is not. */
  private record Size(double by, boolean divide) {
    static Size times(double by) {
      return new Size(by, false);
    }

    static Size over(double by) {
      return new Size(by, true);
    }
  }

  private static Map<String, Size> units(Unit unit) {
    Map<String, Size> out = new LinkedHashMap<>();
    switch (unit) {
      case SECOND -> {
        out.put("ns", Size.over(1e9));
        out.put("us", Size.over(1e6));
        out.put("ms", Size.over(1e3));
        out.put("s", Size.times(1));
        out.put("min", Size.times(60));
        out.put("h", Size.times(3600));
        out.put("d", Size.times(86400));
      }
      case HERTZ -> {
        out.put("mHz", Size.over(1e3));
        out.put("Hz", Size.times(1));
        out.put("kHz", Size.times(1e3));
        out.put("MHz", Size.times(1e6));
        out.put("GHz", Size.times(1e9));
      }
      case TESLA -> small(out, "T");
      case VOLT -> small(out, "V");
      case VOLT_PER_ROOT_HERTZ -> small(out, "V/Hz^0.5");
      case DECIBEL -> out.put("dB", Size.times(1));
      case RADIAN -> {
        out.put("rad", Size.times(1));
        out.put("deg", Size.times(Math.PI / 180));
      }
      case CELSIUS -> {
        out.put("degC", Size.times(1));
        out.put("°C", Size.times(1));
      }
      case HERTZ_PER_SECOND -> {
        out.put("Hz/s", Size.times(1));
        out.put("kHz/s", Size.times(1e3));
      }
      case ONE -> {
        out.put("", Size.times(1));
        out.put("%", Size.over(100));
        out.put("ppm", Size.over(1e6));
      }
    }
    return out;
  }

  private static void small(Map<String, Size> out, String symbol) {
    out.put("n" + symbol, Size.over(1e9));
    out.put("u" + symbol, Size.over(1e6));
    out.put("m" + symbol, Size.over(1e3));
    out.put(symbol, Size.times(1));
  }

  private static String what(Unit unit) {
    return switch (unit) {
      case SECOND -> "time";
      case HERTZ -> "frequency";
      case TESLA -> "field";
      case VOLT -> "voltage";
      case VOLT_PER_ROOT_HERTZ -> "noise density";
      case DECIBEL -> "gain";
      case RADIAN -> "angle";
      case CELSIUS -> "temperature";
      case HERTZ_PER_SECOND -> "drift";
      case ONE -> "ratio";
    };
  }

  private static String example(Unit unit) {
    return switch (unit) {
      case SECOND -> "12.5us";
      case HERTZ -> "8.1MHz";
      case TESLA -> "190mT";
      case VOLT -> "20uV";
      case VOLT_PER_ROOT_HERTZ -> "1.2nV/Hz^0.5";
      case DECIBEL -> "30dB";
      case RADIAN -> "90deg";
      case CELSIUS -> "25degC";
      case HERTZ_PER_SECOND -> "0.5Hz/s";
      case ONE -> "0.5 or 50%";
    };
  }
}
