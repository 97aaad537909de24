package coilside.command;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import com.google.gson.JsonElement;
import com.google.gson.JsonObject;
import com.google.gson.JsonParser;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.condition.EnabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/**
 * A simulated board in one process and the ladder in another, over the lines that real boards have.
 */
@EnabledOnOs(value = OS.LINUX, disabledReason = "pseudo-terminals are made on Linux only")
@Timeout(value = 240, threadMode = Timeout.ThreadMode.SEPARATE_THREAD)
class SeparateProcessesTest {
  @TempDir Path folder;

  @ParameterizedTest
  @CsvSource({
    "scpi-console, doped-water, pseudo-terminal",
    "scpi-console, cooking-oil, tcp",
    "plain-line-console, cooking-oil, pseudo-terminal",
    "plain-line-console, doped-water, tcp",
    "pulse-and-receive, doped-water, pseudo-terminal"
  })
  void everyRungThatTheBoardCanServeIsFresh(String profile, String scenario, String line)
      throws Exception {
    List<String> simulate =
        new ArrayList<>(List.of("simulate", "--profile", profile, "--scenario", scenario));
    if (line.equals("tcp")) {
      simulate.addAll(List.of("--listen", "127.0.0.1:0"));
    }
    try (Program board = Program.start(folder, simulate.toArray(String[]::new))) {
      String address = board.firstLine();
      Path captures = folder.resolve("captures");
      try (Program ready =
          Program.start(
              folder,
              "ready",
              "--board",
              profile + "@" + address,
              "--captures",
              captures.toString(),
              "--json")) {
        CommandRun run = ready.ended();
        assertEquals(0, run.status(), run.err() + run.out());
        JsonObject document = JsonParser.parseString(run.out()).getAsJsonObject();
        assertTrue(document.get("ready").getAsBoolean(), run.out());
        List<String> impossible = new ArrayList<>();
        document.getAsJsonArray("not_possible").forEach(e -> impossible.add(e.getAsString()));
        assertEquals(profile.equals("pulse-and-receive") ? List.of("t2") : List.of(), impossible);
        List<String> rungs = new ArrayList<>();
        for (JsonElement e : document.getAsJsonArray("rungs")) {
          JsonObject rung = e.getAsJsonObject();
          String name = rung.get("rung").getAsString();
          rungs.add(name);
          if (!impossible.contains(name)) {
            assertEquals("fresh", rung.get("state").getAsString(), rung.toString());
            assertTrue(rung.getAsJsonObject("values").size() > 0, rung.toString());
          }
        }
        assertEquals(
            List.of("noise", "resonance", "gain", "ringdown", "nutation", "t1", "t2star", "t2"),
            rungs);
        try (var files = Files.list(captures)) {
          assertTrue(files.anyMatch(f -> f.toString().endsWith(".sigmf-data")));
        }
      }
      board.terminate();
      assertEquals(0, board.ended().status());
    }
  }
}
