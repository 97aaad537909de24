package coilside.board.profile;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.stream.Stream;
import org.junit.jupiter.api.Test;

/** Every shipped profile is sound. */
class ShippedProfilesTest {
  private static final Path FOLDER = Path.of("device-profiles");

  @Test
  void everyShippedProfileIsSound() throws IOException {
    List<Path> files;
    try (Stream<Path> all = Files.list(FOLDER)) {
      files = all.filter(f -> f.toString().endsWith(".toml")).sorted().toList();
    }
    assertFalse(files.isEmpty());
    for (Path file : files) {
      ProfileReading reading = ProfileReader.read(file);
      assertEquals(List.of(), reading.problems().stream().map(ProfileProblem::message).toList());
      assertEquals(file.getFileName().toString(), reading.profile().orElseThrow().name() + ".toml");
    }
  }
}
