package coilside.board.simulated;

import java.util.LinkedHashMap;
import java.util.Map;
import java.util.OptionalDouble;
import java.util.regex.Matcher;
import java.util.regex.Pattern;

/** The units a quantity of a scenario may be written in, the first being the SI one. */
enum ScenarioUnit {
  FREQUENCY("Hz", 1, "kHz", 1e3, "MHz", 1e6, "mHz", 1e-3),
  TIME("s", 1, "ms", 1e-3, "us", 1e-6, "ns", 1e-9, "min", 60, "h", 3600),
  VOLTAGE("V", 1, "mV", 1e-3, "uV", 1e-6, "nV", 1e-9),
  ANGLE("rad", 1, "deg", Math.PI / 180),
  TEMPERATURE("degC", 1),
  TEMPERATURE_STEP("K", 1, "mK", 1e-3),
  DRIFT("K/s", 1, "K/min", 1.0 / 60, "K/h", 1.0 / 3600, "mK/h", 1e-3 / 3600),
  COEFFICIENT("1/K", 1, "ppm/K", 1e-6),
  NOISE_DENSITY("V/Hz^0.5", 1, "uV/Hz^0.5", 1e-6, "nV/Hz^0.5", 1e-9, "pV/Hz^0.5", 1e-12),
  NUMBER("", 1);

  private static final Pattern FORM =
      Pattern.compile("([+-]?(?:\\d+\\.?\\d*|\\.\\d+)(?:[eE][+-]?\\d{1,3})?) ?(\\D\\S*)");

  private final Map<String, Double> sizes = new LinkedHashMap<>();

  ScenarioUnit(Object... namesAndSizes) {
    for (int i = 0; i < namesAndSizes.length; i += 2) {
      sizes.put((String) namesAndSizes[i], ((Number) namesAndSizes[i + 1]).doubleValue());
    }
  }

  /** The value in SI; empty when it is nothing of this kind. */
  OptionalDouble read(Object value) {
    if (this == NUMBER) {
      return value instanceof Number n
          ? OptionalDouble.of(n.doubleValue())
          : OptionalDouble.empty();
    }
    if (!(value instanceof String text) || text.length() > 40) {
      return OptionalDouble.empty();
    }
    Matcher m = FORM.matcher(text.strip());
    Double size = m.matches() ? sizes.get(m.group(2).replace('\u00b5', 'u')) : null;
    return size == null
        ? OptionalDouble.empty()
        : OptionalDouble.of(Double.parseDouble(m.group(1)) * size);
  }

  /** What may be written, in words. */
  String words(double least, double most) {
    String range = least + " to " + most;
    if (this == NUMBER) {
      return "a number from " + range;
    }
    return "in quotes, a number with its unit ("
        + String.join(", ", sizes.keySet())
        + "), from "
        + range
        + " in the first of them";
  }
}
