package coilside.command;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import com.google.gson.JsonElement;
import com.google.gson.JsonObject;
import com.google.gson.JsonParser;
import java.nio.file.Path;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.io.TempDir;

/**
 * A board that the program has never heard of, reached with a profile written from its sheet and
 * the profiles' reference page alone. The board's side shares no code with the profile's.
 */
@Timeout(value = 120, threadMode = Timeout.ThreadMode.SEPARATE_THREAD)
class UnknownBoardTest {
  private static final String PROFILE = "src/test/resources/profiles/sheet-only.toml";

  @TempDir Path folder;

  private static double value(JsonObject rung, String name) {
    return rung.getAsJsonObject("values").getAsJsonObject(name).get("value").getAsDouble();
  }

  @Test
  void itsProfileIsSoundAndTheBoardConforms() throws Exception {
    CommandRun sound = CommandRun.of("check", PROFILE);
    assertEquals(0, sound.status(), sound.err());
    try (StepperBoard board = new StepperBoard("doped-water")) {
      CommandRun run = CommandRun.of("check", PROFILE + "@" + board.address());
      // This board checks no limits of its own, which is to be looked at and not bad.
      assertEquals(0, run.status(), run.out() + run.err());
      assertTrue(run.out().contains("good     identify"), run.out());
      assertTrue(run.out().contains("STEPPER 4"), run.out());
      assertTrue(run.out().contains("the board allows more than the profile"), run.out());
      assertTrue(run.out().contains("three windows by a repeat"), run.out());
    }
  }

  @Test
  void readyReachesTheEnd() throws Exception {
    try (StepperBoard board = new StepperBoard("doped-water")) {
      CommandRun run =
          CommandRun.of(
              "ready",
              "--json",
              "--board",
              PROFILE + "@" + board.address(),
              "--captures",
              folder.toString());
      assertEquals(0, run.status(), run.out() + run.err());
      JsonObject ready = JsonParser.parseString(run.out()).getAsJsonObject();
      assertTrue(ready.get("ready").getAsBoolean(), run.out());
      assertEquals(0, ready.getAsJsonArray("not_possible").size(), run.out());
      for (JsonElement e : ready.getAsJsonArray("rungs")) {
        JsonObject rung = e.getAsJsonObject();
        assertEquals("fresh", rung.get("state").getAsString(), rung.toString());
        // What the scenario says of its sample.
        switch (rung.get("rung").getAsString()) {
          case "t1" -> assertEquals(0.120, value(rung, "t1"), 0.05 * 0.120);
          case "t2star" -> assertEquals(6.02e-3, value(rung, "t2_star"), 0.02 * 6.02e-3);
          case "nutation" -> assertEquals(20e-6 / 0.6, value(rung, "pulse_90"), 0.01 * 20e-6 / 0.6);
          default -> {
            // Fresh is all that is asked here.
          }
        }
      }
    }
  }
}
