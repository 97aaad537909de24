package coilside.bench;

import coilside.quantity.Measured;
import java.util.Collections;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;

/**
 * What the analysis of a capture says: the values of the rung by name, warnings, and the picture.
 *
 * @param values by value name, in order
 * @param warnings one sentence each
 * @param picture what there is to see
 */
public record Reading(Map<String, Measured> values, List<String> warnings, Picture picture) {
  public Reading {
    values = Collections.unmodifiableMap(new LinkedHashMap<>(values));
    warnings = List.copyOf(warnings);
  }

  /** The value of this name. */
  public Measured value(String name) {
    Measured m = values.get(name);
    if (m == null) {
      throw new IllegalArgumentException("no value '" + name + "' in this reading");
    }
    return m;
  }
}
