package coilside.bench;

import coilside.shot.Shot;
import coilside.signal.Averager;
import coilside.signal.Fid;
import coilside.signal.Scan;
import java.util.ArrayList;
import java.util.List;

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

  /**
   * The average of a capture's scans, each turned back by the phase of its first pulse: the
   * receiver side of the phase cycle. Receive-only scans are left out.
   *
   * @throws IllegalArgumentException when the scans differ in points or dwell time, or none has a
   *     pulse
   */
  public static Fid average(Capture capture) {
    List<Shot> shots = new ArrayList<>();
    List<Scan> scans = new ArrayList<>();
    for (int i = 0; i < capture.shots().size(); i++) {
      if (!capture.shots().get(i).receiveOnly()) {
        shots.add(capture.shots().get(i));
        scans.add(capture.scans().get(i));
      }
    }
    if (scans.isEmpty()) {
      throw new IllegalArgumentException("the capture holds only receive-only scans");
    }
    return DecayMethod.mean(shots, scans);
  }

  /** The plain mean of the scans' first windows: what there is to see of receive-only scans. */
  public static Fid plainMean(List<Scan> scans) {
    Averager average = new Averager();
    scans.forEach(s -> average.add(s.fid()));
    return average.mean();
  }

  private static Method method(String purpose) {
    return purpose.equals("fid") || purpose.equals("log")
        ? new DecayMethod()
        : Methods.of(Rung.ofId(purpose));
  }
}
