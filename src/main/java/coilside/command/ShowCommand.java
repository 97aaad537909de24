package coilside.command;

import coilside.bench.Analysis;
import coilside.bench.Capture;
import coilside.bench.Reading;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Parameters;

/** {@code coilside show CAPTURE}: analyses a kept capture again. */
@Command(
    name = "show",
    description = "Analyse a kept capture again and print the same numbers.",
    mixinStandardHelpOptions = true)
final class ShowCommand implements CoilsideCommand {
  @Mixin CommonOptions common;

  @Parameters(
      paramLabel = "CAPTURE",
      description = "a capture's name, or the path of its .sigmf-meta file")
  String name;

  @Override
  public int run(Output output) throws Exception {
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
