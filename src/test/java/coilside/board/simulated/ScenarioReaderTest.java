package coilside.board.simulated;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.profile.ProfileProblem;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.MethodSource;

class ScenarioReaderTest {
  private static final String SOUND =
      """
      name = "bench"
      [sample]
      signal = "50uV"
      [[sample.component]]
      fraction = 1
      t1 = "120ms"
      t2 = "110 ms"
      [magnet]
      larmor = "8.0895MHz"
      width = "50Hz"
      [coil]
      tuned = "8.09MHz"
      quality = 254
      [transmitter]
      pulse_90 = "20us"
      [receiver]
      noise = "1nV/Hz^0.5"
      """;

  static List<String> shipped() {
    return ScenarioReader.shipped();
  }

  @ParameterizedTest
  @MethodSource("shipped")
  void everyShippedScenarioIsSoundAndBearsItsName(String name) {
    assertEquals(name, ScenarioReader.named(name).name());
  }

  @Test
  void valuesArriveInSi() {
    Scenario s = read(SOUND).scenario().orElseThrow();
    assertEquals(50e-6, s.sample().signalVolts(), 1e-18);
    assertEquals(0.12, s.sample().components().get(0).t1Seconds(), 1e-15);
    assertEquals(0.11, s.sample().components().get(0).t2Seconds(), 1e-15);
    assertEquals(8.0895e6, s.magnet().larmorHertz(), 1e-6);
    assertEquals(1e-9, s.receiver().noiseDensity(), 1e-22);
    assertEquals(20e-6, s.transmitter().pulse90Seconds(), 1e-18);
  }

  /** Q = pi f tau: 254 at 8.09 MHz rings for 10 us. */
  @Test
  void theDefaultCoilRingsForTenMicroseconds() {
    Scenario s = ScenarioReader.named(ScenarioReader.DEFAULT);
    assertEquals(10e-6, s.coil().ringSeconds(), 0.01e-6);
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "signal = \"50uV\" | signal = 50 | sample.signal | 3",
        "t2 = \"110 ms\" | t2 = \"1s\" | sample.component[1].t2 | 7",
        "t2 = \"110 ms\" | t2 = \"110 mV\" | sample.component[1].t2 | 7",
        "width = \"50Hz\" | width = \"-1Hz\" | magnet.width | 10",
        "width = \"50Hz\" | colour = 3 | magnet.width | 8",
        "quality = 254 | quality = nan | coil.quality | 13",
        "quality = 254 | quality = \"high\" | coil.quality | 13",
      })
  void aWrongValueIsReportedWithItsPlaceAndAnExample(
      String right, String wrong, String key, int line) {
    ScenarioReading reading = read(SOUND.replace(right, wrong));
    ProfileProblem problem =
        reading.problems().stream().filter(p -> p.key().equals(key)).findFirst().orElseThrow();
    assertEquals(line, problem.line().orElse(-1));
    assertFalse(problem.allowed().isEmpty());
    assertFalse(problem.example().isEmpty());
  }

  @Test
  void allProblemsComeAtOnceInTheOrderOfTheFile() {
    ScenarioReading reading =
        read(SOUND.replace("\"120ms\"", "\"-1s\"").replace("254", "0").replace("20us", "20"));
    assertEquals(
        List.of("sample.component[1].t1", "coil.quality", "transmitter.pulse_90"),
        reading.problems().stream().map(ProfileProblem::key).toList());
  }

  @Test
  void unknownKeysBrokenSyntaxAndForeignBytesAreProblems() {
    assertEquals("an unknown key", read("colour = 1\n" + SOUND).problems().get(0).value());
    assertTrue(read("name = \n" + SOUND).problems().get(0).value().startsWith("broken here"));
    byte[] latin = {'n', (byte) 0xe4};
    assertEquals("not UTF-8", ScenarioReader.read("f", latin).problems().get(0).value());
    assertEquals(
        "not there", ScenarioReader.read(Path.of("no-such.toml")).problems().get(0).value());
    assertFalse(ScenarioReader.read("f", new byte[70_000]).problems().isEmpty());
    assertThrows(IllegalArgumentException.class, () -> ScenarioReader.named("../x"));
  }

  private static ScenarioReading read(String text) {
    return ScenarioReader.read("bench.toml", text.getBytes(StandardCharsets.UTF_8));
  }
}
