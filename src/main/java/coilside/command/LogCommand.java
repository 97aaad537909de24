package coilside.command;

import coilside.bench.LogEnd;
import coilside.bench.LogRule;
import coilside.bench.Work;
import coilside.quantity.Unit;
import coilside.record.LogCsv;
import java.nio.file.Path;
import java.time.Duration;
import java.time.Instant;
import java.time.LocalDateTime;
import java.time.LocalTime;
import java.time.OffsetDateTime;
import java.time.ZoneId;
import java.time.format.DateTimeParseException;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Option;

/** {@code coilside log}: repeats an acquisition at fixed times. */
@Command(
    name = "log",
    description = {
      "Repeat an acquisition at fixed times and keep a row for each.",
      "Rows and captures are kept in the bench record; each row is printed once it is kept."
    },
    mixinStandardHelpOptions = true)
final class LogCommand extends BenchCommand {
  private static final Duration SHORTEST = Duration.ofMillis(10);
  private static final Duration LONGEST = Duration.ofDays(30);

  @Mixin CommonOptions common;

  @Option(
      names = "--every",
      paramLabel = "TIME",
      description = "from one start to the next, such as 30s")
  String every;

  @Option(
      names = "--count",
      paramLabel = "N",
      description = "how many times, missed ones included (default: until stopped)")
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

  @Option(
      names = "--rows-only",
      description = "keep the rows but not the captures they come from (default: keep both)")
  boolean rowsOnly;

  @Option(
      names = "--keep-running",
      description = "go on when the terminal hangs up, as when an SSH session is lost")
  boolean keepRunning;

  @Option(
      names = "--warn-when",
      paramLabel = "RULE",
      description = {
        "warn when a value is out of bounds by more than its standard uncertainty,",
        "such as \"linewidth > 80Hz\" or \"snr < 20\"; may be given again.",
        "Values: larmor_frequency, field, amplitude, linewidth, t2_star, snr, temperature"
      })
  List<String> warnWhen = new ArrayList<>();

  @Option(
      names = "--stop-when",
      paramLabel = "RULE",
      description = "end the log then, with exit status 4; may be given again")
  List<String> stopWhen = new ArrayList<>();

  @Option(names = "--list", description = "list the logs in the record and do nothing else")
  boolean list;

  @Override
  CommonOptions common() {
    return common;
  }

  @Override
  boolean survivesHangUp() {
    return keepRunning;
  }

  @Override
  void check() {
    plan();
  }

  @Override
  public int run(Output output) throws Exception {
    if (list) {
      return LogList.print(common, output);
    }
    try (LastingOutput lasting = LastingOutput.over(output)) {
      return super.run(lasting.output());
    }
  }

  private Work.Log plan() {
    if (every == null) {
      throw new UsageException("--every is missing: say from one start to the next, such as 30s");
    }
    double seconds = Values.positive("--every", every, Unit.SECOND);
    if (seconds > LONGEST.toSeconds()) {
      throw new UsageException("--every '" + every + "' is longer than 30 d");
    }
    Duration interval = Duration.ofNanos(Math.round(1e9 * seconds));
    if (interval.compareTo(SHORTEST) < 0) {
      throw new UsageException("--every '" + every + "' is shorter than 10 ms");
    }
    if (count < 0) {
      throw new UsageException("--count " + count + " must be above 0");
    }
    if (scans < 1 || scans > 100_000) {
      throw new UsageException("--scans " + scans + " must be 1 to 100000");
    }
    List<LogRule> rules = new ArrayList<>();
    warnWhen.forEach(text -> rules.add(rule("--warn-when", text, LogRule.Action.WARN)));
    stopWhen.forEach(text -> rules.add(rule("--stop-when", text, LogRule.Action.STOP)));
    return new Work.Log(
        interval,
        count,
        Optional.ofNullable(until).map(LogCommand::end),
        scans,
        follow,
        !rowsOnly,
        rules);
  }

  private static Instant end(String text) {
    Instant end = moment(text);
    if (!end.isAfter(Instant.now())) {
      throw new UsageException("--until '" + text + "' is over already");
    }
    return end;
  }

  private static LogRule rule(String option, String text, LogRule.Action action) {
    try {
      return LogRule.parse(text, action);
    } catch (IllegalArgumentException e) {
      throw new UsageException(option + " '" + text + "': " + e.getMessage());
    }
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
    Work.Log plan = plan();
    Optional<LogCsv> file = csv == null ? Optional.empty() : Optional.of(LogCsv.open(csv));
    try (LogReporter reporter = new LogReporter(output, common.json, common.plain, file)) {
      open.armForThisRun("log");
      open.listen(reporter);
      LogEnd end = open.bench().log(plan);
      reporter.ended(LogList.summary(open.view(), end.run()), end);
      if (end.rows() == 0 && end.gaps() > 0) {
        output.aside("Not one row could be measured; the gaps say why.");
      }
      return reporter.csvFailed() ? ExitStatus.NOT_KEPT : status(end);
    }
  }

  private static int status(LogEnd end) {
    return switch (end.why()) {
      case PLANNED -> end.rows() == 0 && end.gaps() > 0 ? ExitStatus.OUT_OF_REACH : ExitStatus.DONE;
      case STOPPED -> ExitStatus.INTERRUPTED;
      case RULE, LIMIT -> ExitStatus.LIMIT;
      case RESONANCE_LOST, NOT_READY -> ExitStatus.REFUSED;
      case BOARD_REFUSED -> ExitStatus.OUT_OF_REACH;
    };
  }
}
