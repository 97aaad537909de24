package coilside.fit;

import java.util.OptionalLong;

/**
 * The samples do not determine what was asked for: a finding, not a fault. Says why and what it
 * would take.
 */
public final class NotDetermined extends Exception {
  private static final long serialVersionUID = 1L;

  /** Why: a closed set, so that a diagnosis can be built on it. */
  public enum Reason {
    /** Nothing stands out of the noise. */
    NO_SIGNAL,
    /** There is a signal, but too weak for an uncertainty below the limit: more scans would do. */
    TOO_NOISY,
    /** Record, widths or recovery times do not reach far enough to tell. */
    TOO_SHORT,
    /** Too few points for the number of unknowns. */
    TOO_FEW_POINTS,
    /** More than one answer fits the points. */
    AMBIGUOUS,
    /** Samples or points that are not finite numbers, or uncertainties that are not above zero. */
    BAD_INPUT,
    /** The search did not settle. */
    NO_CONVERGENCE
  }

  private final Reason reason;
  private final String remedy;
  private final transient OptionalLong scansNeeded;

  /**
   * @param reason the kind
   * @param what what is not determined and by what figure, one sentence
   * @param remedy what it would take, one sentence
   * @param scansNeeded how many times the scans spent would do, where more scans help
   */
  public NotDetermined(Reason reason, String what, String remedy, OptionalLong scansNeeded) {
    super(what);
    this.reason = reason;
    this.remedy = remedy;
    this.scansNeeded = scansNeeded;
  }

  static NotDetermined of(Reason reason, String what, String remedy) {
    return new NotDetermined(reason, what, remedy, OptionalLong.empty());
  }

  public Reason reason() {
    return reason;
  }

  /** What it would take, one sentence. */
  public String remedy() {
    return remedy;
  }

  /** Scans in all that would bring the uncertainty to the limit; empty where scans do not help. */
  public OptionalLong scansNeeded() {
    return scansNeeded == null ? OptionalLong.empty() : scansNeeded;
  }
}
