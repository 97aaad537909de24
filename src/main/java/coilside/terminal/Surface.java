package coilside.terminal;

import com.googlecode.lanterna.TerminalSize;
import com.googlecode.lanterna.TextCharacter;
import com.googlecode.lanterna.input.KeyStroke;
import com.googlecode.lanterna.input.MouseAction;
import com.googlecode.lanterna.input.MouseActionType;
import com.googlecode.lanterna.screen.Screen;
import com.googlecode.lanterna.screen.TerminalScreen;
import com.googlecode.lanterna.terminal.ExtendedTerminal;
import com.googlecode.lanterna.terminal.MouseCaptureMode;
import java.io.IOException;

/** Shows canvases on a Lanterna screen, sending only what changed, and reads its keys. */
final class Surface {
  private final Screen screen;
  private final Runnable ring;
  private Palette palette;
  private boolean mouse;

  /**
   * @param screen a started screen
   * @param ring sounds the bell
   */
  Surface(Screen screen, Palette palette, Runnable ring) {
    this.screen = screen;
    this.palette = palette;
    this.ring = ring;
    screen.setCursorPosition(null);
  }

  Palette palette() {
    return palette;
  }

  void palette(Palette other) {
    palette = other;
  }

  /**
   * Asks the terminal to tell clicks, or to keep them for itself (copying text). Presses alone
   * (mode 9) are unknown to tmux, so releases are taken along and left out.
   */
  void mouse(boolean wanted) throws IOException {
    if (wanted != mouse
        && screen instanceof TerminalScreen s
        && s.getTerminal() instanceof ExtendedTerminal t) {
      t.setMouseCaptureMode(wanted ? MouseCaptureMode.CLICK_RELEASE : null);
    }
    mouse = wanted;
  }

  /** Takes a changed size over; true when there was one. */
  boolean resize() {
    return screen.doResizeIfNecessary() != null;
  }

  int width() {
    return screen.getTerminalSize().getColumns();
  }

  int height() {
    return screen.getTerminalSize().getRows();
  }

  void show(Canvas canvas, boolean everything) throws IOException {
    TerminalSize size = screen.getTerminalSize();
    int w = Math.min(size.getColumns(), canvas.width());
    int h = Math.min(size.getRows(), canvas.height());
    for (int y = 0; y < h; y++) {
      for (int x = 0; x < w; x++) {
        screen.setCharacter(x, y, cell(canvas, x, y));
      }
    }
    screen.refresh(everything ? Screen.RefreshType.COMPLETE : Screen.RefreshType.DELTA);
  }

  private TextCharacter cell(Canvas canvas, int x, int y) {
    char c = canvas.at(x, y);
    Ink ink = canvas.inkAt(x, y);
    if (c == ' ' && ink != Ink.CHOSEN && x > 0 && x + 1 < canvas.width()) {
      Ink before = canvas.inkAt(x - 1, y);
      boolean words = canvas.at(x - 1, y) != ' ' && canvas.at(x + 1, y) != ' ';
      if (words && before == canvas.inkAt(x + 1, y) && before != Ink.CHOSEN) {
        return palette.gap(before);
      }
    }
    return palette.character(c, ink);
  }

  void bell() {
    ring.run();
  }

  /** The next key, or null when none is waiting. */
  Key poll() throws IOException {
    KeyStroke stroke = screen.pollInput();
    return stroke == null ? null : key(stroke);
  }

  static Key key(KeyStroke stroke) {
    if (stroke instanceof MouseAction click) {
      return click.getActionType() == MouseActionType.CLICK_DOWN
          ? Key.click(click.getPosition().getColumn(), click.getPosition().getRow())
          : Key.of(Key.Name.OTHER);
    }
    Key.Name name =
        switch (stroke.getKeyType()) {
          case Character -> Key.Name.CHARACTER;
          case ArrowUp -> Key.Name.UP;
          case ArrowDown -> Key.Name.DOWN;
          case ArrowLeft -> Key.Name.LEFT;
          case ArrowRight -> Key.Name.RIGHT;
          case PageUp -> Key.Name.PAGE_UP;
          case PageDown -> Key.Name.PAGE_DOWN;
          case Home -> Key.Name.HOME;
          case End -> Key.Name.END;
          case Enter -> Key.Name.ENTER;
          case Tab -> Key.Name.TAB;
          case ReverseTab -> Key.Name.BACK_TAB;
          case Backspace -> Key.Name.BACKSPACE;
          case Delete -> Key.Name.DELETE;
          case Escape -> Key.Name.ESCAPE;
          case EOF -> Key.Name.HANG_UP;
          default -> Key.Name.OTHER;
        };
    if (name != Key.Name.CHARACTER) {
      return Key.of(name);
    }
    if (stroke.isAltDown()) {
      return Key.of(Key.Name.OTHER);
    }
    return new Key(name, stroke.getCharacter(), stroke.isCtrlDown(), 0, 0);
  }
}
