package coilside.bench;

import coilside.fit.AllanDeviation;
import coilside.fit.DriftFit;
import coilside.fit.NotDetermined;
import coilside.quantity.Measured;
import coilside.quantity.Unit;
import java.time.Duration;
import java.time.Instant;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Locale;
import java.util.Optional;
import java.util.OptionalDouble;

/**
 * What a log says as a whole: how the Larmor frequency drifted, went with the temperature, and
 * wandered.
 *
 * @param run identity of the run
 * @param first when the first row was started, UTC; empty without rows
 * @param last when the last row was started, UTC
 * @param seconds from the first to the last row by the schedule, s
 * @param rows rows with values
 * @param gaps rows without
 * @param retries answers that had to be asked for again
 * @param larmorFrequency mean, Hz; empty where too few rows have one
 * @param driftPpmPerHour slope of the frequency over time, 1e-6 of it an hour
 * @param temperatureLowCelsius lowest temperature that came with a frequency
 * @param temperatureHighCelsius highest
 * @param coefficientPpmPerKelvin slope of the frequency over temperature, 1e-6 of it a kelvin
 * @param wander Allan deviations, shortest averaging time first
 * @param notes what could not be told, and what to mind, one sentence each
 */
public record LogSummary(
    String run,
    Optional<Instant> first,
    Optional<Instant> last,
    double seconds,
    long rows,
    long gaps,
    long retries,
    Optional<Measured> larmorFrequency,
    Optional<Slope> driftPpmPerHour,
    OptionalDouble temperatureLowCelsius,
    OptionalDouble temperatureHighCelsius,
    Optional<Slope> coefficientPpmPerKelvin,
    List<Wander> wander,
    List<String> notes) {
  /** A temperature that moved by less tells nothing about a coefficient, K. */
  static final double LEAST_TEMPERATURE_SPAN = 0.1;

  /** Time and temperature that go together more closely than this cannot be told apart. */
  static final double CONFOUNDED = 0.9;

  /**
   * A slope with its standard uncertainty, in the same unit.
   *
   * @param value the slope
   * @param u its standard uncertainty
   */
  public record Slope(double value, double u) {}

  /**
   * Overlapping Allan deviation of the fractional frequency at one averaging time (NIST SP 1065,
   * 5.2.4).
   *
   * @param averagingSeconds averaging time, s
   * @param deviation the deviation, 1
   * @param u its standard uncertainty by the simple rule deviation / sqrt(averages), whatever the
   *     kind of noise (NIST SP 1065, 5.3.1)
   * @param rows how many rows without a gap it stands on
   */
  public record Wander(double averagingSeconds, double deviation, double u, int rows) {}

  public LogSummary {
    wander = List.copyOf(wander);
    notes = List.copyOf(notes);
  }

  /** Takes the rows of one run one by one, oldest first, and keeps five numbers of each. */
  public static final class Builder {
    private String run = "";
    private Instant first;
    private long firstNumber;
    private Instant last;
    private Instant lastDue;
    private long lastNumber;
    private final double[] slotSeconds = new double[101];
    private int steps;
    private long gaps;
    private long retries;
    private long[] number = new long[64];
    private double[] hertz = new double[64];
    private double[] u = new double[64];
    private double[] celsius = new double[64];
    private int count;
    private long valued;

    /** Adds a row. */
    public void add(LogRow row) {
      run = row.run();
      if (first == null) {
        first = row.started();
        firstNumber = row.number();
      }
      if (lastDue != null && steps < slotSeconds.length && row.number() > lastNumber) {
        slotSeconds[steps++] =
            Duration.between(lastDue, row.due()).toNanos() * 1e-9 / (row.number() - lastNumber);
      }
      last = row.started();
      lastDue = row.due();
      lastNumber = row.number();
      retries += row.retries();
      if (row.values().isEmpty()) {
        gaps++;
        return;
      }
      valued++;
      Measured f = row.values().get("larmor_frequency");
      if (f == null || !f.hasUncertainty() || !(f.u() > 0) || !Double.isFinite(f.u() + f.value())) {
        return;
      }
      if (count == hertz.length) {
        number = Arrays.copyOf(number, 2 * count);
        hertz = Arrays.copyOf(hertz, 2 * count);
        u = Arrays.copyOf(u, 2 * count);
        celsius = Arrays.copyOf(celsius, 2 * count);
      }
      number[count] = row.number();
      hertz[count] = f.value();
      u[count] = f.u();
      celsius[count] = row.temperatureCelsius().orElse(Double.NaN);
      count++;
    }

    /** What the rows say together. */
    public LogSummary build() {
      List<String> notes = new ArrayList<>();
      double interval = interval();
      double[] x = new double[count];
      for (int i = 0; i < count; i++) {
        x[i] = (number[i] - firstNumber) * interval;
      }
      double[] y = Arrays.copyOf(hertz, count);
      double[] uy = Arrays.copyOf(u, count);
      Optional<DriftFit.Line> overTime = line(x, y, uy, "no drift rate", notes);
      double wide = overTime.map(l -> widening(l, x, y, uy)).orElse(1.0);
      if (wide > 1) {
        notes.add(
            String.format(
                Locale.ROOT,
                "the frequency does not scatter about a straight line but wanders: the"
                    + " uncertainties of mean and drift are widened %.3g times for that",
                wide));
      }
      Optional<Measured> mean =
          overTime.map(l -> Measured.of(l.mean(), wide * l.uMean(), Unit.HERTZ));
      Optional<Slope> drift =
          overTime.map(
              l ->
                  new Slope(
                      l.ppmPerHour(l.mean()), wide * l.uSlope() * 3600e6 / Math.abs(l.mean())));
      Warmth warmth = warmth(x, notes);
      return new LogSummary(
          run,
          Optional.ofNullable(first),
          Optional.ofNullable(last),
          (lastNumber - firstNumber) * interval,
          valued,
          gaps,
          retries,
          mean,
          drift,
          warmth.low(),
          warmth.high(),
          warmth.coefficient(),
          wander(interval, notes),
          notes);
    }

    /**
     * By how much neighbouring residuals that go together widen the uncertainties of a line: with a
     * correlation r from one to the next, n values are worth n (1 - r) / (1 + r) (first-order
     * autoregression; common practice, from memory). 1 where they do not.
     */
    private static double widening(DriftFit.Line line, double[] x, double[] y, double[] u) {
      double together = 0;
      double alone = 0;
      double before = 0;
      for (int i = 0; i < x.length; i++) {
        double residual = (y[i] - line.at(x[i])) / u[i];
        together += i == 0 ? 0 : residual * before;
        alone += residual * residual;
        before = residual;
      }
      double r = alone > 0 ? together / alone : 0;
      return r > 2 / Math.sqrt(x.length) ? Math.sqrt((1 + r) / (1 - r)) : 1;
    }

    /** From one slot to the next, s: the usual distance, since the clock may have stepped. */
    private double interval() {
      if (steps == 0) {
        return 1;
      }
      double[] sorted = Arrays.copyOf(slotSeconds, steps);
      Arrays.sort(sorted);
      return sorted[steps / 2] > 0 ? sorted[steps / 2] : 1;
    }

    private static Optional<DriftFit.Line> line(
        double[] x, double[] y, double[] u, String what, List<String> notes) {
      try {
        return Optional.of(DriftFit.line(x, y, u));
      } catch (NotDetermined e) {
        notes.add(what + ": " + e.getMessage() + "; " + e.remedy());
        return Optional.empty();
      }
    }

    private record Warmth(OptionalDouble low, OptionalDouble high, Optional<Slope> coefficient) {}

    private Warmth warmth(double[] time, List<String> notes) {
      double[] t = new double[count];
      double[] at = new double[count];
      double[] y = new double[count];
      double[] uy = new double[count];
      int n = 0;
      for (int i = 0; i < count; i++) {
        if (Double.isFinite(celsius[i])) {
          t[n] = celsius[i];
          at[n] = time[i];
          y[n] = hertz[i];
          uy[n++] = u[i];
        }
      }
      if (n == 0) {
        return new Warmth(OptionalDouble.empty(), OptionalDouble.empty(), Optional.empty());
      }
      double[] temperatures = Arrays.copyOf(t, n);
      double low = Arrays.stream(temperatures).min().orElseThrow();
      double high = Arrays.stream(temperatures).max().orElseThrow();
      Optional<Slope> coefficient = Optional.empty();
      if (high - low < LEAST_TEMPERATURE_SPAN) {
        notes.add(
            String.format(
                Locale.ROOT,
                "no temperature coefficient: the temperature moved by %.2f K, less than %.1f K",
                high - low,
                LEAST_TEMPERATURE_SPAN));
      } else {
        double[] values = Arrays.copyOf(y, n);
        double[] uncertainties = Arrays.copyOf(uy, n);
        coefficient =
            line(temperatures, values, uncertainties, "no temperature coefficient", notes)
                .map(l -> new Slope(l.ppmPerUnit(l.mean()), l.uSlope() * 1e6 / Math.abs(l.mean())));
        double together = correlation(temperatures, Arrays.copyOf(at, n));
        if (coefficient.isPresent() && Math.abs(together) > CONFOUNDED) {
          notes.add(
              String.format(
                  Locale.ROOT,
                  "time and temperature went together (correlation %.2f): drift and temperature"
                      + " coefficient cannot be told apart",
                  together));
        }
      }
      return new Warmth(OptionalDouble.of(low), OptionalDouble.of(high), coefficient);
    }

    private static Slope coefficient(DriftFit.Line l, double[] t, double[] y, double[] u) {
      double wide = widening(l, t, y, u);
      return new Slope(l.ppmPerUnit(l.mean()), wide * l.uSlope() * 1e6 / Math.abs(l.mean()));
    }

    private static double correlation(double[] a, double[] b) {
      double ma = Arrays.stream(a).average().orElse(0);
      double mb = Arrays.stream(b).average().orElse(0);
      double ab = 0;
      double aa = 0;
      double bb = 0;
      for (int i = 0; i < a.length; i++) {
        ab += (a[i] - ma) * (b[i] - mb);
        aa += (a[i] - ma) * (a[i] - ma);
        bb += (b[i] - mb) * (b[i] - mb);
      }
      return aa > 0 && bb > 0 ? ab / Math.sqrt(aa * bb) : 0;
    }

    /** Over the longest stretch of rows without a gap, since the averages must be adjacent. */
    private List<Wander> wander(double interval, List<String> notes) {
      int from = 0;
      int length = 0;
      int begin = 0;
      for (int i = 0; i < count; i++) {
        if (i > 0 && number[i] != number[i - 1] + 1) {
          begin = i;
        }
        if (i - begin + 1 > length) {
          from = begin;
          length = i - begin + 1;
        }
      }
      List<Wander> out = new ArrayList<>();
      if (length < 3) {
        notes.add("no Allan deviation: it needs 3 rows without a gap between them");
        return out;
      }
      if (length < count) {
        notes.add(
            "the Allan deviation stands on the "
                + length
                + " rows of the longest stretch without a gap");
      }
      double[] y = Arrays.copyOfRange(hertz, from, from + length);
      double mean = Arrays.stream(y).average().orElseThrow();
      for (int i = 0; i < length; i++) {
        y[i] = (y[i] - mean) / mean;
      }
      for (int m = 1; 3 * m <= length; m *= 2) {
        double deviation = AllanDeviation.overlapping(y, m);
        out.add(
            new Wander(
                m * interval, deviation, deviation / Math.sqrt(length / (double) m), length));
      }
      return out;
    }
  }
}
