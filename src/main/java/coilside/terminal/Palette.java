package coilside.terminal;

import com.googlecode.lanterna.SGR;
import com.googlecode.lanterna.TextCharacter;
import com.googlecode.lanterna.TextColor;
import java.util.EnumSet;
import java.util.HashMap;
import java.util.Map;

/**
 * Turns ink into terminal colours. The hues are those of Okabe and Ito (2008), which people with
 * the common colour deficiencies can tell apart; the background is always the terminal's own.
 */
final class Palette {
  enum Depth {
    NONE,
    SIXTEEN,
    MANY
  }

  private final Depth depth;
  private final boolean light;
  private final Map<Integer, TextCharacter> made = new HashMap<>();

  Palette(Depth depth, boolean light) {
    this.depth = depth;
    this.light = light;
  }

  /** What TERM, COLORTERM, NO_COLOR and COLORFGBG say; NO_COLOR counts when set and not empty. */
  static Palette from(Map<String, String> environment, boolean noColor) {
    String term = environment.getOrDefault("TERM", "");
    Depth depth;
    if (noColor || !environment.getOrDefault("NO_COLOR", "").isEmpty() || term.startsWith("vt")) {
      depth = Depth.NONE;
    } else if (term.contains("256")
        || term.contains("direct")
        || !environment.getOrDefault("COLORTERM", "").isEmpty()) {
      depth = Depth.MANY;
    } else {
      depth = Depth.SIXTEEN;
    }
    String[] ground = environment.getOrDefault("COLORFGBG", "").split(";");
    String last = ground[ground.length - 1];
    return new Palette(depth, last.equals("7") || last.equals("15"));
  }

  Depth depth() {
    return depth;
  }

  boolean light() {
    return light;
  }

  Palette withLight(boolean on) {
    return new Palette(depth, on);
  }

  TextCharacter character(char c, Ink ink) {
    return made.computeIfAbsent(c << 8 | ink.ordinal(), k -> make(c, ink));
  }

  /** The blank between two words of one ink: in that ink, so that the colour is not sent twice. */
  TextCharacter gap(Ink ink) {
    return made.computeIfAbsent(1 << 24 | ink.ordinal(), k -> make('x', ink).withCharacter(' '));
  }

  private TextCharacter make(char c, Ink ink) {
    // A blank shows no foreground: one colour for all of them keeps the runs long.
    Ink shown = c == ' ' && ink != Ink.CHOSEN ? Ink.PLAIN : ink;
    EnumSet<SGR> style = EnumSet.noneOf(SGR.class);
    if (shown == Ink.CHOSEN) {
      style.add(SGR.REVERSE);
    }
    if (shown == Ink.STRONG || shown == Ink.TITLE || depth == Depth.NONE && shown == Ink.BAD) {
      style.add(SGR.BOLD);
    }
    return TextCharacter.fromCharacter(c, colour(shown), TextColor.ANSI.DEFAULT)[0].withModifiers(
        style);
  }

  private TextColor colour(Ink ink) {
    return switch (depth) {
      case NONE -> TextColor.ANSI.DEFAULT;
      case SIXTEEN -> sixteen(ink);
      case MANY -> many(ink);
    };
  }

  private TextColor sixteen(Ink ink) {
    return switch (ink) {
      case PLAIN, STRONG, CHOSEN -> TextColor.ANSI.DEFAULT;
      case FAINT, AXIS, BAND -> light ? TextColor.ANSI.BLACK_BRIGHT : TextColor.ANSI.WHITE;
      case TITLE, SIGNAL -> light ? TextColor.ANSI.BLUE : TextColor.ANSI.CYAN;
      case GOOD -> light ? TextColor.ANSI.BLUE : TextColor.ANSI.CYAN;
      case CARE, FIT -> light ? TextColor.ANSI.RED : TextColor.ANSI.YELLOW;
      case BAD -> TextColor.ANSI.RED;
      case SECOND, NEXT -> TextColor.ANSI.MAGENTA;
    };
  }

  private TextColor many(Ink ink) {
    int index =
        switch (ink) {
          case PLAIN, STRONG, CHOSEN -> -1;
          case FAINT, AXIS -> light ? 242 : 247;
          case BAND -> light ? 247 : 242;
          case TITLE, SIGNAL -> light ? 25 : 74;
          case GOOD -> light ? 29 : 36;
          case CARE, FIT -> light ? 130 : 214;
          case BAD -> light ? 160 : 202;
          case SECOND, NEXT -> light ? 127 : 175;
        };
    return index < 0 ? TextColor.ANSI.DEFAULT : new TextColor.Indexed(index);
  }
}
