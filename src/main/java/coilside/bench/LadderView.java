package coilside.bench;

import java.time.Instant;
import java.util.List;
import java.util.Map;
import java.util.Optional;

/** The ladder as findings and conditions make it, without a board: for looking only. */
public final class LadderView {
  private LadderView() {}

  /**
   * Every rung as it stands.
   *
   * @param findings by rung, oldest first
   * @param now how the bench stands
   * @param when the time
   */
  public static List<RungStatus> of(
      Map<Rung, List<Finding>> findings, Conditions now, Instant when) {
    Ladder ladder = new Ladder();
    findings.values().forEach(list -> list.forEach(ladder::add));
    return ladder.states(now, when);
  }

  /** The conditions of the newest of all findings: how the bench stood when it was last used. */
  public static Optional<Conditions> last(Map<Rung, List<Finding>> findings) {
    return findings.values().stream()
        .flatMap(List::stream)
        .max(java.util.Comparator.comparing(Finding::started))
        .map(Finding::conditions);
  }
}
