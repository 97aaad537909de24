package coilside.bench;

import coilside.quantity.Measured;
import java.time.Instant;
import java.util.Collections;
import java.util.LinkedHashMap;
import java.util.Map;
import java.util.OptionalDouble;

/**
 * One row of a log: a repetition, or a gap.
 *
 * @param run identity of the log run
 * @param number slot number in the schedule, from 0
 * @param due when it was due, UTC
 * @param started when it was started, UTC
 * @param values larmor_frequency, field, amplitude, linewidth, t2_star, snr; empty for a gap
 * @param temperatureCelsius where the board reports one
 * @param retries answers that had to be asked for again
 * @param note why there is a gap, what was missed; empty for an ordinary row
 * @param capture base name of the capture; empty when none was kept
 */
public record LogRow(
    String run,
    long number,
    Instant due,
    Instant started,
    Map<String, Measured> values,
    OptionalDouble temperatureCelsius,
    int retries,
    String note,
    String capture) {
  public LogRow {
    values = Collections.unmodifiableMap(new LinkedHashMap<>(values));
  }

  /** The same row with another note. */
  LogRow withNote(String text) {
    return new LogRow(
        run, number, due, started, values, temperatureCelsius, retries, text, capture);
  }
}
