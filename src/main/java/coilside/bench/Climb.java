package coilside.bench;

import java.util.List;
import java.util.Set;

/**
 * How a climb of the ladder ended.
 *
 * @param ladder every rung as it stands afterwards
 * @param measured the findings made on the way, in order
 * @param impossible rungs that this kind of board cannot serve
 */
public record Climb(List<RungStatus> ladder, List<Finding> measured, Set<Rung> impossible) {
  public Climb {
    ladder = List.copyOf(ladder);
    measured = List.copyOf(measured);
    impossible = Set.copyOf(impossible);
  }

  /** True when every rung that the board can serve is fresh. */
  public boolean ready() {
    return ladder.stream()
        .allMatch(s -> s.state() == RungStatus.State.FRESH || impossible.contains(s.rung()));
  }
}
