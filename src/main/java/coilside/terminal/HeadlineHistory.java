package coilside.terminal;

import coilside.quantity.Measured;
import java.util.Optional;

/** The recent values of one headline number, its trend, and the best seen since it was cleared. */
final class HeadlineHistory {
  private static final int KEPT = 240;
  private final Headline headline;
  private final double[] recent = new double[KEPT];
  private int count;
  private Measured latest;
  private Measured best;
  private Measured announced;
  private long bests;

  HeadlineHistory(Headline headline) {
    this.headline = headline;
  }

  HeadlineHistory copy() {
    HeadlineHistory c = new HeadlineHistory(headline);
    System.arraycopy(recent, 0, c.recent, 0, KEPT);
    c.count = count;
    c.latest = latest;
    c.best = best;
    c.announced = announced;
    c.bests = bests;
    return c;
  }

  void add(Measured m) {
    recent[count % KEPT] = m.value();
    count++;
    latest = m;
    if (headline.better == 0) {
      return;
    }
    if (best == null || gain(m, best) > 0) {
      best = m;
    }
    double noise = m.hasUncertainty() ? m.u() : 0;
    if (announced == null || gain(m, announced) > noise) {
      announced = m;
      bests++;
    }
  }

  private double gain(Measured now, Measured before) {
    return (now.value() - before.value()) * headline.better;
  }

  Optional<Measured> latest() {
    return Optional.ofNullable(latest);
  }

  Optional<Measured> best() {
    return Optional.ofNullable(best);
  }

  /** How many times a best beat the last such by more than its noise; the first value counts. */
  long bests() {
    return bests;
  }

  /** The last values, oldest first. */
  double[] values() {
    int n = Math.min(count, KEPT);
    double[] out = new double[n];
    for (int i = 0; i < n; i++) {
      out[i] = recent[(count - n + i) % KEPT];
    }
    return out;
  }

  /**
   * +1 rising, -1 falling, 0 steady: the last three against the three before, beyond their noise.
   */
  int trend() {
    double[] v = values();
    if (v.length < 6) {
      return 0;
    }
    double now = 0;
    double before = 0;
    for (int i = 0; i < 3; i++) {
      now += v[v.length - 1 - i] / 3;
      before += v[v.length - 4 - i] / 3;
    }
    double noise = latest == null || Double.isNaN(latest.u()) ? 0 : latest.u();
    double change = now - before;
    return Math.abs(change) <= 1.63 * noise ? 0 : change > 0 ? 1 : -1;
  }
}
