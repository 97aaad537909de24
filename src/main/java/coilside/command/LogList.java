package coilside.command;

import coilside.bench.KeepException;
import coilside.bench.LogSummary;
import coilside.record.BenchRecord;
import coilside.record.Json;
import coilside.record.RecordView;
import java.nio.file.Files;
import java.util.List;
import java.util.Locale;
import java.util.Optional;

/** Finished and running logs as the record knows them, read beside whoever holds it. */
final class LogList {
  private LogList() {}

  /** One line a log; to be named to {@code show} and {@code export}. */
  static int print(CommonOptions options, Output output) throws KeepException {
    List<RecordView.LogRun> runs = runs(options);
    if (options.json) {
      output.line(Json.runs(runs).text());
      return ExitStatus.DONE;
    }
    for (RecordView.LogRun run : runs) {
      output.line(
          String.format(
              Locale.ROOT,
              "%s  %d rows, %d gaps, from %s to %s",
              run.run(),
              run.rows() - run.gaps(),
              run.gaps(),
              run.firstDue(),
              run.lastStarted()));
    }
    if (runs.isEmpty()) {
      output.line("no log was kept in " + options.captures + " yet");
    }
    return ExitStatus.DONE;
  }

  private static List<RecordView.LogRun> runs(CommonOptions options) throws KeepException {
    if (!Files.exists(options.captures.resolve(BenchRecord.FILE_NAME))) {
      return List.of();
    }
    try (RecordView view = BenchRecord.watch(options.captures)) {
      return view.runs();
    }
  }

  /** The record, where it holds a log of this name; to be closed by the caller. */
  static Optional<RecordView> holding(CommonOptions options, String run) throws KeepException {
    if (!run.startsWith("log-") || runs(options).stream().noneMatch(r -> r.run().equals(run))) {
      return Optional.empty();
    }
    return Optional.of(BenchRecord.watch(options.captures));
  }

  /** What a log says as a whole. */
  static LogSummary summary(RecordView view, String run) throws KeepException {
    LogSummary.Builder builder = new LogSummary.Builder();
    view.rows(run, builder::add);
    return builder.build();
  }
}
