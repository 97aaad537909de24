package coilside.bench;

import java.util.OptionalDouble;

/** What was guessed on the way up and saves asking again; forgotten with the sample. */
final class Guesses {
  private OptionalDouble t1Seconds = OptionalDouble.empty();

  /** T1 at the longest, s. */
  OptionalDouble t1Seconds() {
    return t1Seconds;
  }

  void rememberT1(double seconds) {
    t1Seconds = OptionalDouble.of(seconds);
  }

  void forget() {
    t1Seconds = OptionalDouble.empty();
  }
}
