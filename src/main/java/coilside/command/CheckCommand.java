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
  @Mixin CommonOptions common;

  @Parameters(paramLabel = "PROFILE[@PORT]", description = "a profile file or name, and a port")
  String address;

  @Option(
      names = "--transmit",
      description = "also send one pulse: only into a dummy load, after reading the cautions")
  boolean transmit;

  @Override
  public int run(Output output) throws Exception {
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
    if (transmit) {
      output.aside(
          "Caution: one pulse will be sent. Put a 50-ohm dummy load in place of the coil, keep"
              + " hands off, start at the lowest amplitude, and follow your local rules.");
    }
    Link link = at.simulated() ? Simulation.link(profile, common) : Links.open(at, profile);
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
      output.line(good ? "the board does what the profile says" : "the board does not conform");
    }
    return good ? ExitStatus.DONE : ExitStatus.REFUSED;
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
            Locale.ROOT, "%-7s %s", row.verdict().name().toLowerCase(Locale.ROOT), row.tried()));
    output.line("        expected: " + row.expected());
    output.line("        seen:     " + row.seen());
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
