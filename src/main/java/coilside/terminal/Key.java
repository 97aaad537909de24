package coilside.terminal;

/**
 * One key press, free of any terminal library.
 *
 * @param name which key; {@code CHARACTER} for one with a character
 * @param character the character, 0 for other keys
 * @param ctrl whether Ctrl was held
 */
record Key(Name name, char character, boolean ctrl) {
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
    /** The terminal is gone. */
    HANG_UP,
    OTHER
  }

  static Key of(char c) {
    return new Key(Name.CHARACTER, c, false);
  }

  static Key of(Name name) {
    return new Key(name, (char) 0, false);
  }

  static Key ctrl(char c) {
    return new Key(Name.CHARACTER, c, true);
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
