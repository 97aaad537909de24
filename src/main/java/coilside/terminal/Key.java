package coilside.terminal;

/**
 * One key press, free of any terminal library.
 *
 * @param name which key; {@code CHARACTER} for one with a character
 * @param character the character, 0 for other keys
 * @param ctrl whether Ctrl was held
 * @param column where the mouse was clicked; 0 for keys
 * @param row where the mouse was clicked; 0 for keys
 */
record Key(Name name, char character, boolean ctrl, int column, int row) {
  enum Name {
    CHARACTER,
    UP,
    DOWN,
    LEFT,
    RIGHT,
    PAGE_UP,
    PAGE_DOWN,
    HOME,
    END,
    ENTER,
    BACK_TAB,
    TAB,
    BACKSPACE,
    DELETE,
    ESCAPE,
    /** The mouse. */
    CLICK,
    /** The terminal is gone. */
    HANG_UP,
    OTHER
  }

  static Key of(char c) {
    return new Key(Name.CHARACTER, c, false, 0, 0);
  }

  static Key of(Name name) {
    return new Key(name, (char) 0, false, 0, 0);
  }

  static Key ctrl(char c) {
    return new Key(Name.CHARACTER, c, true, 0, 0);
  }

  static Key click(int column, int row) {
    return new Key(Name.CLICK, (char) 0, false, column, row);
  }

  boolean is(char c) {
    return name == Name.CHARACTER && character == c && !ctrl;
  }

  boolean isCtrl(char c) {
    return name == Name.CHARACTER && character == c && ctrl;
  }

  boolean is(Name n) {
    return name == n;
  }

  /** Escape, Ctrl-G, or the letter q: every way back out of a view that takes no text. */
  boolean goesBack() {
    return is(Name.ESCAPE) || isCtrl('g') || is('q');
  }
}
