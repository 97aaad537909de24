package coilside.terminal;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertTrue;

import java.nio.file.Path;
import java.util.List;
import java.util.Map;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.condition.EnabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;

/**
 * The real program on a real pseudo-terminal, its output read by an interpreter of its own. What a
 * slow or dead terminal does to a run is in {@link TroubledTerminalTest}.
 */
@EnabledOnOs(OS.LINUX)
class RealTerminalTest {
  private static final int PATIENCE = 60;

  @TempDir Path captures;

  private RealTerminal start(int width, int height) throws Exception {
    return new RealTerminal(
        width, height, Map.of(), List.of("--captures", captures.toString(), "--seed", "5"));
  }

  private static void assertShows(RealTerminal t, String text) throws Exception {
    assertTrue(t.screen.shows(text, PATIENCE), "'" + text + "' in\n" + t.screen.text());
  }

  private static void assertGivenBack(RealTerminal t, String before) throws Exception {
    assertEquals(before, t.settings());
    assertFalse(t.screen.alternate());
    assertTrue(t.screen.cursorShown());
    assertFalse(t.screen.mouse());
    assertEquals(0, t.screen.unknown());
  }

  @Test
  void measuresIsResizedAndGivesTheTerminalBack() throws Exception {
    try (RealTerminal t = start(80, 24)) {
      t.size(100, 30);
      t.size(80, 24);
      String before = t.settings();
      assertShows(t, "8 t2        ○ missing");
      assertTrue(t.screen.alternate());
      assertFalse(t.screen.mouse());
      t.type("M");
      assertShows(t, "The mouse is on");
      assertTrue(t.screen.mouse());
      // A press of the left button in column 4, row 7 of 1, as xterm reports it.
      t.type("\u001b[M $'");
      assertShows(t, "▶1 noise");
      t.type("m");
      assertShows(t, "1 noise     ● fresh");
      t.size(130, 40);
      assertShows(t, "    DC ");
      assertTrue(
          t.screen.matches(" .*SIMULATED, armed\\n(.*\\n){38} .*\\?help /find q quit\\n", PATIENCE),
          t.screen.text());
      t.size(80, 24);
      t.type("q");
      assertEquals(TextInterface.DONE, t.ended(PATIENCE));
      assertGivenBack(t, before);
    }
  }

  @Test
  void aTermSignalGivesTheTerminalBack() throws Exception {
    try (RealTerminal t = start(80, 24)) {
      String before = t.settings();
      assertShows(t, "8 t2        ○ missing");
      t.type("l");
      assertShows(t, "s stop");
      // Its process handle: the shell that waits for it is not there.
      t.program.toHandle().destroy();
      assertEquals(TextInterface.INTERRUPTED, t.ended(PATIENCE));
      assertGivenBack(t, before);
    }
  }

  @Test
  @Tag("validation")
  void theWholeLadderFills() throws Exception {
    try (RealTerminal t = start(80, 24)) {
      String before = t.settings();
      assertShows(t, "8 t2        ○ missing");
      long bytes = t.screen.bytes();
      t.type("r");
      assertShows(t, "8 t2        ● fresh");
      String text = t.screen.text();
      assertFalse(text.contains("missing"), text);
      System.out.println(
          "The whole ladder at 80 x 24: " + (t.screen.bytes() - bytes) + " bytes to the terminal");
      t.type("\u0003");
      assertEquals(TextInterface.INTERRUPTED, t.ended(PATIENCE));
      assertGivenBack(t, before);
    }
  }
}
