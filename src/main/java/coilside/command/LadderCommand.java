package coilside.command;

import coilside.bench.Rung;
import coilside.bench.RungStatus;
import coilside.bench.ScanAdvice;
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
      description = "all findings of one rung, oldest first, and the drift learned")
  String history;

  @Override
  public int run(Output output) throws Exception {
    Rung rung = history == null ? null : MeasureCommand.rungNamed(history);
    try (KnownLadder known = KnownLadder.open(common)) {
      if (rung != null) {
        RungHistory.of(known.findings(), rung).print(common, output);
      } else if (common.json) {
        output.line(Json.ladder(known.ladder()).text());
      } else {
        List<RungStatus> ladder = known.ladder();
        LadderTable.of(ladder, known.now(), common.plain).forEach(output::line);
        ScanAdvice.lines(ladder).forEach(line -> output.line("advice: " + line));
      }
    }
    return ExitStatus.DONE;
  }
}
