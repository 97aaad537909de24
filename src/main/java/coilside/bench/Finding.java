package coilside.bench;

import coilside.quantity.Measured;
import java.time.Instant;
import java.util.Collections;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;

/**
 * What one measurement of a rung found: values, or a refusal.
 *
 * @param id identity, a UUID as text
 * @param rung which rung
 * @param started UTC
 * @param seconds how long it took by the clock
 * @param scans scans played
 * @param values by value name ("pulse_90"), in order; empty when refused
 * @param warnings what the operator should know, one sentence each
 * @param refusal present when refused
 * @param conditions how the bench stood
 * @param capture base name of the capture it came from; empty when there is none
 * @param restedOn ids of the findings of the rungs beneath, by rung
 * @param simulated true when the simulated bench in this process was measured
 */
public record Finding(
    String id,
    Rung rung,
    Instant started,
    double seconds,
    int scans,
    Map<String, Measured> values,
    List<String> warnings,
    Optional<Refusal> refusal,
    Conditions conditions,
    String capture,
    Map<Rung, String> restedOn,
    boolean simulated) {
  public Finding {
    values = Collections.unmodifiableMap(new LinkedHashMap<>(values));
    warnings = List.copyOf(warnings);
    restedOn = Map.copyOf(restedOn);
  }

  public boolean refused() {
    return refusal.isPresent();
  }

  /** The value of this name; an exception when it is not there. */
  public Measured value(String name) {
    Measured m = values.get(name);
    if (m == null) {
      throw new IllegalArgumentException(rung.id() + " holds no value '" + name + "'");
    }
    return m;
  }
}
