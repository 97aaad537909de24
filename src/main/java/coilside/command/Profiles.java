package coilside.command;

import coilside.board.link.PortInfo;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.ProfileProblem;
import coilside.board.profile.ProfileReader;
import coilside.board.profile.ProfileReading;
import java.io.IOException;
import java.io.InputStream;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;

/** Finds device profiles: a file, or one of those shipped with the program. */
final class Profiles {
  /** The profiles shipped in the jar, by name. */
  static final List<String> SHIPPED =
      List.of(
          "scpi-console",
          "plain-line-console",
          "radio-frame",
          "direct-sampling",
          "pulse-and-receive");

  private Profiles() {}

  /** Reads a profile; every problem at once in the refusal. */
  static DeviceProfile read(String name) {
    ProfileReading reading = reading(name);
    if (reading.profile().isEmpty()) {
      throw new UsageException(problems(reading));
    }
    return reading.profile().get();
  }

  static ProfileReading reading(String name) {
    Path file = Path.of(name);
    if (Files.exists(file) || !SHIPPED.contains(name)) {
      if (!Files.exists(file) && !name.contains("/") && !name.endsWith(".toml")) {
        throw new UsageException(
            "there is no profile '"
                + name
                + "': give a file, or one of the shipped "
                + String.join(", ", SHIPPED));
      }
      return ProfileReader.read(file);
    }
    try (InputStream in =
        Profiles.class.getResourceAsStream("/device-profiles/" + name + ".toml")) {
      if (in == null) {
        throw new UsageException("the shipped profile '" + name + "' is not in this build");
      }
      return ProfileReader.read(name + ".toml", in.readNBytes(ProfileReader.LONGEST_FILE + 1));
    } catch (IOException e) {
      throw new UsageException(
          "the shipped profile '" + name + "' cannot be read: " + e.getMessage());
    }
  }

  /** The problems of a profile, one a line. */
  static String problems(ProfileReading reading) {
    List<ProfileProblem> problems = reading.problems();
    StringBuilder text = new StringBuilder("the profile is not sound:");
    for (ProfileProblem problem : problems) {
      text.append("\n  ").append(problem.message());
    }
    return text.toString();
  }

  /** The shipped profiles that name this port's device. */
  static List<String> fitting(PortInfo port) {
    return SHIPPED.stream()
        .filter(name -> Profiles.class.getResource("/device-profiles/" + name + ".toml") != null)
        .filter(
            name ->
                read(name)
                    .serial()
                    .map(a -> !port.usbId().isEmpty() && a.usbIds().contains(port.usbId()))
                    .orElse(false))
        .toList();
  }
}
