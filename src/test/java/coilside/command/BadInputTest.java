package coilside.command;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertTrue;

import java.io.IOException;
import java.net.ServerSocket;
import java.nio.file.Files;
import java.nio.file.Path;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/** Bad input gets one paragraph that says what to do, and the exit status of the contract. */
class BadInputTest {
  @TempDir Path folder;

  private CommandRun run(String... args) {
    String[] all = new String[args.length + 2];
    System.arraycopy(args, 0, all, 0, args.length);
    all[args.length] = "--captures";
    all[args.length + 1] = folder.resolve("captures").toString();
    return CommandRun.of(all);
  }

  private static void assertRefused(CommandRun run, int status, String... words) {
    assertEquals(status, run.status(), run.err());
    for (String word : words) {
      assertTrue(run.err().contains(word), "'" + word + "' is not in: " + run.err());
    }
    assertFalse(run.err().contains("\tat "), "a stack trace: " + run.err());
    assertFalse(run.err().contains("Exception"), "an exception's name: " + run.err());
    assertEquals("", run.out());
  }

  @Test
  void anUnknownOptionIsNamed() {
    assertRefused(run("ready", "--bord", "x"), 2, "--bord", "--help");
  }

  @Test
  void anUnknownCommandIsNamed() {
    assertRefused(run("redy"), 2, "redy");
  }

  @Test
  void anUnknownRungListsTheRungs() {
    assertRefused(run("measure", "t3"), 2, "t3", "nutation", "t2star");
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "ready --expected-t1 120 | no unit",
        "ready --expected-t1 -5ms | above 0",
        "ready --expected-t1 5parsec | parsec",
        "ready --expected-t1 NaNs | NaN",
        "ready --search 8MHz | LOW..HIGH",
        "ready --search 8.3MHz..7.9MHz | does not rise",
        "ready --search 7.9MHz..900MHz | carrier range",
        "ready --amplitude 2 | 0 to 1",
        "ready --amplitude lots | 0 to 1",
        "ready --scan-budget 1 | at least 8",
        "fid --dwell 5 | no unit",
        "fid --dwell 5Hz | unit",
        "fid --scans 0 | 1 to",
        "fid --phase-cycle waltz | cyclops or none",
        "log --every 30 | no unit",
        "log --every 1us | 10 ms",
        "log --every 30s --until noon | no time",
        "show nothing-here | no capture",
        "export nothing-here --as png | jcamp"
      })
  void wrongValuesAreRefusedWithWhatIsAllowed(String arguments, String word) {
    assertRefused(run(arguments.split(" ")), 2, word.strip());
  }

  @Test
  void aMissingProfileIsNamed() {
    assertRefused(run("ready", "--board", "no-such.toml@/dev/null"), 2, "no-such.toml");
    assertRefused(run("ready", "--board", "no-such"), 2, "no-such", "scpi-console");
    assertRefused(run("ready", "--board", "@/dev/ttyACM0"), 2, "PROFILE[@PORT]");
  }

  @Test
  void aWrongProfileListsEveryProblem() throws IOException {
    Path profile = folder.resolve("wrong.toml");
    Files.writeString(profile, "name = 3\n[serial]\nspeed = \"fast\"\nspede = 5\n");
    CommandRun run = run("ready", "--board", profile + "@/dev/null");
    assertRefused(run, 2, "wrong.toml:1", "wrong.toml:3", "spede");
  }

  @Test
  void aMissingPortIsOutOfReach() {
    assertRefused(
        run("ready", "--board", "scpi-console@/dev/coilside-is-not-here"),
        3,
        "/dev/coilside-is-not-here");
  }

  @Test
  void aFileIsNoPort() throws IOException {
    Path file = Files.writeString(folder.resolve("file"), "text");
    assertRefused(run("ready", "--board", "scpi-console@" + file), 3, file.toString());
  }

  @Test
  void aClosedNetworkPortIsOutOfReach() throws IOException {
    int port;
    try (ServerSocket socket = new ServerSocket(0)) {
      port = socket.getLocalPort();
    }
    assertRefused(
        run("ready", "--board", "scpi-console@127.0.0.1:" + port), 3, "127.0.0.1:" + port);
  }

  @Test
  void aPortNumberThatIsNoneIsWrongUsage() {
    assertRefused(run("ready", "--board", "scpi-console@localhost:99999"), 2, "99999");
  }

  @Test
  void anUnusableCapturesFolderIsRefusedBeforeAnythingIsPlayed() throws IOException {
    Path file = Files.writeString(folder.resolve("in-the-way"), "text");
    CommandRun run = CommandRun.of("ready", "--captures", file.resolve("captures").toString());
    assertRefused(run, 5, "in-the-way");
  }

  @Test
  void controlCharactersDoNotReachTheTerminal() {
    CommandRun run = run("measure", "t1\u001b[2J");
    assertEquals(2, run.status());
    assertFalse(run.err().contains("\u001b"), "an escape character got through");
  }

  @Test
  void withoutATerminalTheTextInterfaceNamesReady() {
    CommandRun run = run();
    assertRefused(run, 2, "terminal", "coilside ready");
  }

  @Test
  void aBenchWithoutASampleIsMeasuredAndRefusedWithCauses() {
    CommandRun run =
        run("ready", "--scenario", "src/test/resources/scenarios/faults/no-sample.toml");
    assertEquals(1, run.status(), run.err());
    assertTrue(run.err().contains("no resonance within"), run.err());
    assertTrue(run.err().contains("most likely first"), run.err());
  }
}
