package coilside.board.profile;

import java.math.BigDecimal;
import java.util.LinkedHashMap;
import java.util.Map;
import java.util.OptionalDouble;
import java.util.regex.Matcher;
import java.util.regex.Pattern;

/** Reads "12.5us", "8.09 MHz", "90 deg" into SI, and knows which units a dimension may have. */
final class Quantities {
  private static final Pattern FORM =
      Pattern.compile("([+-]?(?:\\d+\\.?\\d*|\\.\\d+)(?:[eE][+-]?\\d{1,3})?)\\s*([A-Za-z%µ-]*)");

  private Quantities() {}

  /** Units by name with their size in SI; "tick" only where the clock tick is known. */
  static Map<String, Double> units(ValueName.Dimension dimension, double tickSeconds) {
    Map<String, Double> out = new LinkedHashMap<>();
    switch (dimension) {
      case FREQUENCY -> {
        out.put("Hz", 1.0);
        out.put("kHz", 1e3);
        out.put("MHz", 1e6);
        out.put("mHz", 1e-3);
      }
      case TIME -> {
        out.put("s", 1.0);
        out.put("ms", 1e-3);
        out.put("us", 1e-6);
        out.put("ns", 1e-9);
        if (tickSeconds > 0) {
          out.put("tick", tickSeconds);
        }
      }
      case ANGLE -> {
        out.put("rad", 1.0);
        out.put("deg", Math.PI / 180);
        out.put("quarter-turn", Math.PI / 2);
        out.put("turn", 2 * Math.PI);
      }
      case FRACTION -> {
        out.put("fraction", 1.0);
        out.put("percent", 0.01);
      }
      case GAIN -> out.put("dB", 1.0);
      case COUNT -> out.put("count", 1.0);
    }
    return out;
  }

  /** The value in SI; empty when it is no number with a unit of this dimension. */
  static OptionalDouble parse(String text, ValueName.Dimension dimension) {
    if (text.length() > 40) {
      return OptionalDouble.empty();
    }
    Matcher m = FORM.matcher(text.trim());
    if (!m.matches()) {
      return OptionalDouble.empty();
    }
    String unit = m.group(2).replace('µ', 'u');
    if (unit.equals("%") && dimension == ValueName.Dimension.FRACTION) {
      unit = "percent";
    }
    boolean bare =
        dimension == ValueName.Dimension.FRACTION || dimension == ValueName.Dimension.COUNT;
    Double size = unit.isEmpty() && bare ? Double.valueOf(1) : units(dimension, 0).get(unit);
    if (size == null) {
      return OptionalDouble.empty();
    }
    // In decimal, so that "8.3MHz" is 8300000 Hz and not the neighbour of it.
    double si = new BigDecimal(m.group(1)).multiply(BigDecimal.valueOf(size)).doubleValue();
    return Double.isFinite(si) ? OptionalDouble.of(si) : OptionalDouble.empty();
  }
}
