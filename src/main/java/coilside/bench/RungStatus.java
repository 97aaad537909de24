package coilside.bench;

import java.util.List;
import java.util.Optional;

/**
 * Where a rung stands now.
 *
 * @param rung which
 * @param state fresh, stale, missing or refused
 * @param finding the newest finding, where there is one
 * @param reasons why it is not fresh, one sentence each; empty when fresh
 */
public record RungStatus(Rung rung, State state, Optional<Finding> finding, List<String> reasons) {
  /** A rung's state. */
  public enum State {
    FRESH,
    STALE,
    MISSING,
    REFUSED
  }

  public RungStatus {
    reasons = List.copyOf(reasons);
  }
}
