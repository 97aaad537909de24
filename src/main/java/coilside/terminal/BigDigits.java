package coilside.terminal;

import java.util.Map;

/** Letters and digits drawn large, to be read from across the room. */
final class BigDigits {
  private static final int COLUMNS = 5;
  private static final int ROWS = 7;
  private static final Map<Character, String> SHAPES =
      Map.ofEntries(
          Map.entry('0', "01110 10001 10011 10101 11001 10001 01110"),
          Map.entry('1', "00100 01100 00100 00100 00100 00100 01110"),
          Map.entry('2', "01110 10001 00001 00110 01000 10000 11111"),
          Map.entry('3', "11111 00010 00100 00010 00001 10001 01110"),
          Map.entry('4', "00010 00110 01010 10010 11111 00010 00010"),
          Map.entry('5', "11111 10000 11110 00001 00001 10001 01110"),
          Map.entry('6', "00110 01000 10000 11110 10001 10001 01110"),
          Map.entry('7', "11111 00001 00010 00100 01000 01000 01000"),
          Map.entry('8', "01110 10001 10001 01110 10001 10001 01110"),
          Map.entry('9', "01110 10001 10001 01111 00001 00010 01100"),
          Map.entry('.', "00000 00000 00000 00000 00000 01100 01100"),
          Map.entry('-', "00000 00000 00000 11111 00000 00000 00000"),
          Map.entry(' ', "00000 00000 00000 00000 00000 00000 00000"));

  private BigDigits() {}

  private static int columns(char c) {
    return c == '.' || c == ' ' ? 2 : COLUMNS;
  }

  private static int width(String text) {
    int w = -1;
    for (int i = 0; i < text.length(); i++) {
      w += columns(text.charAt(i)) + 1;
    }
    return Math.max(0, w);
  }

  /** Draws the text in the middle of the area, as large as fits; false where not even once. */
  static boolean draw(Canvas canvas, Area area, String text, Ink ink) {
    int w = width(text);
    // A cell is about twice as high as wide: a square dot is two cells across.
    int scale = Math.min(area.width() / Math.max(1, w), 2 * area.height() / ROWS);
    int across = Math.max(1, scale);
    int down = Math.max(1, scale / 2);
    if (w * across > area.width() || ROWS * down > area.height()) {
      canvas.put(area.x() + Math.max(0, (area.width() - text.length()) / 2), area.y(), text, ink);
      return false;
    }
    int x = area.x() + (area.width() - w * across) / 2;
    int top = area.y() + (area.height() - ROWS * down) / 2;
    for (int i = 0; i < text.length(); i++) {
      char c = text.charAt(i);
      String[] rows = SHAPES.getOrDefault(c, SHAPES.get('-')).split(" ");
      for (int r = 0; r < ROWS; r++) {
        for (int k = 0; k < columns(c); k++) {
          if (rows[r].charAt(c == '.' ? k + 1 : k) == '1') {
            Area dot = new Area(x + k * across, top + r * down, across, down);
            canvas.fill(dot, canvas.glyphs().full(), ink);
          }
        }
      }
      x += (columns(c) + 1) * across;
    }
    return true;
  }
}
