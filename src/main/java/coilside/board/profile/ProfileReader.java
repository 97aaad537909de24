package coilside.board.profile;

import java.io.IOException;
import java.io.InputStream;
import java.nio.ByteBuffer;
import java.nio.charset.CharacterCodingException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.security.MessageDigest;
import java.security.NoSuchAlgorithmException;
import java.util.HexFormat;
import java.util.List;
import java.util.Optional;
import java.util.OptionalInt;
import java.util.Set;
import org.tomlj.Toml;
import org.tomlj.TomlParseError;
import org.tomlj.TomlParseResult;

/**
 * Reads a profile file into a {@link DeviceProfile}, or lists every problem at once. It never
 * throws for what the file says; a file that cannot be read is a problem too.
 */
public final class ProfileReader {
  /** Longest file that is read, bytes. */
  public static final int LONGEST_FILE = 256 * 1024;

  private ProfileReader() {}

  /** Reads a file. */
  public static ProfileReading read(Path file) {
    String name = String.valueOf(file.getFileName());
    byte[] bytes;
    try (InputStream in = Files.newInputStream(file)) {
      bytes = in.readNBytes(LONGEST_FILE + 1);
    } catch (IOException e) {
      String why = Files.exists(file) ? "not readable" : "not there";
      return unsound(
          name, OptionalInt.empty(), "the file", why, "a TOML file that may be read", "");
    }
    return read(name, bytes);
  }

  /** Reads what stands in a file of this name. */
  public static ProfileReading read(String name, byte[] bytes) {
    if (bytes.length > LONGEST_FILE) {
      return unsound(
          name,
          OptionalInt.empty(),
          "the file",
          "longer than " + LONGEST_FILE + " bytes",
          "at most that",
          "");
    }
    String text;
    try {
      text = StandardCharsets.UTF_8.newDecoder().decode(ByteBuffer.wrap(bytes)).toString();
    } catch (CharacterCodingException e) {
      return unsound(name, OptionalInt.empty(), "the file", "not UTF-8", "text in UTF-8", "");
    }
    TomlParseResult toml = Toml.parse(text);
    if (toml.hasErrors()) {
      List<ProfileProblem> problems =
          toml.errors().stream().limit(20).map(e -> syntax(name, e)).toList();
      return new ProfileReading(Optional.empty(), problems);
    }
    ProblemList problems = new ProblemList(name, toml);
    Section top = Section.top(problems, toml);
    Optional<DeviceProfile> profile = new WholeProfile(problems, top, sha256(bytes)).read();
    top.complainAboutTheRest();
    return problems.isEmpty()
        ? new ProfileReading(profile, List.of())
        : new ProfileReading(Optional.empty(), problems.sorted());
  }

  /**
   * Every key a profile may have, in alphabetical order; NAME stands for the name of a value or a
   * command.
   */
  public static Set<String> knownKeys() {
    TomlParseResult empty = Toml.parse("");
    ProblemList problems = new ProblemList("", empty);
    new WholeProfile(problems, Section.top(problems, empty), "").read();
    return problems.known();
  }

  private static ProfileProblem syntax(String name, TomlParseError error) {
    String said = String.valueOf(error.getMessage()).lines().findFirst().orElse("");
    return new ProfileProblem(
        name,
        OptionalInt.of(error.position().line()),
        "the syntax",
        "broken here: " + said.replaceAll("\\p{Cntrl}", "."),
        "TOML 1.0",
        "name = \"my-board\"");
  }

  private static ProfileReading unsound(
      String file, OptionalInt line, String key, String value, String allowed, String example) {
    return new ProfileReading(
        Optional.empty(), List.of(new ProfileProblem(file, line, key, value, allowed, example)));
  }

  private static String sha256(byte[] bytes) {
    try {
      return HexFormat.of().formatHex(MessageDigest.getInstance("SHA-256").digest(bytes));
    } catch (NoSuchAlgorithmException e) {
      throw new IllegalStateException("every Java platform has SHA-256", e);
    }
  }
}
