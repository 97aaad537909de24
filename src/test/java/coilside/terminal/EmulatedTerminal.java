package coilside.terminal;

import java.nio.ByteBuffer;
import java.nio.CharBuffer;
import java.nio.charset.CharsetDecoder;
import java.nio.charset.CodingErrorAction;
import java.nio.charset.StandardCharsets;
import java.util.Arrays;
import java.util.function.Predicate;
import java.util.regex.Pattern;

/**
 * Interprets what a program writes to a terminal, after ECMA-48 (5th edition) and the DEC private
 * modes that xterm documents; knows nothing of the library that wrote it. Colours are skipped;
 * sequences it does not know are counted. Thread-safe.
 */
final class EmulatedTerminal {
  private int width;
  private int height;
  private char[][] cells;
  private int column;
  private int row;
  private boolean alternate;
  private boolean cursorShown = true;
  private boolean mouse;
  private long bytes;
  private int unknown;
  private StringBuilder sequence;
  private final CharsetDecoder decoder =
      StandardCharsets.UTF_8
          .newDecoder()
          .onMalformedInput(CodingErrorAction.REPLACE)
          .onUnmappableCharacter(CodingErrorAction.REPLACE);
  private final ByteBuffer undecoded = ByteBuffer.allocate(1 << 17);

  EmulatedTerminal(int width, int height) {
    size(width, height);
  }

  /** As a terminal window does when dragged: what still fits stays. */
  synchronized void size(int newWidth, int newHeight) {
    char[][] next = new char[newHeight][newWidth];
    for (int y = 0; y < newHeight; y++) {
      Arrays.fill(next[y], ' ');
      if (cells != null && y < height) {
        System.arraycopy(cells[y], 0, next[y], 0, Math.min(width, newWidth));
      }
    }
    cells = next;
    width = newWidth;
    height = newHeight;
    column = Math.min(column, width - 1);
    row = Math.min(row, height - 1);
  }

  synchronized void take(byte[] from, int n) {
    bytes += n;
    undecoded.put(from, 0, n).flip();
    CharBuffer out = CharBuffer.allocate(n + 8);
    decoder.decode(undecoded, out, false);
    undecoded.compact();
    out.flip();
    while (out.hasRemaining()) {
      character(out.get());
    }
    notifyAll();
  }

  private void character(char c) {
    if (sequence != null) {
      sequence.append(c);
      int n = sequence.length();
      char first = sequence.charAt(0);
      boolean done =
          first == '['
              ? n > 1 && c >= 0x40 && c <= 0x7e
              : first == '(' || first == ')' || first == '#' ? n == 2 : true;
      if (done) {
        String s = sequence.toString();
        sequence = null;
        obey(s);
      }
      return;
    }
    switch (c) {
      case 27 -> sequence = new StringBuilder();
      case '\r' -> column = 0;
      case '\n' -> lineFeed();
      case '\b' -> column = Math.max(0, column - 1);
      case 7, 14, 15, 0 -> {
        // Bell and shifts leave the picture alone.
      }
      default -> {
        if (column >= width) {
          column = 0;
          lineFeed();
        }
        cells[row][column++] = c;
      }
    }
  }

  private void lineFeed() {
    if (row < height - 1) {
      row++;
      return;
    }
    System.arraycopy(cells, 1, cells, 0, height - 1);
    cells[height - 1] = new char[width];
    Arrays.fill(cells[height - 1], ' ');
  }

  private void obey(String s) {
    if (s.charAt(0) != '[') {
      return;
    }
    char last = s.charAt(s.length() - 1);
    String inside = s.substring(1, s.length() - 1);
    int[] p =
        Arrays.stream(inside.replaceAll("[^0-9;]", "").split(";"))
            .mapToInt(v -> v.isEmpty() ? 0 : Integer.parseInt(v))
            .toArray();
    int one = Math.max(1, p[0]);
    switch (last) {
      case 'm' -> {
        // Colours and weights.
      }
      case 'H', 'f' -> {
        row = Math.min(height, one) - 1;
        column = Math.min(width, p.length > 1 ? Math.max(1, p[1]) : 1) - 1;
      }
      case 'A' -> row = Math.max(0, row - one);
      case 'B' -> row = Math.min(height - 1, row + one);
      case 'C' -> column = Math.min(width - 1, column + one);
      case 'D' -> column = Math.max(0, column - one);
      case 'J' -> clear(p[0] == 2 ? 0 : row * width + column, p[0] == 1);
      case 'K' ->
          Arrays.fill(
              cells[row], p[0] == 0 ? Math.min(column, width) : 0, p[0] == 1 ? column : width, ' ');
      case 'h', 'l' -> {
        boolean on = last == 'h';
        alternate = inside.equals("?1049") ? on : alternate;
        mouse = inside.equals("?1000") ? on : mouse;
        cursorShown = inside.equals("?25") ? on : cursorShown;
      }
      default -> unknown++;
    }
  }

  private void clear(int from, boolean before) {
    for (int i = before ? 0 : from; i < (before ? from : width * height); i++) {
      cells[i / width][i % width] = ' ';
    }
  }

  synchronized String text() {
    StringBuilder out = new StringBuilder();
    for (char[] line : cells) {
      out.append(new String(line).stripTrailing()).append('\n');
    }
    return out.toString();
  }

  synchronized boolean alternate() {
    return alternate;
  }

  synchronized boolean cursorShown() {
    return cursorShown;
  }

  /** Whether the program asked to be told of clicks. */
  synchronized boolean mouse() {
    return mouse;
  }

  synchronized long bytes() {
    return bytes;
  }

  synchronized int unknown() {
    return unknown;
  }

  /** Waits until the text shows up; false after so many seconds without it. */
  boolean shows(String text, int seconds) throws InterruptedException {
    return holds(t -> t.contains(text), seconds);
  }

  /** Waits until the whole screen matches. */
  boolean matches(String expression, int seconds) throws InterruptedException {
    Pattern pattern = Pattern.compile(expression);
    return holds(t -> pattern.matcher(t).matches(), seconds);
  }

  private synchronized boolean holds(Predicate<String> wanted, int seconds)
      throws InterruptedException {
    long end = System.nanoTime() + seconds * 1_000_000_000L;
    while (!wanted.test(text())) {
      long left = (end - System.nanoTime()) / 1_000_000;
      if (left <= 0) {
        return false;
      }
      wait(left);
    }
    return true;
  }
}
