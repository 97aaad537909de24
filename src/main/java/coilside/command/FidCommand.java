package coilside.command;

import coilside.bench.Bench;
import coilside.bench.Work;
import coilside.quantity.Unit;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Option;

/** {@code coilside fid}: plays and keeps an averaged FID as the ladder stands. */
@Command(
    name = "fid",
    description = "Play and keep an averaged FID as the ladder stands.",
    mixinStandardHelpOptions = true)
final class FidCommand extends BenchCommand {
  @Mixin CommonOptions common;

  @Option(
      names = "--scans",
      paramLabel = "N",
      description = "scans to average (default: ${DEFAULT-VALUE})",
      defaultValue = "4")
  int scans;

  @Option(names = "--points", paramLabel = "N", description = "samples (default: as T2* advises)")
  int points;

  @Option(
      names = "--dwell",
      paramLabel = "TIME",
      description = "dwell time, such as 5us (default: as T2* advises)")
  String dwell;

  @Option(
      names = "--phase-cycle",
      paramLabel = "NAME",
      description = "cyclops or none (default: ${DEFAULT-VALUE})",
      defaultValue = "cyclops")
  String cycle;

  @Override
  CommonOptions common() {
    return common;
  }

  @Override
  void check() {
    if (scans < 1 || scans > 1_000_000) {
      throw new UsageException("--scans " + scans + " must be 1 to 1000000");
    }
    if (points < 0) {
      throw new UsageException("--points " + points + " must be above 0");
    }
    if (!cycle.equals("cyclops") && !cycle.equals("none")) {
      throw new UsageException("--phase-cycle '" + cycle + "' must be cyclops or none");
    }
    dwellSeconds();
  }

  private double dwellSeconds() {
    return dwell == null ? 0 : Values.positive("--dwell", dwell, Unit.SECOND);
  }

  @Override
  int work(OpenBench open, Output output) throws Exception {
    open.armForThisRun("fid");
    try {
      Bench.Taken taken =
          open.bench().takeFid(new Work.TakeFid(scans, points, dwellSeconds(), cycle));
      if (common.json) {
        output.line(ReadingJson.of(taken.capture(), taken.reading(), taken.name()).text());
      } else {
        ReadingText.of(taken.reading(), common.plain).forEach(output::line);
        output.line("capture: " + taken.name());
      }
      return ExitStatus.DONE;
    } catch (Bench.FidRefused e) {
      Refusals.print("fid", e.refusal(), output);
      return ExitStatus.REFUSED;
    }
  }
}
