package coilside.command;

import coilside.bench.Capture;
import coilside.record.Export;
import coilside.record.ExportFormat;
import java.nio.file.Path;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;

/** {@code coilside export CAPTURE}: writes a capture in an open format. */
@Command(
    name = "export",
    description = "Write a capture as JCAMP-DX, CSV, NumPy or WAV.",
    mixinStandardHelpOptions = true)
final class ExportCommand implements CoilsideCommand {
  @Mixin CommonOptions common;

  @Parameters(paramLabel = "CAPTURE", description = "a capture's name or path")
  String name;

  @Option(
      names = "--as",
      paramLabel = "FORMAT",
      required = true,
      description = "jcamp, csv, npy or wav")
  String format;

  @Option(names = "--spectrum", description = "the spectrum instead of the FID (jcamp, csv)")
  boolean spectrum;

  @Option(
      names = "--to",
      paramLabel = "FILE",
      description = "where to (default: beside the capture, with the format's ending)")
  Path to;

  @Override
  public int run(Output output) throws Exception {
    ExportFormat as;
    try {
      as = ExportFormat.ofId(format);
    } catch (IllegalArgumentException e) {
      throw new UsageException("--as: " + e.getMessage());
    }
    Capture capture = Captures.read(common.captures, name);
    Path meta = Captures.locate(common.captures, name);
    String base = Captures.baseName(name) + (spectrum ? "-spectrum" : "");
    Path file = to != null ? to : meta.resolveSibling(base + as.extension());
    try {
      if (spectrum) {
        Export.spectrum(capture, as, file);
      } else {
        Export.fids(capture, as, file);
      }
    } catch (IllegalArgumentException e) {
      throw new UsageException(e.getMessage());
    }
    output.line(file.toString());
    return ExitStatus.DONE;
  }
}
