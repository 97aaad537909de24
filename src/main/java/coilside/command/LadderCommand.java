package coilside.command;

import coilside.bench.Finding;
import coilside.bench.Rung;
import coilside.record.Json;
import java.util.List;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Option;

/** {@code coilside ladder}: what is known, how fresh, why stale. */
@Command(
    name = "ladder",
    description = "What is known, how fresh it is, and why it is stale.",
    mixinStandardHelpOptions = true)
final class LadderCommand implements CoilsideCommand {
  @Mixin CommonOptions common;

  @Option(
      names = "--history",
      paramLabel = "RUNG",
      description = "all findings of one rung, oldest first")
  String history;

  @Override
  public int run(Output output) throws Exception {
    Rung rung = history == null ? null : MeasureCommand.rungNamed(history);
    try (KnownLadder known = KnownLadder.open(common)) {
      if (rung != null) {
        printHistory(known.history(rung), output);
      } else if (common.json) {
        output.line(Json.ladder(known.ladder()).text());
      } else {
        LadderTable.of(known.ladder(), known.now(), common.plain).forEach(output::line);
      }
    }
    return ExitStatus.DONE;
  }

  private void printHistory(List<Finding> findings, Output output) {
    if (common.json) {
      output.line(Json.history(findings).text());
      return;
    }
    for (Finding finding : findings) {
      output.line(finding.started() + "  sample '" + finding.conditions().sample() + "'");
      FindingText.of(finding, common.plain).forEach(line -> output.line("  " + line));
    }
    if (findings.isEmpty()) {
      output.line("nothing was measured yet");
    }
  }
}
