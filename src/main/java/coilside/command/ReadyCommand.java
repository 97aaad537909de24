package coilside.command;

import coilside.bench.Bench;
import coilside.bench.Climb;
import coilside.bench.Finding;
import coilside.bench.RungStatus;
import coilside.bench.ScanAdvice;
import coilside.record.Json;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;

/** {@code coilside ready}: climbs what is not fresh. */
@Command(
    name = "ready",
    description = "Climb the ladder: measure every rung that is not fresh, bottom up.",
    mixinStandardHelpOptions = true)
final class ReadyCommand extends BenchCommand {
  @Mixin CommonOptions common;

  @Override
  CommonOptions common() {
    return common;
  }

  @Override
  int work(OpenBench open, Output output) throws Exception {
    Bench bench = open.bench();
    open.armForThisRun("ready");
    Climb climb = bench.ready();
    if (common.json) {
      output.line(Json.ready(climb).text());
    } else {
      LadderTable.of(climb.ladder(), open.now(), common.plain).forEach(output::line);
      ScanAdvice.lines(climb.ladder()).forEach(line -> output.line("advice: " + line));
      for (RungStatus status : climb.ladder()) {
        status.finding().filter(Finding::refused).ifPresent(f -> Refusals.print(f, output));
      }
    }
    return climb.ready() ? ExitStatus.DONE : ExitStatus.REFUSED;
  }
}
