package coilside.command;

import coilside.board.profile.DeviceProfile;
import coilside.board.profile.ProfileProblem;
import coilside.board.profile.ProfileReader;
import coilside.board.profile.ProfileReading;
import java.io.IOException;
import java.io.InputStream;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.stream.Stream;

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

  private static final int MOST_FILES = 1000;

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

  /**
   * A sound profile.
   *
   * @param name what --board calls it: a shipped name, or the path of its file
   * @param profile what it says
   */
  record Known(String name, DeviceProfile profile) {}

  /** The shipped profiles and the sound ones in a folder; a folder that is not there has none. */
  static List<Known> known(Path folder) {
    List<Known> out = new ArrayList<>();
    for (String name : SHIPPED) {
      out.add(new Known(name, read(name)));
    }
    for (Path file : files(folder)) {
      ProfileReader.read(file)
          .profile()
          // The shipped ones lie in a folder as well where the program is run from its source.
          .filter(own -> out.stream().noneMatch(k -> k.profile().digest().equals(own.digest())))
          .ifPresent(own -> out.add(new Known(file.toString(), own)));
    }
    return out;
  }

  /** Files in a folder that look like profiles and are not sound: each with its first problem. */
  static List<String> unsound(Path folder) {
    List<String> out = new ArrayList<>();
    for (Path file : files(folder)) {
      ProfileReading reading = ProfileReader.read(file);
      if (reading.profile().isEmpty()) {
        out.add(
            file
                + " is not sound ("
                + reading.problems().size()
                + " problems): coilside check "
                + file);
      }
    }
    return out;
  }

  private static List<Path> files(Path folder) {
    if (!Files.isDirectory(folder)) {
      return List.of();
    }
    try (Stream<Path> files = Files.list(folder)) {
      return files
          .filter(f -> f.getFileName().toString().endsWith(".toml"))
          .sorted()
          .limit(MOST_FILES)
          .toList();
    } catch (IOException e) {
      throw new UsageException("the profiles in " + folder + " cannot be read: " + e.getMessage());
    }
  }
}
