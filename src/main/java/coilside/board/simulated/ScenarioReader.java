package coilside.board.simulated;

import coilside.board.profile.ProfileProblem;
import java.io.IOException;
import java.io.InputStream;
import java.io.UncheckedIOException;
import java.nio.ByteBuffer;
import java.nio.charset.CharacterCodingException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.Optional;
import java.util.OptionalInt;
import org.tomlj.Toml;
import org.tomlj.TomlParseResult;

/**
 * Reads scenario files (TOML), or lists every problem at once; it never throws for what a file
 * says. Some scenarios come with the program: {@link #shipped()}.
 */
public final class ScenarioReader {
  /** The scenario taken when none is named. */
  public static final String DEFAULT = "doped-water";

  private static final int LONGEST_FILE = 64 * 1024;
  private static final List<String> SHIPPED =
      List.of(DEFAULT, "cooking-oil", "plain-water", "bad-day");

  private ScenarioReader() {}

  /** Names of the scenarios that come with the program. */
  public static List<String> shipped() {
    return SHIPPED;
  }

  /** One of {@link #shipped()}. */
  public static Scenario named(String name) {
    if (!SHIPPED.contains(name)) {
      throw new IllegalArgumentException("no scenario '" + name + "'; there are " + SHIPPED);
    }
    String resource = "/scenarios/" + name + ".toml";
    try (InputStream in = ScenarioReader.class.getResourceAsStream(resource)) {
      if (in == null) {
        throw new IllegalStateException("the program lacks its resource " + resource);
      }
      ScenarioReading reading = read(name + ".toml", in.readAllBytes());
      return reading
          .scenario()
          .orElseThrow(() -> new IllegalStateException(reading.problems().get(0).message()));
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    }
  }

  /** Reads a file. */
  public static ScenarioReading read(Path file) {
    String name = String.valueOf(file.getFileName());
    try (InputStream in = Files.newInputStream(file)) {
      return read(name, in.readNBytes(LONGEST_FILE + 1));
    } catch (IOException e) {
      String why = Files.exists(file) ? "not readable" : "not there";
      return unsound(name, why, "a TOML file that may be read, or one of " + SHIPPED);
    }
  }

  /** Reads what stands in a file of this name. */
  public static ScenarioReading read(String name, byte[] bytes) {
    if (bytes.length > LONGEST_FILE) {
      return unsound(name, "longer than " + LONGEST_FILE + " bytes", "at most that");
    }
    String text;
    try {
      text = StandardCharsets.UTF_8.newDecoder().decode(ByteBuffer.wrap(bytes)).toString();
    } catch (CharacterCodingException e) {
      return unsound(name, "not UTF-8", "text in UTF-8");
    }
    TomlParseResult toml = Toml.parse(text);
    List<ProfileProblem> problems = new ArrayList<>();
    if (toml.hasErrors()) {
      toml.errors().stream()
          .limit(20)
          .forEach(
              e ->
                  problems.add(
                      new ProfileProblem(
                          name,
                          OptionalInt.of(e.position().line()),
                          "the syntax",
                          "broken here: "
                              + String.valueOf(e.getMessage())
                                  .lines()
                                  .findFirst()
                                  .orElse("")
                                  .replaceAll("\\p{Cntrl}", "."),
                          "TOML 1.0",
                          "name = \"my-bench\"")));
      return new ScenarioReading(Optional.empty(), problems);
    }
    ScenarioTable top = new ScenarioTable(name, "", toml, OptionalInt.empty(), problems);
    Scenario scenario = new ScenarioSections(problems).scenario(top);
    if (problems.isEmpty()) {
      return new ScenarioReading(Optional.of(scenario), List.of());
    }
    problems.sort(Comparator.comparingInt(p -> p.line().orElse(Integer.MAX_VALUE)));
    return new ScenarioReading(Optional.empty(), problems);
  }

  private static ScenarioReading unsound(String file, String value, String allowed) {
    return new ScenarioReading(
        Optional.empty(),
        List.of(new ProfileProblem(file, OptionalInt.empty(), "the file", value, allowed, "")));
  }
}
