package coilside.bench;

/**
 * How a log run ended.
 *
 * @param run identity of the run
 * @param why which kind of end
 * @param reason in words, what to do included; empty when it ended as planned
 * @param rows rows with values
 * @param gaps rows without
 */
public record LogEnd(String run, Why why, String reason, long rows, long gaps) {
  /** The kinds of end. */
  public enum Why {
    /** The count or the time is reached. */
    PLANNED,
    /** The operator or the end of the program stopped it. */
    STOPPED,
    /** A value went out of bounds. */
    RULE,
    /** The resonance was lost and not found again. */
    RESONANCE_LOST,
    /** The ladder does not stand as far as a log needs. */
    NOT_READY,
    /** The guard refused a shot. */
    LIMIT,
    /** The board refused again and again. */
    BOARD_REFUSED
  }

  /** True when nothing cut it short but the operator's own wish. */
  public boolean asWished() {
    return why == Why.PLANNED || why == Why.STOPPED;
  }
}
