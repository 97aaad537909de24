package coilside.terminal;

import java.util.Arrays;

/**
 * A grid of cells, each a character and what its colour stands for. Everything written outside is
 * clipped; every character is checked, so hostile text cannot reach the terminal as a control.
 */
final class Canvas {
  private final int width;
  private final int height;
  private final char[] chars;
  private final Ink[] inks;
  private final Glyphs glyphs;

  Canvas(int width, int height, Glyphs glyphs) {
    this.width = Math.max(1, width);
    this.height = Math.max(1, height);
    this.glyphs = glyphs;
    chars = new char[this.width * this.height];
    inks = new Ink[this.width * this.height];
    clear(area());
  }

  int width() {
    return width;
  }

  int height() {
    return height;
  }

  Glyphs glyphs() {
    return glyphs;
  }

  Area area() {
    return new Area(0, 0, width, height);
  }

  void clear(Area area) {
    for (int y = Math.max(0, area.y()); y < Math.min(height, area.bottom()); y++) {
      int from = y * width + Math.max(0, Math.min(width, area.x()));
      int to = y * width + Math.max(0, Math.min(width, area.right()));
      if (to > from) {
        Arrays.fill(chars, from, to, ' ');
        Arrays.fill(inks, from, to, Ink.PLAIN);
      }
    }
  }

  void put(int x, int y, char c, Ink ink) {
    if (x >= 0 && x < width && y >= 0 && y < height) {
      chars[y * width + x] = glyphs.shown(c);
      inks[y * width + x] = ink;
    }
  }

  /** Writes text from x on; returns the column after it. */
  int put(int x, int y, String text, Ink ink) {
    return put(x, y, text, ink, width);
  }

  /** Writes text up to a column (exclusive), the last cell an ellipsis where it is cut. */
  int put(int x, int y, String text, Ink ink, int end) {
    int room = Math.max(0, Math.min(end, width) - x);
    String s = cut(text, room);
    for (int i = 0; i < s.length(); i++) {
      put(x + i, y, s.charAt(i), ink);
    }
    return x + s.length();
  }

  /** Writes text so that it ends before a column. */
  void putRight(int end, int y, String text, Ink ink, int from) {
    String s = cut(text, Math.max(0, end - from));
    put(end - s.length(), y, s, ink, end);
  }

  private String cut(String text, int room) {
    if (text.length() <= room) {
      return text;
    }
    if (room <= 0) {
      return "";
    }
    return text.substring(0, room - 1) + (glyphs.unicode() ? '…' : '~');
  }

  void fill(Area area, char c, Ink ink) {
    for (int y = area.y(); y < area.bottom(); y++) {
      for (int x = area.x(); x < area.right(); x++) {
        put(x, y, c, ink);
      }
    }
  }

  /** Gives a row of cells another ink and leaves its text. */
  void tint(int x, int y, int count, Ink ink) {
    for (int i = Math.max(0, x); i < Math.min(width, x + count); i++) {
      if (y >= 0 && y < height) {
        inks[y * width + i] = ink;
      }
    }
  }

  char at(int x, int y) {
    return chars[y * width + x];
  }

  Ink inkAt(int x, int y) {
    return inks[y * width + x];
  }

  String row(int y) {
    return new String(chars, y * width, width);
  }

  /** All rows, each ended by a line feed, trailing blanks removed. */
  String text() {
    StringBuilder out = new StringBuilder();
    for (int y = 0; y < height; y++) {
      out.append(row(y).stripTrailing()).append('\n');
    }
    return out.toString();
  }
}
