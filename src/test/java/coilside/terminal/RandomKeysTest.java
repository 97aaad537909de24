package coilside.terminal;

import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertTrue;

import com.googlecode.lanterna.TerminalSize;
import com.googlecode.lanterna.input.KeyStroke;
import com.googlecode.lanterna.input.KeyType;
import java.nio.charset.StandardCharsets;
import java.util.Map;
import java.util.Random;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;

/** Random keys and sizes: no exception, and never a state that cannot be left. */
class RandomKeysTest {
  private static final KeyType[] NAMED = {
    KeyType.ArrowUp,
    KeyType.ArrowDown,
    KeyType.ArrowLeft,
    KeyType.ArrowRight,
    KeyType.Enter,
    KeyType.Tab,
    KeyType.ReverseTab,
    KeyType.Backspace,
    KeyType.Escape,
    KeyType.PageUp,
    KeyType.PageDown,
    KeyType.Home,
    KeyType.End,
    KeyType.Delete,
    KeyType.F5
  };

  private static void play(long seed, int rounds, boolean simulated) throws Exception {
    Random random = new Random(seed);
    Stage s = new Stage(80, 24, simulated, StandardCharsets.UTF_8, Map.of());
    for (int i = 0; i < rounds; i++) {
      int kind = random.nextInt(20);
      if (kind < 13) {
        char c = (char) (32 + random.nextInt(95));
        s.terminal.addInput(new KeyStroke(c == 'q' ? 'r' : c, false, false));
      } else if (kind < 18) {
        s.terminal.addInput(new KeyStroke(NAMED[random.nextInt(NAMED.length)]));
      } else if (kind == 18) {
        s.terminal.addInput(new KeyStroke("luzg".charAt(random.nextInt(4)), true, false));
      } else if (i % 5 == 0) {
        int w = random.nextInt(10) == 0 ? 1 + random.nextInt(79) : 80 + random.nextInt(60);
        int h = random.nextInt(10) == 0 ? 1 + random.nextInt(23) : 24 + random.nextInt(20);
        s.terminal.setTerminalSize(new TerminalSize(w, h));
      }
      if (random.nextInt(3) == 0) {
        s.desk.advance();
      }
      s.pass(random.nextInt(20) == 0 ? 60 : 5);
      s.loop.turn();
      assertFalse(s.cockpit.done(), "left at round " + i);
    }
    assertCanBeLeft(s);
  }

  private static void assertCanBeLeft(Stage s) throws Exception {
    s.terminal.setTerminalSize(new TerminalSize(80, 24));
    for (int i = 0; i < 6; i++) {
      s.press(KeyType.Escape);
    }
    assertTrue(s.shows("quit"), s.text());
    if (s.watch.snapshotWork().isPresent()) {
      s.press("s");
      s.finish();
      s.finish();
    }
    s.press("q");
    assertTrue(s.cockpit.done(), s.text());
  }

  @Test
  void simulatedBench() throws Exception {
    play(7, 3_000, true);
  }

  @Test
  void realBench() throws Exception {
    play(8, 1_500, false);
  }

  @Test
  @Tag("validation")
  void oneHundredThousand() throws Exception {
    for (int seed = 0; seed < 10; seed++) {
      play(100 + seed, 10_000, seed % 3 != 0);
    }
  }
}
