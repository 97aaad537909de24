package coilside.command;

import coilside.bench.Finding;
import coilside.bench.Rung;
import coilside.record.Json;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Parameters;

/** {@code coilside measure RUNG}: one rung, with what it rests on if that is not fresh. */
@Command(
    name = "measure",
    description = "Measure one rung, with what it rests on where that is not fresh.",
    mixinStandardHelpOptions = true)
final class MeasureCommand extends BenchCommand {
  @Mixin CommonOptions common;

  @Parameters(
      paramLabel = "RUNG",
      description = "noise, resonance, gain, ringdown, nutation, t1, t2star or t2")
  String rung;

  @Override
  CommonOptions common() {
    return common;
  }

  @Override
  void check() {
    rungNamed(rung);
  }

  @Override
  int work(OpenBench open, Output output) throws Exception {
    open.armForThisRun("measure " + rung);
    Finding finding = open.bench().measure(rungNamed(rung));
    if (common.json) {
      output.line(Json.finding(finding).text());
    } else {
      FindingText.of(finding, common.plain).forEach(output::line);
      if (finding.refused()) {
        Refusals.print(finding, output);
      }
    }
    return finding.refused() ? ExitStatus.REFUSED : ExitStatus.DONE;
  }

  static Rung rungNamed(String name) {
    try {
      return Rung.ofId(name);
    } catch (IllegalArgumentException e) {
      throw new UsageException(e.getMessage());
    }
  }
}
