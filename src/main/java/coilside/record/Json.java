package coilside.record;

import coilside.bench.Climb;
import coilside.bench.Finding;
import coilside.bench.LogRow;
import coilside.bench.Rung;
import coilside.bench.RungStatus;
import coilside.quantity.Measured;
import java.util.List;
import java.util.Locale;
import java.util.Map;

/**
 * The documents that {@code --json} prints: a contract that scripts rely on, so keys are only ever
 * added. Numbers are SI; {@code u} is the standard uncertainty, {@code null} together with {@code
 * why_no_u} where there is none.
 */
public final class Json {
  private Json() {}

  /** One finding just made: state "fresh", or "refused". */
  public static JsonDocument finding(Finding finding) {
    return finding(finding, finding.refused() ? "refused" : "fresh");
  }

  private static JsonDocument finding(Finding f, String state) {
    JsonDocument out =
        new JsonDocument()
            .put("rung", f.rung().id())
            .put("state", state)
            .put("started", f.started())
            .put("seconds", f.seconds())
            .put("scans", f.scans())
            .put("values", values(f.values()))
            .putTexts("warnings", f.warnings())
            .put("capture", f.capture());
    f.refusal()
        .ifPresent(
            r ->
                out.put(
                    "refusal",
                    new JsonDocument()
                        .put("reason", r.reason())
                        .putTexts("likely_causes", r.likelyCauses())));
    return out.put("id", f.id())
        .put("sample", f.conditions().sample())
        .put("board", f.conditions().board())
        .put("simulated", f.simulated());
  }

  /** One rung as it stands: its newest finding, with the state and why it is not fresh. */
  public static JsonDocument rung(RungStatus status) {
    String state = status.state().name().toLowerCase(Locale.ROOT);
    JsonDocument out =
        status
            .finding()
            .map(f -> finding(f, state))
            .orElseGet(
                () -> new JsonDocument().put("rung", status.rung().id()).put("state", state));
    return out.putTexts("reasons", status.reasons());
  }

  /** What {@code ready} prints: whether every rung is fresh, and each rung. */
  public static JsonDocument ready(boolean ready, List<RungStatus> ladder) {
    return new JsonDocument()
        .put("ready", ready)
        .putAll("rungs", ladder.stream().map(Json::rung).toList());
  }

  /**
   * What {@code ready} prints after a climb; rungs that this kind of board cannot serve are named
   * in {@code not_possible} and do not stand in the way of readiness.
   */
  public static JsonDocument ready(Climb climb) {
    return ready(climb.ready(), climb.ladder())
        .putTexts("not_possible", climb.impossible().stream().map(Rung::id).sorted().toList());
  }

  /** What {@code ladder} prints. */
  public static JsonDocument ladder(List<RungStatus> ladder) {
    boolean ready = ladder.stream().allMatch(s -> s.state() == RungStatus.State.FRESH);
    return ready(ready, ladder);
  }

  /** What {@code ladder --history RUNG} prints: all findings of a rung, oldest first. */
  public static JsonDocument history(List<Finding> findings) {
    return new JsonDocument().putAll("findings", findings.stream().map(Json::finding).toList());
  }

  /** One log row. */
  public static JsonDocument logRow(LogRow row) {
    JsonDocument out =
        new JsonDocument()
            .put("run", row.run())
            .put("number", row.number())
            .put("due", row.due())
            .put("started", row.started())
            .put("values", values(row.values()));
    row.temperatureCelsius().ifPresent(t -> out.put("temperature_celsius", t));
    return out.put("retries", row.retries()).put("note", row.note()).put("capture", row.capture());
  }

  /** The runs of {@code log}, in the order they were begun. */
  public static JsonDocument runs(List<RecordView.LogRun> runs) {
    return new JsonDocument()
        .putAll(
            "runs",
            runs.stream()
                .map(
                    r ->
                        new JsonDocument()
                            .put("run", r.run())
                            .put("first_due", r.firstDue())
                            .put("last_started", r.lastStarted())
                            .put("rows", r.rows())
                            .put("gaps", r.gaps()))
                .toList());
  }

  /** An error, where a document was asked for and the work failed. */
  public static JsonDocument error(String message) {
    return new JsonDocument().put("error", message);
  }

  /** Measured values by name. */
  public static JsonDocument values(Map<String, Measured> values) {
    JsonDocument out = new JsonDocument();
    values.forEach((name, m) -> out.put(name, measured(m)));
    return out;
  }

  private static JsonDocument measured(Measured m) {
    JsonDocument out =
        new JsonDocument().put("value", m.value()).put("u", m.u()).put("unit", m.unit().symbol());
    return m.hasUncertainty() ? out : out.put("why_no_u", m.whyNoUncertainty());
  }
}
