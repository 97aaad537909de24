package coilside.terminal;

import coilside.bench.RungStatus;

/**
 * The single characters and unit texts the screen is made of, in Unicode or in ASCII only.
 *
 * @param unicode whether the terminal shows more than ASCII
 */
record Glyphs(boolean unicode) {
  char horizontal() {
    return unicode ? '─' : '-';
  }

  char dotted() {
    return unicode ? '┄' : '.';
  }

  char vertical() {
    return unicode ? '│' : '|';
  }

  char tick() {
    return unicode ? '┴' : '+';
  }

  char corner() {
    return unicode ? '└' : '+';
  }

  char sideTick() {
    return unicode ? '┤' : '+';
  }

  char pulse() {
    return unicode ? '█' : '#';
  }

  char window() {
    return unicode ? '∿' : '~';
  }

  char full() {
    return unicode ? '█' : '#';
  }

  char empty() {
    return unicode ? '░' : '.';
  }

  char here() {
    return unicode ? '▲' : '^';
  }

  char point() {
    return unicode ? '●' : 'o';
  }

  char next() {
    return unicode ? '◇' : 'v';
  }

  char pointer() {
    return unicode ? '▶' : '>';
  }

  String degree() {
    return unicode ? "°" : "deg";
  }

  String times() {
    return unicode ? "×" : "x";
  }

  String arrow(int direction) {
    if (unicode) {
      return direction > 0 ? "↑" : direction < 0 ? "↓" : "→";
    }
    return direction > 0 ? "up" : direction < 0 ? "down" : "steady";
  }

  char mark(RungStatus.State state) {
    return switch (state) {
      case FRESH -> unicode ? '●' : '+';
      case STALE -> unicode ? '◐' : '~';
      case MISSING -> unicode ? '○' : '-';
      case REFUSED -> unicode ? '✗' : 'x';
    };
  }

  /** A character that this terminal can show in one cell; control characters become '?'. */
  char shown(char c) {
    if (c >= ' ' && c < 0x7f) {
      return c;
    }
    if (c < 0xa0 || Character.isSurrogate(c) || wide(c)) {
      return '?';
    }
    int type = Character.getType(c);
    if (type == Character.FORMAT
        || type == Character.CONTROL
        || type == Character.NON_SPACING_MARK
        || type == Character.ENCLOSING_MARK
        || type == Character.LINE_SEPARATOR
        || type == Character.PARAGRAPH_SEPARATOR
        || type == Character.UNASSIGNED
        || type == Character.PRIVATE_USE) {
      return '?';
    }
    if (unicode) {
      return c;
    }
    return switch (c) {
      case 'µ', 'μ' -> 'u';
      case '\u00a0', '\u2009', '\u202f' -> ' ';
      case '×' -> 'x';
      case '·', '…' -> '.';
      case '–', '—', '−' -> '-';
      case '→' -> '>';
      case '≥' -> '>';
      case '≤' -> '<';
      case '≈', '∼' -> '~';
      case '‘', '’' -> '\'';
      case '“', '”' -> '"';
      case '±' -> '+';
      case '²' -> '2';
      case 'σ' -> 's';
      case 'π' -> 'p';
      case '°' -> 'd';
      default -> '?';
    };
  }

  private static boolean wide(char c) {
    return c >= 0x1100 && c <= 0x115f
        || c >= 0x2e80 && c <= 0xa4cf
        || c >= 0xac00 && c <= 0xd7a3
        || c >= 0xf900 && c <= 0xfaff
        || c >= 0xfe30 && c <= 0xfe6f
        || c >= 0xff00 && c <= 0xff60
        || c >= 0xffe0 && c <= 0xffe6;
  }
}
