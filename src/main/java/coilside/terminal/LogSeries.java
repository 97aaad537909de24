package coilside.terminal;

import coilside.bench.LogRow;
import coilside.quantity.Measured;
import java.util.List;

/** The rows of a log as plain numbers, newest kept, in bounded memory. NaN stands for a gap. */
final class LogSeries {
  static final List<String> NAMES =
      List.of("larmor_frequency", "linewidth", "t2_star", "amplitude", "snr", "temperature");
  static final List<String> UNITS = List.of("Hz", "Hz", "s", "V", "", "°C");
  private static final int KEPT = 8192;
  private final double[][] values = new double[NAMES.size() + 1][];
  private int count;
  private int gaps;
  private String run = "";

  LogSeries() {
    for (int i = 0; i < values.length; i++) {
      values[i] = new double[KEPT];
    }
  }

  synchronized void add(LogRow row) {
    if (!row.run().equals(run)) {
      run = row.run();
      count = 0;
      gaps = 0;
    }
    if (count == KEPT) {
      // Drop the older half at once, so that adding stays cheap.
      for (double[] v : values) {
        System.arraycopy(v, KEPT / 2, v, 0, KEPT / 2);
      }
      count = KEPT / 2;
    }
    values[0][count] = row.started().toEpochMilli() / 1e3;
    for (int i = 0; i < NAMES.size(); i++) {
      Measured m = row.values().get(NAMES.get(i));
      values[i + 1][count] = m == null ? Double.NaN : m.value();
    }
    if (row.temperatureCelsius().isPresent()) {
      values[NAMES.size()][count] = row.temperatureCelsius().getAsDouble();
    }
    if (row.values().isEmpty()) {
      gaps++;
    }
    count++;
  }

  synchronized int size() {
    return count;
  }

  synchronized int gaps() {
    return gaps;
  }

  /** When the newest row was started, s since 1970; NaN when there is none. */
  synchronized double newest() {
    return count == 0 ? Double.NaN : values[0][count - 1];
  }

  /** Seconds since the first row kept. */
  synchronized double[] seconds() {
    double[] out = new double[count];
    for (int i = 0; i < count; i++) {
      out[i] = values[0][i] - values[0][0];
    }
    return out;
  }

  synchronized double[] column(int name) {
    return java.util.Arrays.copyOf(values[name + 1], count);
  }
}
