package coilside.command;

import coilside.bench.LogEnd;
import coilside.bench.LogRow;
import coilside.bench.LogSummary;
import coilside.quantity.ConciseFormat;
import coilside.quantity.Measured;
import coilside.quantity.Unit;
import coilside.record.Json;
import coilside.record.JsonDocument;
import java.math.BigDecimal;
import java.math.MathContext;
import java.math.RoundingMode;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Map;

/** Rows and summary of a log, as lines for people and as documents for scripts. */
final class LogText {
  private LogText() {}

  /** One row on one line. */
  static String row(LogRow row, boolean plain) {
    StringBuilder line = new StringBuilder(row.started().toString());
    line.append("  ").append(row.number());
    for (String name : new String[] {"larmor_frequency", "t2_star", "amplitude", "snr"}) {
      Measured m = row.values().get(name);
      if (m != null) {
        line.append("  ").append(name(name)).append(text(m, plain));
      }
    }
    row.temperatureCelsius()
        .ifPresent(t -> line.append(String.format(Locale.ROOT, "  %.2f degC", t)));
    if (row.values().isEmpty()) {
      line.append("  gap:");
    }
    if (!row.note().isEmpty()) {
      line.append("  ").append(row.note());
    }
    if (!row.capture().isEmpty()) {
      line.append("  [").append(row.capture()).append(']');
    }
    return line.toString();
  }

  private static String name(String value) {
    return switch (value) {
      case "t2_star" -> "T2* ";
      case "snr" -> "SNR ";
      default -> "";
    };
  }

  private static String text(Measured m, boolean plain) {
    return plain ? ConciseFormat.ascii(m) : ConciseFormat.text(m);
  }

  /** The summary, one thing a line. */
  static List<String> summary(LogSummary s, boolean plain) {
    List<String> out = new ArrayList<>();
    StringBuilder head = new StringBuilder(s.run());
    head.append(": ").append(s.rows()).append(" rows, ").append(s.gaps()).append(" gaps");
    if (s.retries() > 0) {
      head.append(", ").append(s.retries()).append(" answers asked for again");
    }
    if (s.seconds() > 0) {
      head.append(", over ").append(words(s.seconds()));
    }
    out.add(head.toString());
    s.larmorFrequency().ifPresent(f -> out.add("Larmor frequency, mean: " + text(f, plain)));
    s.driftPpmPerHour().ifPresent(d -> out.add("drift: " + slope(d.value(), d.u()) + " ppm/h"));
    if (s.temperatureLowCelsius().isPresent()) {
      out.add(
          String.format(
              Locale.ROOT,
              "temperature: %.2f to %.2f degC",
              s.temperatureLowCelsius().getAsDouble(),
              s.temperatureHighCelsius().getAsDouble()));
    }
    s.coefficientPpmPerKelvin()
        .ifPresent(c -> out.add("temperature coefficient: " + slope(c.value(), c.u()) + " ppm/K"));
    for (LogSummary.Wander w : s.wander()) {
      out.add(
          String.format(
              Locale.ROOT,
              "Allan deviation over %s: %.3g (u %.2g)",
              words(w.averagingSeconds()),
              w.deviation(),
              w.u()));
    }
    out.addAll(s.notes());
    return out;
  }

  static String words(double seconds) {
    if (seconds < 120) {
      return String.format(Locale.ROOT, "%.4g s", seconds);
    }
    if (seconds < 7200) {
      return String.format(Locale.ROOT, "%.4g min", seconds / 60);
    }
    return String.format(Locale.ROOT, "%.4g h", seconds / 3600);
  }

  /** A slope in the concise form: two digits of uncertainty, the value as many decimals. */
  static String slope(double slope, double itsU) {
    if (!(itsU > 0) || !Double.isFinite(itsU) || !Double.isFinite(slope)) {
      return String.format(Locale.ROOT, "%.4g", slope);
    }
    BigDecimal u = new BigDecimal(itsU).round(new MathContext(2));
    int decimals = u.scale();
    BigDecimal value = new BigDecimal(slope).setScale(decimals, RoundingMode.HALF_EVEN);
    String digits = decimals > 0 ? u.unscaledValue().toString() : u.toBigInteger().toString();
    return value.toPlainString() + "(" + digits + ")";
  }

  /** The summary as a document; the end is left out for a run that ended earlier. */
  static JsonDocument json(LogSummary s) {
    JsonDocument out =
        new JsonDocument()
            .put("run", s.run())
            .put("seconds", s.seconds())
            .put("rows", s.rows())
            .put("gaps", s.gaps())
            .put("retries", s.retries());
    s.first().ifPresent(t -> out.put("first", t));
    s.last().ifPresent(t -> out.put("last", t));
    s.larmorFrequency()
        .ifPresent(f -> out.put("values", Json.values(Map.of("larmor_frequency", f))));
    s.driftPpmPerHour().ifPresent(d -> out.put("drift_rate", value(d.value(), d.u(), "ppm/h")));
    if (s.temperatureLowCelsius().isPresent()) {
      out.put("temperature_low_celsius", s.temperatureLowCelsius().getAsDouble());
      out.put("temperature_high_celsius", s.temperatureHighCelsius().getAsDouble());
    }
    s.coefficientPpmPerKelvin()
        .ifPresent(c -> out.put("temperature_coefficient", value(c.value(), c.u(), "ppm/K")));
    return out.putAll(
            "allan_deviation",
            s.wander().stream()
                .map(
                    w ->
                        value(w.deviation(), w.u(), Unit.ONE.symbol())
                            .put("averaging_seconds", w.averagingSeconds())
                            .put("rows", w.rows()))
                .toList())
        .putTexts("notes", s.notes());
  }

  /** The summary with how the run ended. */
  static JsonDocument json(LogSummary s, LogEnd end) {
    return json(s)
        .put("ended", end.why().name().toLowerCase(Locale.ROOT))
        .put("reason", end.reason());
  }

  private static JsonDocument value(double value, double u, String unit) {
    return new JsonDocument().put("value", value).put("u", u).put("unit", unit);
  }
}
