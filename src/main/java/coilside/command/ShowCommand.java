package coilside.command;

import coilside.bench.Analysis;
import coilside.bench.Capture;
import coilside.bench.LogSummary;
import coilside.bench.Reading;
import coilside.record.RecordView;
import java.util.Optional;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Parameters;

/** {@code coilside show CAPTURE}: analyses a kept capture, or a log, again. */
@Command(
    name = "show",
    description = "Analyse a kept capture or log again and print the same numbers.",
    mixinStandardHelpOptions = true)
final class ShowCommand implements CoilsideCommand {
  @Mixin CommonOptions common;

  @Parameters(
      paramLabel = "CAPTURE",
      description = "a capture's name, the path of its .sigmf-meta file, or the name of a log")
  String name;

  @Override
  public int run(Output output) throws Exception {
    Optional<RecordView> log = LogList.holding(common, name);
    if (log.isPresent()) {
      try (RecordView view = log.get()) {
        LogSummary summary = LogList.summary(view, name);
        if (common.json) {
          output.line(LogText.json(summary).text());
        } else {
          LogText.summary(summary, common.plain).forEach(output::line);
        }
      }
      return ExitStatus.DONE;
    }
    Capture capture = Captures.read(common.captures, name);
    try {
      Reading reading = Analysis.of(capture);
      if (common.json) {
        output.line(ReadingJson.of(capture, reading, Captures.baseName(name)).text());
      } else {
        CaptureText.of(capture).forEach(output::line);
        ReadingText.of(reading, common.plain).forEach(output::line);
      }
      return ExitStatus.DONE;
    } catch (Analysis.Refused e) {
      CaptureText.of(capture).forEach(output::line);
      Refusals.print(capture.purpose(), e.refusal(), output);
      return ExitStatus.REFUSED;
    } catch (IllegalArgumentException e) {
      throw new UsageException("the capture '" + name + "' cannot be analysed: " + e.getMessage());
    }
  }
}
