package coilside.command;

import coilside.bench.Capture;
import coilside.bench.KeepException;
import coilside.record.Export;
import coilside.record.ExportFormat;
import coilside.record.LogCsv;
import coilside.record.RecordView;
import java.nio.file.Path;
import java.util.Optional;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;

/** {@code coilside export CAPTURE}: writes a capture, or a log, in an open format. */
@Command(
    name = "export",
    description = "Write a capture as JCAMP-DX, CSV, NumPy or WAV, or a log as CSV.",
    mixinStandardHelpOptions = true)
final class ExportCommand implements CoilsideCommand {
  @Mixin CommonOptions common;

  @Parameters(
      paramLabel = "CAPTURE",
      description = "a capture's name or path, or the name of a log")
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
    Optional<RecordView> log = LogList.holding(common, name);
    if (log.isPresent()) {
      return exportLog(log.get(), as, output);
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

  private int exportLog(RecordView held, ExportFormat as, Output output) throws KeepException {
    try (RecordView view = held) {
      if (as != ExportFormat.CSV || spectrum) {
        throw new UsageException("a log is exported with --as csv alone");
      }
      Path file = to != null ? to : common.captures.resolve(name + ".csv");
      LogCsv.export(view, name, file);
      output.line(file.toString());
      return ExitStatus.DONE;
    }
  }
}
