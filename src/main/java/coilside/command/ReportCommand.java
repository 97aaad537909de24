package coilside.command;

import coilside.bench.Analysis;
import coilside.bench.Capture;
import coilside.bench.Finding;
import coilside.bench.Picture;
import coilside.bench.RungStatus;
import coilside.record.CaptureException;
import coilside.record.CaptureReader;
import coilside.report.Report;
import coilside.report.ReportPage;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Option;

/** {@code coilside report}: one self-contained page of what is known. */
@Command(
    name = "report",
    description = "Write one self-contained page: the ladder, its pictures, the newest log.",
    mixinStandardHelpOptions = true)
final class ReportCommand implements CoilsideCommand {
  @Mixin CommonOptions common;

  @Option(
      names = "--to",
      paramLabel = "FILE",
      description = "where to (default: ${DEFAULT-VALUE} in the captures folder)",
      defaultValue = "report.html")
  Path to;

  @Override
  public int run(Output output) throws Exception {
    Path file = to.getParent() == null ? common.captures.resolve(to) : to;
    try (KnownLadder known = KnownLadder.open(common)) {
      List<RungStatus> ladder = known.ladder();
      List<Finding> findings = ladder.stream().flatMap(s -> s.finding().stream()).toList();
      if (findings.isEmpty()) {
        throw new UsageException(
            "there is nothing to report in "
                + common.captures
                + ": measure something first, for example with 'coilside ready'");
      }
      Finding newest =
          findings.stream().max(java.util.Comparator.comparing(Finding::started)).orElseThrow();
      Report report =
          new Report(
              known.now(),
              newest.conditions().board(),
              newest.conditions().sample(),
              findings.stream().anyMatch(Finding::simulated),
              ladder,
              pictures(findings),
              known.newestLog());
      try {
        Files.writeString(file, ReportPage.html(report));
      } catch (IOException e) {
        throw new coilside.bench.KeepException(
            "the report cannot be written to " + file + ": " + e.getMessage(), e);
      }
      output.line(file.toString());
    }
    return ExitStatus.DONE;
  }

  /** The pictures of the findings, made again from their captures. */
  private List<Picture> pictures(List<Finding> findings) {
    List<Picture> out = new ArrayList<>();
    for (Finding finding : findings) {
      if (finding.capture().isEmpty() || finding.refused()) {
        continue;
      }
      try {
        Capture capture =
            CaptureReader.read(common.captures.resolve(finding.capture() + ".sigmf-meta"));
        out.add(Analysis.of(capture).picture());
      } catch (CaptureException | Analysis.Refused | IllegalArgumentException e) {
        // The finding stands in the table all the same; only its picture is missing.
      }
    }
    return out;
  }
}
