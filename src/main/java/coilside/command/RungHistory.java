package coilside.command;

import coilside.bench.Finding;
import coilside.bench.LearnedDrift;
import coilside.bench.Rung;
import coilside.quantity.ConciseFormat;
import coilside.quantity.Measured;
import coilside.record.Json;
import coilside.record.JsonDocument;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.Optional;

/**
 * A rung through time: every finding, how its values moved since the one before, and the drift
 * learned from them.
 *
 * @param rung which
 * @param findings oldest first
 * @param drift what was learned, where anything was
 * @param trustedSeconds how long a finding is trusted without a drift, s
 */
record RungHistory(
    Rung rung,
    List<Finding> findings,
    Optional<LearnedDrift> drift,
    Optional<Double> trustedSeconds) {
  static RungHistory of(Map<Rung, List<Finding>> all, Rung rung) {
    return new RungHistory(
        rung,
        all.get(rung),
        LearnedDrift.of(all, rung),
        LearnedDrift.trustedWithoutSeconds(all, rung));
  }

  void print(CommonOptions common, Output output) {
    if (common.json) {
      JsonDocument document = Json.history(findings);
      drift.ifPresent(d -> document.put("drift", json(d)));
      output.line(document.text());
    } else {
      lines(common.plain).forEach(output::line);
    }
  }

  private static JsonDocument json(LearnedDrift d) {
    return new JsonDocument()
        .put("value_name", d.valueName())
        .put("value", d.perSecond())
        .put("u", d.u())
        .put("unit", d.unit().symbol() + "/s")
        .put("findings", d.findings())
        .put("trusted_seconds", d.trustedSeconds());
  }

  private List<String> lines(boolean plain) {
    List<String> out = new ArrayList<>();
    Finding before = null;
    for (Finding finding : findings) {
      out.add(finding.started() + "  sample '" + finding.conditions().sample() + "'");
      FindingText.of(finding, plain).forEach(line -> out.add("  " + line));
      if (!finding.refused()) {
        if (before != null) {
          moved(before, finding, plain).ifPresent(line -> out.add("  " + line));
        }
        before = finding;
      }
    }
    if (findings.isEmpty()) {
      out.add("nothing was measured yet");
      return out;
    }
    out.add(learned());
    return out;
  }

  /** How the value the rung is named for moved, with the uncertainty of the difference. */
  private static Optional<String> moved(Finding before, Finding now, boolean plain) {
    return now.values().entrySet().stream()
        .filter(e -> before.values().containsKey(e.getKey()))
        .findFirst()
        .map(
            e -> {
              Measured then = before.value(e.getKey());
              Measured m = e.getValue();
              if (!then.hasUncertainty() || !m.hasUncertainty()) {
                return "since the one before: "
                    + ConciseFormat.text(m.value() - then.value(), m.unit());
              }
              Measured difference =
                  Measured.of(m.value() - then.value(), Math.hypot(m.u(), then.u()), m.unit());
              return e.getKey().replace('_', ' ')
                  + " since the one before: "
                  + (plain ? ConciseFormat.ascii(difference) : ConciseFormat.text(difference));
            });
  }

  private String learned() {
    if (drift.isPresent()) {
      LearnedDrift d = drift.get();
      return String.format(
          Locale.ROOT,
          "drift learned from %d findings: %s %s %s/h; a finding is trusted for %s",
          d.findings(),
          d.valueName().replace('_', ' '),
          LogText.slope(3600 * d.perSecond(), 3600 * d.u()),
          d.unit().symbol(),
          LogText.words(d.trustedSeconds()));
    }
    return trustedSeconds
        .map(
            s ->
                "no drift learned: it takes at least 3 comparable findings of a value that drifts;"
                    + " a finding is trusted for "
                    + LogText.words(s))
        .orElse("no drift learned: every measurement was refused");
  }
}
