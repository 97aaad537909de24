package coilside.command;

import coilside.bench.LogRow;
import coilside.bench.Progress;
import coilside.bench.Work;
import coilside.quantity.ConciseFormat;
import coilside.quantity.Measured;
import coilside.quantity.Unit;
import coilside.record.Json;
import coilside.record.LogCsv;
import java.nio.file.Path;
import java.time.Duration;
import java.time.Instant;
import java.time.LocalDateTime;
import java.time.LocalTime;
import java.time.OffsetDateTime;
import java.time.ZoneId;
import java.time.format.DateTimeParseException;
import java.util.Optional;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Option;

/** {@code coilside log}: repeats an acquisition at fixed times. */
@Command(
    name = "log",
    description = "Repeat an acquisition at fixed times and keep a row for each.",
    mixinStandardHelpOptions = true)
final class LogCommand extends BenchCommand {
  private static final Duration SHORTEST = Duration.ofMillis(10);

  @Mixin CommonOptions common;

  @Option(
      names = "--every",
      paramLabel = "TIME",
      required = true,
      description = "from one start to the next, such as 30s")
  String every;

  @Option(names = "--count", paramLabel = "N", description = "how many rows")
  long count;

  @Option(
      names = "--until",
      paramLabel = "TIME",
      description = "when to end: 18:00, or 2026-03-02T18:00")
  String until;

  @Option(
      names = "--scans",
      paramLabel = "N",
      description = "scans averaged a row (default: ${DEFAULT-VALUE})",
      defaultValue = "4")
  int scans;

  @Option(names = "--follow", description = "the carrier follows the resonance")
  boolean follow;

  @Option(
      names = "--csv",
      paramLabel = "FILE",
      description = "append the rows to this file as they come")
  Path csv;

  @Override
  CommonOptions common() {
    return common;
  }

  @Override
  void check() {
    plan();
  }

  private Work.Log plan() {
    Duration interval =
        Duration.ofNanos((long) (1e9 * Values.positive("--every", every, Unit.SECOND)));
    if (interval.compareTo(SHORTEST) < 0) {
      throw new UsageException("--every '" + every + "' is shorter than 10 ms");
    }
    if (count < 0) {
      throw new UsageException("--count " + count + " must be above 0");
    }
    if (scans < 1 || scans > 100_000) {
      throw new UsageException("--scans " + scans + " must be 1 to 100000");
    }
    return new Work.Log(
        interval, count, Optional.ofNullable(until).map(LogCommand::moment), scans, follow);
  }

  /** A moment to come: a time of day is the next such time. */
  static Instant moment(String text) {
    ZoneId zone = ZoneId.systemDefault();
    try {
      LocalTime time = LocalTime.parse(text);
      LocalDateTime now = LocalDateTime.now(zone);
      LocalDateTime due = now.toLocalDate().atTime(time);
      return (due.isAfter(now) ? due : due.plusDays(1)).atZone(zone).toInstant();
    } catch (DateTimeParseException e) {
      // Not a time of day: the fuller forms are tried.
    }
    try {
      return LocalDateTime.parse(text).atZone(zone).toInstant();
    } catch (DateTimeParseException e) {
      // Not a local date and time: one with an offset is tried.
    }
    try {
      return OffsetDateTime.parse(text).toInstant();
    } catch (DateTimeParseException e) {
      throw new UsageException(
          "--until '" + text + "' is no time; for example 18:00 or 2026-03-02T18:00");
    }
  }

  @Override
  int work(OpenBench open, Output output) throws Exception {
    open.armForThisRun("log");
    try (LogCsv file = csv == null ? null : LogCsv.open(csv)) {
      open.listen(event -> row(event, file, output));
      open.bench().log(plan());
    }
    return ExitStatus.DONE;
  }

  private void row(Progress event, LogCsv file, Output output) {
    if (!(event instanceof Progress.LogRowKept kept)) {
      return;
    }
    output.clearProgress();
    LogRow row = kept.row();
    output.line(common.json ? Json.logRow(row).line() : text(row));
    if (file != null) {
      try {
        file.add(row);
      } catch (coilside.bench.KeepException e) {
        output.aside(e.getMessage());
      }
    }
  }

  private String text(LogRow row) {
    StringBuilder line = new StringBuilder(row.started().toString());
    line.append("  ").append(row.number());
    for (String name : new String[] {"larmor_frequency", "t2_star", "amplitude", "snr"}) {
      Measured m = row.values().get(name);
      if (m != null) {
        line.append("  ").append(common.plain ? ConciseFormat.ascii(m) : ConciseFormat.text(m));
      }
    }
    if (!row.note().isEmpty()) {
      line.append("  ").append(row.note());
    }
    return line.toString();
  }
}
