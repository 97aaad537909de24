package coilside.bench;

import coilside.quantity.ConciseFormat;
import coilside.quantity.Measured;
import coilside.quantity.Quantities;
import coilside.quantity.Unit;
import java.util.LinkedHashMap;
import java.util.Locale;
import java.util.Map;
import java.util.Optional;
import java.util.regex.Matcher;
import java.util.regex.Pattern;

/**
 * A bound on one value of a log's rows, and what to do when a row lies beyond it. A value lies
 * beyond when it does so by more than its standard uncertainty: noise alone seldom does.
 *
 * @param value name of the value: one of {@link #NAMES}
 * @param side which side is out of bounds
 * @param limit the bound, in the coherent unit of the value
 * @param action what to do
 */
public record LogRule(String value, Side side, double limit, Action action) {
  private static final Pattern FORM = Pattern.compile("\\s*([a-z0-9_]+)\\s*([<>])\\s*(\\S.*?)\\s*");
  private static final int LONGEST = 80;

  /** The values that may be bounded, with their units. */
  public static final Map<String, Unit> NAMES = names();

  /** Which side of the bound is out of bounds. */
  public enum Side {
    ABOVE,
    BELOW
  }

  /** What to do when a value is out of bounds. */
  public enum Action {
    /** Say so, in the row and to the operator. */
    WARN,
    /** Say so and end the run. */
    STOP
  }

  public LogRule {
    if (!NAMES.containsKey(value) || !Double.isFinite(limit)) {
      throw new IllegalArgumentException("no bound " + limit + " on '" + value + "'");
    }
  }

  private static Map<String, Unit> names() {
    Map<String, Unit> out = new LinkedHashMap<>();
    out.put("larmor_frequency", Unit.HERTZ);
    out.put("field", Unit.TESLA);
    out.put("amplitude", Unit.VOLT);
    out.put("linewidth", Unit.HERTZ);
    out.put("t2_star", Unit.SECOND);
    out.put("snr", Unit.ONE);
    out.put("temperature", Unit.CELSIUS);
    return out;
  }

  /**
   * Reads "linewidth > 80Hz" or "snr < 20".
   *
   * @throws IllegalArgumentException with one sentence for people
   */
  public static LogRule parse(String text, Action action) {
    Matcher m = FORM.matcher(text);
    if (text.length() > LONGEST || !m.matches()) {
      throw new IllegalArgumentException(
          "must be a value, > or <, and a bound with its unit, such as \"linewidth > 80Hz\"");
    }
    Unit unit = NAMES.get(m.group(1));
    if (unit == null) {
      throw new IllegalArgumentException(
          "'"
              + m.group(1)
              + "' is no value of a log: take one of "
              + String.join(", ", NAMES.keySet()));
    }
    return new LogRule(
        m.group(1),
        m.group(2).equals(">") ? Side.ABOVE : Side.BELOW,
        Quantities.parse(m.group(3), unit),
        action);
  }

  /** What a row says against this rule, in words; empty when it holds or cannot be judged. */
  Optional<String> broken(LogRow row) {
    Measured m = row.values().get(value);
    if (value.equals("temperature") && row.temperatureCelsius().isPresent()) {
      m =
          Measured.withoutUncertainty(
              row.temperatureCelsius().getAsDouble(), Unit.CELSIUS, "told by the board");
    }
    if (m == null || Double.isNaN(m.value())) {
      return Optional.empty();
    }
    double u = m.hasUncertainty() && Double.isFinite(m.u()) ? m.u() : 0;
    double beyond = side == Side.ABOVE ? m.value() - limit : limit - m.value();
    if (!(beyond > u)) {
      return Optional.empty();
    }
    return Optional.of(
        String.format(
            Locale.ROOT,
            "%s is %s, %s the bound of %s",
            value,
            ConciseFormat.ascii(m),
            side == Side.ABOVE ? "above" : "below",
            ConciseFormat.ascii(
                Measured.withoutUncertainty(limit, m.unit(), "chosen by the operator"))));
  }
}
