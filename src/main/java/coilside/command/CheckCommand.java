package coilside.command;

import coilside.board.driver.Conformance;
import coilside.board.link.Link;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.ProfileProblem;
import coilside.board.profile.ProfileReading;
import coilside.record.JsonDocument;
import java.time.Clock;
import java.util.List;
import java.util.Locale;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;

/** {@code coilside check PROFILE[@PORT]}: is the file sound; does the board do what it says. */
@Command(
    name = "check",
    description = {
      "Is a profile sound? With a port: does the board do what the profile says?",
      "Nothing is transmitted unless --transmit is given."
    },
    mixinStandardHelpOptions = true)
final class CheckCommand implements CoilsideCommand {
  private static final String COLUMNS = "%-8s %-30s %-30s %s";

  @Mixin CommonOptions common;

  @Parameters(paramLabel = "PROFILE[@PORT]", description = "a profile file or name, and a port")
  String address;

  @Option(
      names = "--transmit",
      description = "also send one pulse: only into a dummy load, after reading the cautions")
  boolean transmit;

  @Override
  public int run(Output output) throws Exception {
    if (common.board != null) {
      throw new UsageException(
          "check takes the board as its argument, not by --board: coilside check " + common.board);
    }
    BoardAddress at = BoardAddress.parse(address);
    ProfileReading reading = Profiles.reading(at.profile());
    if (reading.profile().isEmpty()) {
      tellProblems(reading, output);
      return ExitStatus.USAGE;
    }
    DeviceProfile profile = reading.profile().get();
    if (at.port().isEmpty()) {
      tellSound(profile, output);
      return ExitStatus.DONE;
    }
    if (transmit && !at.simulated()) {
      output.aside(
          "Caution: "
              + Conformance.whatIsSent(profile)
              + " will be sent. Put a 50 ohm dummy load in place of the coil, turn the amplifier"
              + " down, keep hands off, and follow your local rules for transmitting.");
    }
    Link link = OpenBoard.line(at, profile, common);
    if (!common.json) {
      output.line(String.format(Locale.ROOT, COLUMNS, "verdict", "tried", "expected", "seen"));
    }
    List<Conformance.Row> rows =
        Conformance.run(
            profile,
            link,
            System::nanoTime,
            Clock.systemUTC(),
            transmit,
            row -> {
              if (!common.json) {
                print(row, output);
              }
            });
    boolean good = rows.stream().noneMatch(r -> r.verdict() == Conformance.Row.Verdict.BAD);
    if (common.json) {
      output.line(
          new JsonDocument()
              .put("profile", profile.name())
              .put("conforms", good)
              .putAll("rows", rows.stream().map(CheckCommand::json).toList())
              .text());
    } else {
      output.line(summary(rows, good));
    }
    boolean met = rows.size() > 1 || good;
    return good ? ExitStatus.DONE : met ? ExitStatus.REFUSED : ExitStatus.OUT_OF_REACH;
  }

  private static String summary(List<Conformance.Row> rows, boolean good) {
    StringBuilder text = new StringBuilder();
    for (Conformance.Row.Verdict verdict : Conformance.Row.Verdict.values()) {
      text.append(text.length() == 0 ? "" : ", ")
          .append(rows.stream().filter(r -> r.verdict() == verdict).count())
          .append(' ')
          .append(verdict.name().toLowerCase(Locale.ROOT));
    }
    return text
        + (good
            ? ": the board does what the profile says"
            : ": the board does not do what the profile says");
  }

  private static JsonDocument json(Conformance.Row row) {
    return new JsonDocument()
        .put("tried", row.tried())
        .put("expected", row.expected())
        .put("seen", row.seen())
        .put("verdict", row.verdict().name().toLowerCase(Locale.ROOT));
  }

  private static void print(Conformance.Row row, Output output) {
    output.line(
        String.format(
            Locale.ROOT,
            COLUMNS,
            row.verdict().name().toLowerCase(Locale.ROOT),
            row.tried(),
            row.expected(),
            row.seen()));
  }

  private void tellProblems(ProfileReading reading, Output output) {
    if (common.json) {
      output.line(
          new JsonDocument()
              .put("sound", false)
              .putTexts(
                  "problems", reading.problems().stream().map(ProfileProblem::message).toList())
              .text());
    } else {
      output.aside(Profiles.problems(reading));
    }
  }

  private void tellSound(DeviceProfile profile, Output output) {
    if (common.json) {
      output.line(new JsonDocument().put("sound", true).put("profile", profile.name()).text());
    } else {
      output.line(
          "the profile '"
              + profile.name()
              + "' is sound; give a port to ask the board: coilside check "
              + address
              + "@PORT");
    }
  }
}
