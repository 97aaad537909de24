package coilside.bench;

import java.util.List;

/** A rung cannot be measured as the bench stands; the refusal says why and what to look at. */
final class NotMeasurable extends Exception {
  private static final long serialVersionUID = 1L;

  private final transient Refusal refusal;

  NotMeasurable(String reason, List<String> likelyCauses) {
    super(reason);
    this.refusal = new Refusal(reason, likelyCauses);
  }

  Refusal refusal() {
    return refusal;
  }
}
