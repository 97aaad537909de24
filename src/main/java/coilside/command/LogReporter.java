package coilside.command;

import coilside.bench.KeepException;
import coilside.bench.LogEnd;
import coilside.bench.LogRow;
import coilside.bench.LogSummary;
import coilside.bench.Progress;
import coilside.record.Json;
import coilside.record.LogCsv;
import java.util.Locale;
import java.util.Optional;
import java.util.function.Consumer;

/**
 * Tells a running log: each row after it was kept, the summary at the end. As JSON it is one
 * document in all, written piece by piece: rows first, one a line, then the summary.
 */
final class LogReporter implements Consumer<Progress>, AutoCloseable {
  private final Output output;
  private final boolean json;
  private final boolean plain;
  private final Optional<LogCsv> csv;
  private boolean begun;
  private boolean ended;
  private boolean csvFailed;

  LogReporter(Output output, boolean json, boolean plain, Optional<LogCsv> csv) {
    this.output = output;
    this.json = json;
    this.plain = plain;
    this.csv = csv;
  }

  @Override
  public void accept(Progress event) {
    if (event instanceof Progress.LogRowKept kept) {
      row(kept.row());
    }
  }

  private void row(LogRow row) {
    output.clearProgress();
    if (json) {
      output.line((begun ? "," : "{\"rows\":[\n") + Json.logRow(row).line());
    } else {
      output.line(LogText.row(row, plain));
    }
    begun = true;
    if (csv.isPresent() && !csvFailed) {
      try {
        csv.get().add(row);
      } catch (KeepException e) {
        csvFailed = true;
        output.aside(
            e.getMessage()
                + ". The log goes on without this file; export it from the record afterwards:"
                + " coilside export "
                + row.run()
                + " --as csv");
      }
    }
  }

  /** True when the CSV file could not take every row. */
  boolean csvFailed() {
    return csvFailed;
  }

  /** The run has ended. */
  void ended(LogSummary summary, LogEnd end) {
    output.clearProgress();
    if (json) {
      finish("\"summary\":" + LogText.json(summary, end).line());
    } else if (begun) {
      LogText.summary(summary, plain).forEach(output::line);
    }
    if (!end.reason().isEmpty()) {
      output.aside(sentence(end.reason()));
    }
  }

  private void finish(String last) {
    output.line((begun ? "]," : "{\"rows\":[],") + last + "}");
    ended = true;
  }

  private static String sentence(String text) {
    return text.substring(0, 1).toUpperCase(Locale.ROOT)
        + text.substring(1)
        + (text.endsWith(".") ? "" : ".");
  }

  /** Closes the document of a run that an error ended. */
  @Override
  public void close() throws KeepException {
    if (json && !ended) {
      finish("\"summary\":null");
    }
    if (csv.isPresent()) {
      csv.get().close();
    }
  }
}
