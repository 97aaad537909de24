package coilside.shot;

import java.util.List;

/**
 * The same steps played several times in a row.
 *
 * @param count how many times, &gt;= 1
 * @param steps what is repeated, not empty
 */
public record Repeat(int count, List<Step> steps) implements Step {
  public Repeat {
    if (count < 1) {
      throw new IllegalArgumentException("a repeat of " + count + " times plays nothing");
    }
    steps = List.copyOf(steps);
    if (steps.isEmpty()) {
      throw new IllegalArgumentException("a repeat needs at least one step");
    }
  }

  @Override
  public double seconds() {
    return count * steps.stream().mapToDouble(Step::seconds).sum();
  }
}
