package coilside.terminal;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertTrue;

import java.io.ByteArrayInputStream;
import java.io.ByteArrayOutputStream;
import java.io.PrintStream;
import java.nio.charset.StandardCharsets;
import org.junit.jupiter.api.Test;

/** The line-by-line form: sentences, no control characters, the same actions. */
class PlainModeTest {
  private static String play(Stage s, String typed) {
    ByteArrayOutputStream bytes = new ByteArrayOutputStream();
    PrintStream out = new PrintStream(bytes, true, StandardCharsets.UTF_8);
    int status =
        PlainMode.run(
            s.desk,
            s.options(StandardCharsets.UTF_8),
            new ByteArrayInputStream(typed.getBytes(StandardCharsets.UTF_8)),
            out);
    assertEquals(TextInterface.DONE, status);
    String text = bytes.toString(StandardCharsets.UTF_8);
    assertTrue(text.chars().allMatch(c -> c >= ' ' || c == '\n'), "control characters in " + text);
    return text;
  }

  @Test
  void theLadderIsToldInSentences() throws Exception {
    Stage s = new Stage(80, 24);
    s.press("r");
    s.finish();
    String text = play(s, "quit\n");
    assertTrue(text.contains("SIMULATED. Sample: doped water. May transmit."), text);
    assertTrue(text.contains("t1: fresh, T1 201.2(6.1) ms, repetition time 1.006(30) s"), text);
  }

  @Test
  void settingsAreChangedByName() throws Exception {
    Stage s = new Stage(80, 24);
    String text = play(s, "set sample cooking oil\nset amplitude 7\nset ?\nquit\n");
    assertEquals("cooking oil", s.desk.settings().sample());
    assertTrue(text.contains("7 is outside 0 to 1;"), text);
    assertTrue(text.contains("expected T1 (1 ms to 100 s, or unknown)"), text);
  }

  @Test
  void whyAndHelpAndUnknownWordsAreAnswered() throws Exception {
    Stage s = new Stage(80, 24);
    s.press("r");
    s.finish();
    String text = play(s, "5\nwhy\nq\nhelp\ng\nnonsense\nquit\n");
    assertTrue(text.contains("nutation rate"), text);
    assertTrue(text.contains("r or ready: Ready"), text);
    assertTrue(text.contains("'g' changes the drawn screen only"), text);
    assertTrue(text.contains("'nonsense' is no command here"), text);
    assertFalse(text.contains("Braille"), text);
  }
}
