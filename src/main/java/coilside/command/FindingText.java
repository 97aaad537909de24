package coilside.command;

import coilside.bench.Finding;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;

/** One finding as lines of text. */
final class FindingText {
  private FindingText() {}

  static List<String> of(Finding finding, boolean plain) {
    List<String> lines = new ArrayList<>();
    lines.add(
        String.format(
            Locale.ROOT,
            "%s: %s, %d scans in %.1f s",
            finding.rung().id(),
            finding.refused() ? "refused" : "measured",
            finding.scans(),
            finding.seconds()));
    for (String value : LadderTable.values(finding, plain)) {
      lines.add("  " + value);
    }
    finding.warnings().forEach(w -> lines.add("  note: " + w));
    if (!finding.capture().isEmpty()) {
      lines.add("  capture: " + finding.capture());
    }
    return lines;
  }
}
