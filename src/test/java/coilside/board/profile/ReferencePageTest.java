package coilside.board.profile;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Set;
import java.util.TreeSet;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import org.junit.jupiter.api.Test;

/** The reference page and the reader know the same keys, and its worked example is sound. */
class ReferencePageTest {
  private static final Path PAGE = Path.of("device-profiles", "README.md");

  private static String page() throws IOException {
    return Files.readString(PAGE);
  }

  /** Keys of the reference tables: what stands in back quotes in a first column. */
  private static Set<String> keysOnThePage() throws IOException {
    Set<String> out = new TreeSet<>();
    String reference = page().substring(page().indexOf("\n## Reference"));
    Matcher m = Pattern.compile("(?m)^\\| `([a-zA-Z_.]+)` \\|").matcher(reference);
    while (m.find()) {
      out.add(m.group(1));
    }
    return out;
  }

  @Test
  void everyKeyTheReaderKnowsIsOnThePageAndTheOtherWayRound() throws IOException {
    Set<String> known = new TreeSet<>(ProfileReader.knownKeys());
    Set<String> tables =
        Set.of(
            "serial",
            "tcp",
            "open",
            "framing",
            "identify",
            "replies",
            "values",
            "values.NAME",
            "commands",
            "commands.NAME",
            "samples",
            "samples.block",
            "limits",
            "operator");
    // from, to and step of ranges are explained once, at limits.carrier.
    known.removeIf(
        k ->
            tables.contains(k)
                || k.matches(".*\\.(from|to)")
                || k.matches("(limits|operator)\\.[a-z_]+\\.step"));
    assertEquals(known, keysOnThePage());
  }

  @Test
  void everyWordOfEveryClosedSetIsOnThePage() throws IOException {
    String page = page();
    for (ChecksumKind kind : ChecksumKind.values()) {
      assertTrue(page.contains("`" + kind.word() + "`"), kind.word());
    }
    for (ValueName name : ValueName.values()) {
      assertTrue(page.contains("`" + name.word() + "`"), name.word());
    }
    for (CommandName name : CommandName.values()) {
      assertTrue(page.contains("`commands." + name.word() + "`"), name.word());
    }
  }

  @Test
  void everyValueOfEveryCommandIsOnItsLine() throws IOException {
    for (CommandName name : CommandName.values()) {
      String line =
          page()
              .lines()
              .filter(l -> l.startsWith("| `commands." + name.word() + "` |"))
              .findFirst()
              .orElseThrow();
      for (ValueName value : name.slots()) {
        assertTrue(line.contains("`" + value.word() + "`"), name + " " + value);
      }
    }
  }

  @Test
  void theWorkedExampleIsSound() throws IOException {
    StringBuilder toml = new StringBuilder();
    Matcher m = Pattern.compile("(?s)```toml\n(.*?)```").matcher(page());
    while (m.find()) {
      toml.append(m.group(1).replaceAll("(?m)^   ", "")).append('\n');
    }
    ProfileReading reading =
        ProfileReader.read("magnet-box.toml", toml.toString().getBytes(StandardCharsets.UTF_8));
    assertEquals(
        java.util.List.of(), reading.problems().stream().map(ProfileProblem::message).toList());
    DeviceProfile profile = reading.profile().orElseThrow();
    assertEquals("magnet-box", profile.name());
    assertTrue(profile.fixedShotOnly());
    assertEquals(100e-6, profile.limits().pulseSeconds().max(), 1e-12);
  }
}
