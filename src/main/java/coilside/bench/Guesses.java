package coilside.bench;

import java.util.ArrayList;
import java.util.List;
import java.util.OptionalDouble;

/** What was guessed on the way up and saves asking again; forgotten with the sample. */
final class Guesses {
  private final List<Double> interference = new ArrayList<>();
  private OptionalDouble t1Seconds = OptionalDouble.empty();

  /** T1 at the longest, s. */
  OptionalDouble t1Seconds() {
    return t1Seconds;
  }

  void rememberT1(double seconds) {
    t1Seconds = OptionalDouble.of(seconds);
  }

  /** Interference seen with the transmitter off while searching, Hz (not an offset). */
  List<Double> interferenceHertz() {
    return List.copyOf(interference);
  }

  void rememberInterference(double hertz) {
    interference.add(hertz);
  }

  void forget() {
    t1Seconds = OptionalDouble.empty();
  }
}
