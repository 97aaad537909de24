package coilside.terminal;

/** How curves are drawn into cells: a grid of dots a cell, and the character for each pattern. */
enum DrawingStyle {
  BRAILLE(2, 4),
  BLOCK(2, 2),
  ASCII(1, 3);

  private static final String QUADRANTS = " ▘▝▀▖▌▞▛▗▚▐▜▄▙▟█";
  private static final String STROKES = " '-|.:||";
  private static final int[] BRAILLE_BITS = {0, 3, 1, 4, 2, 5, 6, 7};

  final int across;
  final int down;

  DrawingStyle(int across, int down) {
    this.across = across;
    this.down = down;
  }

  /** The next style; only ASCII where the terminal shows nothing else. */
  DrawingStyle next(boolean unicode) {
    return unicode ? values()[(ordinal() + 1) % values().length] : ASCII;
  }

  /** The character for a pattern; bit {@code row * across + column} set means a dot there. */
  char character(int pattern) {
    return switch (this) {
      case BRAILLE -> {
        int bits = 0;
        for (int i = 0; i < 8; i++) {
          if ((pattern >> i & 1) != 0) {
            bits |= 1 << BRAILLE_BITS[i];
          }
        }
        yield (char) (0x2800 + bits);
      }
      case BLOCK -> QUADRANTS.charAt(pattern & 15);
      case ASCII -> STROKES.charAt(pattern & 7);
    };
  }
}
