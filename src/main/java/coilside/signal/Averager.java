package coilside.signal;

/**
 * A sum of scans that also knows their scatter: scan by scan, each turned back by its own phase.
 *
 * <p>Not safe for use from several threads at once.
 */
public final class Averager {
  private final int memoryScans;
  private double[] re;
  private double[] im;
  private double[] squares;
  private Fid first;
  private int count;

  private Averager(int memoryScans) {
    this.memoryScans = memoryScans;
  }

  /** An average in which every scan counts the same. */
  public Averager() {
    this(Integer.MAX_VALUE);
  }

  /**
   * A running average that forgets: a scan's weight falls by 1 - 1/memory with each one after it.
   * Its {@link #scatterSigma()} is that of the weighted scans.
   *
   * @param memoryScans how many scans it remembers, 1 for only the last
   */
  public static Averager rolling(int memoryScans) {
    if (memoryScans < 1) {
      throw new IllegalArgumentException(
          "a memory of " + memoryScans + " scans must be at least 1");
    }
    return new Averager(memoryScans);
  }

  /** Adds a scan as it is. */
  public void add(Fid fid) {
    add(fid, 0);
  }

  /**
   * Adds a scan times exp(-i phase): the receiver side of a phase cycle done here. A phase of pi
   * subtracts it.
   *
   * @throws IllegalArgumentException when points or dwell time differ from the scans before, or a
   *     sample is not a finite number
   */
  public void add(Fid fid, double phaseRadians) {
    if (first == null) {
      first = fid;
      re = new double[fid.points()];
      im = new double[fid.points()];
      squares = new double[fid.points()];
    } else if (fid.points() != first.points() || fid.dwellSeconds() != first.dwellSeconds()) {
      throw new IllegalArgumentException(
          "a scan of "
              + fid.points()
              + " points every "
              + fid.dwellSeconds()
              + " s cannot be added to scans of "
              + first.points()
              + " points every "
              + first.dwellSeconds()
              + " s");
    }
    double sum = 0;
    for (int k = 0; k < re.length; k++) {
      sum += fid.re(k) + fid.im(k);
    }
    if (!Double.isFinite(sum)) {
      throw new IllegalArgumentException("the scan holds samples that are not finite numbers");
    }
    count++;
    double weight = 1.0 / Math.min(count, memoryScans);
    double c = Math.cos(phaseRadians);
    double s = Math.sin(phaseRadians);
    for (int k = 0; k < re.length; k++) {
      double dr = fid.re(k) * c + fid.im(k) * s - re[k];
      double di = fid.im(k) * c - fid.re(k) * s - im[k];
      re[k] += weight * dr;
      im[k] += weight * di;
      squares[k] = (1 - weight) * (squares[k] + weight * (dr * dr + di * di));
    }
  }

  /** Scans added so far. */
  public int count() {
    return count;
  }

  /** The average; carrier and start time are those of the first scan. */
  public Fid mean() {
    if (count == 0) {
      throw new IllegalStateException("no scan has been added yet");
    }
    return new Fid(
        re.clone(), im.clone(), first.dwellSeconds(), first.startSeconds(), first.carrierHertz());
  }

  /**
   * Noise of one scan, one real channel, one sample, from how the scans differ among themselves, V.
   * Signal that changes from scan to scan (drift, another pulse width) counts as noise here. NaN
   * below two scans.
   */
  public double scatterSigma() {
    if (count < 2) {
      return Double.NaN;
    }
    double sum = 0;
    for (double s : squares) {
      sum += s;
    }
    // Scans that carry the weight: of geometric weights with sum 1, one over their squares' sum.
    double n = count <= memoryScans ? count : 2.0 * memoryScans - 1;
    return n > 1 ? Math.sqrt(sum / (2.0 * re.length) * n / (n - 1)) : Double.NaN;
  }

  /** Forgets all scans. */
  public void clear() {
    first = null;
    count = 0;
  }
}
