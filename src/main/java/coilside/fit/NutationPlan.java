package coilside.fit;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;

/**
 * Where to measure a nutation curve next, and when to stop.
 *
 * <p>The points so far give a posterior over a grid of 90-degree pulses and dampings, the amplitude
 * integrated out. While its standard deviation is above 6 %, the next pulse is the one whose signal
 * it predicts worst; from then on the pulse sits at the 360-degree null, where the curve tells most
 * about the pulse and nothing about amplitude and damping, with every eighth at 90 degrees. Where
 * damping or the longest pulse allowed forbid 360 degrees, at the 180-degree null with every fourth
 * at 90.
 */
public final class NutationPlan {
  private static final double CLOSE_ENOUGH = 0.06;
  private static final int FEWEST_POINTS = 5;
  private static final int CANDIDATES = 48;

  private final NutationFit.Options options;
  private final double target;
  private final double shortestPulse;
  private final double longestPulse;

  /**
   * @param options range of 90-degree pulses, T1, spread
   * @param target wanted relative standard uncertainty of the 90-degree pulse
   * @param shortestPulseSeconds shortest pulse that may be played, s
   * @param longestPulseSeconds longest pulse that may be played, s
   */
  public NutationPlan(
      NutationFit.Options options,
      double target,
      double shortestPulseSeconds,
      double longestPulseSeconds) {
    if (!(target > 0)
        || !(shortestPulseSeconds > 0 && longestPulseSeconds > shortestPulseSeconds)) {
      throw new IllegalArgumentException(
          "a plan for "
              + target
              + " with pulses from "
              + shortestPulseSeconds
              + " s to "
              + longestPulseSeconds
              + " s: the target must be above 0 and the pulses rise from above 0 s");
    }
    this.options = options;
    this.target = target;
    this.shortestPulse = shortestPulseSeconds;
    this.longestPulse = longestPulseSeconds;
  }

  /**
   * What to do next.
   *
   * @param enough whether the target is met
   * @param pulseSeconds the width to measure next (also given when enough)
   * @param why in a few words
   * @param result the fit so far, once there is one
   * @param relative relative uncertainty of the 90-degree pulse as the posterior has it
   */
  public record Advice(
      boolean enough,
      double pulseSeconds,
      String why,
      Optional<NutationResult> result,
      double relative) {}

  /** Advice from the points so far, in the order played. */
  public Advice next(List<NutationPoint> points) {
    List<NutationPoint> counted = points.stream().filter(NutationPoint::counted).toList();
    double middle = Math.sqrt(options.shortest90Seconds() * options.longest90Seconds());
    if (counted.isEmpty()) {
      return new Advice(
          false, allowed(middle), "the middle of the range", Optional.empty(), Double.NaN);
    }
    NutationPosterior posterior = new NutationPosterior(points, options);
    Optional<NutationResult> fit = Optional.empty();
    try {
      fit = Optional.of(NutationFit.fit(points, options));
    } catch (NotDetermined e) {
      // Not yet: the posterior still says where to measure.
    }
    double spread = posterior.relativeDeviation();
    if (fit.isPresent()) {
      double t90 = fit.get().pulse90().value();
      double relative = fit.get().pulse90().relative();
      boolean alone = posterior.outside(t90, 0.01 + 5 * relative) < 1e-3;
      if (alone && counted.size() >= FEWEST_POINTS && relative <= target && confirmed(points)) {
        return new Advice(true, allowed(4 * t90), "the target is met", fit, relative);
      }
      if (alone && relative < CLOSE_ENOUGH && spread < 2 * CLOSE_ENOUGH) {
        return atNull(counted, fit, t90, relative);
      }
    }
    double width = posterior.leastPredictable(candidates(posterior.upper90()));
    return new Advice(false, width, "the pulse whose signal is least predictable", fit, spread);
  }

  /**
   * Whether the target was met without the last scan already. Stopping at the first scan that
   * claims it would favour runs whose uncertainty came out small by chance.
   */
  private boolean confirmed(List<NutationPoint> points) {
    try {
      return NutationFit.fit(points.subList(0, points.size() - 1), options).pulse90().relative()
          <= target;
    } catch (NotDetermined e) {
      return false;
    }
  }

  private Advice atNull(
      List<NutationPoint> counted, Optional<NutationResult> fit, double t90, double relative) {
    NutationResult r = fit.orElseThrow();
    double exponentAt360 =
        -Math.log(
            r.spreadShape().factor(r.spreadShape().parameter(r.spread().value()), 2 * Math.PI));
    double exponentAt180 =
        -Math.log(r.spreadShape().factor(r.spreadShape().parameter(r.spread().value()), Math.PI));
    boolean far =
        4 * t90 <= longestPulse && 2 * Math.exp(-exponentAt360) > Math.exp(-exponentAt180);
    int every = far ? 8 : 4;
    long near90 = counted.stream().filter(p -> Math.abs(p.pulseSeconds() / t90 - 1) < 0.25).count();
    if (near90 * every < counted.size()) {
      return new Advice(false, allowed(t90), "the amplitude, at 90 degrees", fit, relative);
    }
    double width = allowed((far ? 4 : 2) * t90);
    return new Advice(
        false, width, far ? "the 360-degree null" : "the 180-degree null", fit, relative);
  }

  private double allowed(double width) {
    return Math.max(shortestPulse, Math.min(longestPulse, width));
  }

  private List<Double> candidates(double upper90) {
    double low = Math.max(shortestPulse, options.shortest90Seconds() / 2);
    double high = Math.min(longestPulse, 4 * upper90);
    List<Double> out = new ArrayList<>();
    for (int i = 0; i < CANDIDATES; i++) {
      out.add(low * Math.pow(high / low, i / (CANDIDATES - 1.0)));
    }
    return out;
  }
}
