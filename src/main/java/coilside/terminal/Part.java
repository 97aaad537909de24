package coilside.terminal;

/** Which part of a complex signal is drawn. */
enum Part {
  REAL("real"),
  IMAGINARY("imaginary"),
  MAGNITUDE("magnitude"),
  BOTH("real and imaginary");

  final String words;

  Part(String words) {
    this.words = words;
  }

  Part next() {
    return values()[(ordinal() + 1) % values().length];
  }
}
