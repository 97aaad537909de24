package coilside.bench;

/** Reads a kept capture again, the way it was read when it was taken. */
public final class Analysis {
  private Analysis() {}

  /** A capture from which nothing can be read, with the reason. */
  public static final class Refused extends Exception {
    private static final long serialVersionUID = 1L;
    private final transient Refusal refusal;

    Refused(Refusal refusal) {
      super(refusal.reason());
      this.refusal = refusal;
    }

    public Refusal refusal() {
      return refusal;
    }
  }

  /**
   * The values, warnings and picture of a capture.
   *
   * @throws Refused when the samples do not determine them
   * @throws IllegalArgumentException when the capture lacks what its purpose needs
   */
  public static Reading of(Capture capture) throws Refused {
    try {
      return method(capture.purpose()).read(capture);
    } catch (NotMeasurable e) {
      throw new Refused(e.refusal());
    }
  }

  private static Method method(String purpose) {
    return purpose.equals("fid") || purpose.equals("log")
        ? new DecayMethod()
        : Methods.of(Rung.ofId(purpose));
  }
}
