package coilside.bench;

import coilside.quantity.Measured;
import java.time.Duration;
import java.time.Instant;
import java.util.List;
import java.util.Optional;

/**
 * How fast a value moves, learned from earlier findings: the weighted straight line through its
 * history.
 *
 * @param perSecond slope, unit of the value per second
 * @param u standard uncertainty of the slope
 * @param findings how many findings it was learned from
 * @param spanSeconds from the first to the last of them, s
 */
record Drift(double perSecond, double u, int findings, double spanSeconds) {
  /** The fewest findings a slope is learned from. */
  static final int ENOUGH = 3;

  /**
   * How far beyond its span a straight line is trusted: a few spans, since a magnet's drift turns
   * with the day (common practice, no source).
   */
  static final double FAR = 4;

  /** Findings older than this before the newest no longer say how the magnet drifts today. */
  static final Duration MEMORY = Duration.ofHours(12);

  /**
   * The drift of one value over the newest findings; empty with fewer than {@link #ENOUGH}, or when
   * they lie closer together than a minute.
   */
  static Optional<Drift> learn(List<Finding> history, String valueName) {
    List<Finding> good =
        history.stream()
            .filter(f -> !f.refused() && f.values().containsKey(valueName))
            .filter(f -> f.value(valueName).hasUncertainty())
            .toList();
    if (good.isEmpty()) {
      return Optional.empty();
    }
    Instant newest = good.get(good.size() - 1).started();
    List<Finding> recent =
        good.stream().filter(f -> f.started().isAfter(newest.minus(MEMORY))).toList();
    if (recent.size() < ENOUGH
        || Duration.between(recent.get(0).started(), newest).compareTo(Duration.ofMinutes(1)) < 0) {
      return Optional.empty();
    }
    return Optional.of(line(recent, valueName, newest));
  }

  private static Drift line(List<Finding> findings, String valueName, Instant origin) {
    double sw = 0;
    double st = 0;
    double sy = 0;
    double reference = findings.get(0).value(valueName).value();
    for (Finding f : findings) {
      double w = weight(f.value(valueName));
      sw += w;
      st += w * seconds(origin, f);
      sy += w * (f.value(valueName).value() - reference);
    }
    double meanT = st / sw;
    double meanY = sy / sw;
    double stt = 0;
    double sty = 0;
    for (Finding f : findings) {
      double w = weight(f.value(valueName));
      double t = seconds(origin, f) - meanT;
      stt += w * t * t;
      sty += w * t * (f.value(valueName).value() - reference - meanY);
    }
    double slope = sty / stt;
    double chi = 0;
    for (Finding f : findings) {
      double r =
          f.value(valueName).value() - reference - meanY - slope * (seconds(origin, f) - meanT);
      chi += weight(f.value(valueName)) * r * r;
    }
    double scatter = Math.max(1, chi / Math.max(1, findings.size() - 2));
    return new Drift(
        slope, Math.sqrt(scatter / stt), findings.size(), -seconds(origin, findings.get(0)));
  }

  private static double weight(Measured m) {
    double u = Math.max(m.u(), 1e-12 * Math.abs(m.value()));
    return 1 / (u * u);
  }

  private static double seconds(Instant origin, Finding f) {
    return Duration.between(origin, f.started()).toNanos() * 1e-9;
  }

  /** How far the value may have moved after this many seconds: slope plus its uncertainty. */
  double reach(double seconds) {
    return seconds * (Math.abs(perSecond) + u);
  }
}
