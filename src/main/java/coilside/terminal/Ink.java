package coilside.terminal;

/** What a cell's colour stands for; {@code Palette} turns it into a colour, or into none. */
enum Ink {
  PLAIN,
  FAINT,
  STRONG,
  TITLE,
  GOOD,
  CARE,
  BAD,
  SIGNAL,
  SECOND,
  FIT,
  BAND,
  AXIS,
  NEXT,
  /** Reversed: the chosen line. */
  CHOSEN
}
