package coilside.terminal;

/** A rectangle of cells on a canvas; width and height are never negative. */
record Area(int x, int y, int width, int height) {
  Area {
    width = Math.max(0, width);
    height = Math.max(0, height);
  }

  int right() {
    return x + width;
  }

  int bottom() {
    return y + height;
  }

  Area inset(int columns, int rows) {
    return new Area(x + columns, y + rows, width - 2 * columns, height - 2 * rows);
  }

  Area rows(int from, int count) {
    return new Area(x, y + from, width, Math.max(0, Math.min(count, height - from)));
  }
}
