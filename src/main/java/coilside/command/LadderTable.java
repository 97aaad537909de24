package coilside.command;

import coilside.bench.Finding;
import coilside.bench.RungStatus;
import coilside.quantity.AgeFormat;
import coilside.quantity.ConciseFormat;
import coilside.quantity.Measured;
import java.time.Duration;
import java.time.Instant;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Map;

/** The ladder as a table of text: state, values with uncertainty, age, and why not fresh. */
final class LadderTable {
  private LadderTable() {}

  static List<String> of(List<RungStatus> ladder, Instant now, boolean plain) {
    List<String> lines = new ArrayList<>();
    lines.add(String.format(Locale.ROOT, "%-10s %-8s %-8s %s", "rung", "state", "age", "values"));
    for (RungStatus status : ladder) {
      lines.addAll(rows(status, now, plain));
    }
    return lines;
  }

  private static List<String> rows(RungStatus status, Instant now, boolean plain) {
    List<String> out = new ArrayList<>();
    String age =
        status
            .finding()
            .map(f -> AgeFormat.text(Duration.between(f.started(), now).toMillis() * 1e-3))
            .orElse("-");
    List<String> values = status.finding().map(f -> values(f, plain)).orElse(List.of());
    out.add(
        String.format(
            Locale.ROOT,
            "%-10s %-8s %-8s %s",
            status.rung().id(),
            status.state().name().toLowerCase(Locale.ROOT),
            age,
            values.isEmpty() ? "-" : values.get(0)));
    for (int i = 1; i < values.size(); i++) {
      out.add(" ".repeat(29) + values.get(i));
    }
    for (String reason : status.reasons()) {
      out.add(" ".repeat(29) + "because " + reason);
    }
    status
        .finding()
        .ifPresent(f -> f.warnings().forEach(w -> out.add(" ".repeat(29) + "note: " + w)));
    return out;
  }

  static List<String> values(Finding finding, boolean plain) {
    List<String> out = new ArrayList<>();
    for (Map.Entry<String, Measured> e : finding.values().entrySet()) {
      out.add(value(e.getKey(), e.getValue(), plain));
    }
    return out;
  }

  static String value(String name, Measured m, boolean plain) {
    return String.format(
        Locale.ROOT,
        "%-18s %s",
        name.replace('_', ' '),
        plain ? ConciseFormat.ascii(m) : ConciseFormat.text(m));
  }
}
