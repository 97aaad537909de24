package coilside.terminal;

import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertTrue;

import com.googlecode.lanterna.TerminalPosition;
import com.googlecode.lanterna.TerminalSize;
import com.googlecode.lanterna.input.KeyStroke;
import com.googlecode.lanterna.input.KeyType;
import com.googlecode.lanterna.input.MouseAction;
import com.googlecode.lanterna.input.MouseActionType;
import com.googlecode.lanterna.terminal.virtual.DefaultVirtualTerminal;
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

  /** Presses a key, clicks, or drags the window; never the key that leaves. */
  static void something(DefaultVirtualTerminal terminal, Random random, int round) {
    int kind = random.nextInt(20);
    if (kind < 12) {
      char c = (char) (32 + random.nextInt(95));
      terminal.addInput(new KeyStroke(c == 'q' ? 'r' : c, false, false));
    } else if (kind == 12) {
      terminal.addInput(
          new MouseAction(
              MouseActionType.CLICK_DOWN,
              1,
              new TerminalPosition(random.nextInt(150), random.nextInt(50))));
    } else if (kind < 18) {
      terminal.addInput(new KeyStroke(NAMED[random.nextInt(NAMED.length)]));
    } else if (kind == 18) {
      terminal.addInput(new KeyStroke("luzg".charAt(random.nextInt(4)), true, false));
    } else if (round % 5 == 0) {
      int w = random.nextInt(10) == 0 ? 1 + random.nextInt(79) : 80 + random.nextInt(60);
      int h = random.nextInt(10) == 0 ? 1 + random.nextInt(23) : 24 + random.nextInt(20);
      terminal.setTerminalSize(new TerminalSize(w, h));
    }
  }

  private static void play(long seed, int rounds, boolean simulated) throws Exception {
    Random random = new Random(seed);
    Stage s = new Stage(80, 24, simulated, StandardCharsets.UTF_8, Map.of());
    for (int i = 0; i < rounds; i++) {
      something(s.terminal, random, i);
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
