package coilside.fit;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;

/**
 * Where to measure a recovery next, and when to stop.
 *
 * <p>The points so far give a posterior over a logarithmic grid of T1, both amplitudes integrated
 * out. While it is wider than 15 %, the next time is the one whose signal it predicts worst for the
 * time it costs; from then on the one that shrinks the uncertainty of T1 most for the time it
 * costs.
 */
public final class RecoveryPlan {
  private static final double CLOSE_ENOUGH = 0.15;
  private static final int FEWEST_POINTS = 6;
  private static final int NODES = 161;
  private static final int CANDIDATES = 40;

  private final RecoveryFit.Options options;
  private final double target;
  private final double amplitude;
  private final double restInT1;

  /**
   * @param options preparation and range of T1
   * @param target wanted relative standard uncertainty of T1
   * @param expectedAmplitude of the fully recovered signal, from nutation, V; NaN when unknown
   * @param restInT1 rest before an inversion in units of the T1 believed, e.g. 3 (what is missing
   *     to full recovery is in the model)
   */
  public RecoveryPlan(
      RecoveryFit.Options options, double target, double expectedAmplitude, double restInT1) {
    if (!(target > 0) || !(restInT1 >= 1)) {
      throw new IllegalArgumentException(
          "a plan for "
              + target
              + " with a rest of "
              + restInT1
              + " T1: the target must be above 0 and the rest at least 1 T1");
    }
    this.options = options;
    this.target = target;
    this.amplitude = expectedAmplitude;
    this.restInT1 = restInT1;
  }

  /**
   * What to do next.
   *
   * @param enough whether the target is met
   * @param recoverySeconds the recovery time to measure next
   * @param restSeconds the rest before the preparation; 0 for saturation recovery
   * @param why in a few words
   * @param result the fit so far, once there is one
   */
  public record Advice(
      boolean enough,
      double recoverySeconds,
      double restSeconds,
      String why,
      Optional<RecoveryFit.Result> result) {}

  /** Advice from the points so far, where any recovery time can be played. */
  public Advice next(List<RecoveryPoint> points) {
    return next(points, 0);
  }

  /**
   * Advice from the points so far.
   *
   * @param shortestSeconds the shortest recovery time that can be played; a plan that asked for
   *     less would be given this one over and over and learn nothing
   */
  public Advice next(List<RecoveryPoint> points, double shortestSeconds) {
    Optional<RecoveryFit.Result> fit = Optional.empty();
    try {
      fit = Optional.of(RecoveryFit.fit(points, options));
    } catch (NotDetermined e) {
      // Not yet: the posterior still says where to measure.
    }
    Posterior posterior = new Posterior(points);
    double believed =
        fit.map(r -> r.t1().value())
            .orElse(Math.exp(posterior.mean + Math.min(1, posterior.deviation)));
    believed = Math.min(options.longestT1Seconds(), believed);
    double rest = options.kind() == RecoveryFit.Kind.INVERSION ? restInT1 * believed : 0;
    if (fit.isPresent() && points.size() >= FEWEST_POINTS && fit.get().t1().relative() <= target) {
      return new Advice(true, believed, rest, "the target is met", fit);
    }
    List<Double> times = new ArrayList<>();
    double low = Math.max(options.shortestT1Seconds() / 20, shortestSeconds);
    double high = Math.max(2 * low, Math.min(4 * options.longestT1Seconds(), 6 * believed));
    for (int i = 0; i < CANDIDATES; i++) {
      times.add(low * Math.pow(high / low, i / (CANDIDATES - 1.0)));
    }
    boolean close = fit.isPresent() && posterior.deviation < CLOSE_ENOUGH;
    double best = times.get(0);
    double most = Double.NEGATIVE_INFINITY;
    for (double time : times) {
      double cost = Math.sqrt(time + rest + 0.5 * believed);
      double gain =
          close
              ? informative(points, fit.get().t1().value(), time, rest) / (cost * cost)
              : posterior.predictedVariance(time, rest) / cost;
      if (gain > most) {
        most = gain;
        best = time;
      }
    }
    return new Advice(
        false,
        best,
        rest,
        close
            ? "the recovery time that tells most for its length"
            : "the recovery time whose signal is least predictable",
        fit);
  }

  /** How much 1/var(ln T1) grows with one more point at this time. */
  private double informative(List<RecoveryPoint> points, double t1, double time, double rest) {
    double[] c = RecoveryFit.linear(points, t1, options.kind());
    double u = 0;
    for (RecoveryPoint p : points) {
      u += p.u() / points.size();
    }
    double[][] info = new double[3][3];
    for (RecoveryPoint p : points) {
      add(info, p, t1, c, p.u());
    }
    double before = information(info);
    add(info, new RecoveryPoint(time, 0, u, rest), t1, c, u);
    return information(info) - before;
  }

  private void add(double[][] info, RecoveryPoint p, double t1, double[] c, double u) {
    double[] b = RecoveryFit.basis(p, t1, options.kind());
    double[] g = {b[0], b[1], c[0] * b[2] + c[1] * b[3]};
    for (int i = 0; i < 3; i++) {
      for (int j = 0; j < 3; j++) {
        info[i][j] += g[i] * g[j] / (u * u);
      }
    }
  }

  /** What is left for ln T1 once the amplitudes are unknown: a Schur complement. */
  private static double information(double[][] f) {
    double det = f[0][0] * f[1][1] * (1 + 1e-9) - f[0][1] * f[0][1];
    double a = f[0][2];
    double b = f[1][2];
    return f[2][2] - (f[1][1] * a * a - 2 * f[0][1] * a * b + f[0][0] * b * b) / det;
  }

  /** Posterior over ln T1. */
  private final class Posterior {
    private final double[] weight = new double[NODES];
    private final double[][] mean2 = new double[NODES][2];
    private final double[][] cov = new double[NODES][3];
    final double mean;
    final double deviation;

    Posterior(List<RecoveryPoint> points) {
      double scale = Double.isNaN(amplitude) ? 0 : Math.abs(amplitude);
      for (RecoveryPoint p : points) {
        scale = Math.max(scale, Math.abs(p.amplitude()));
      }
      scale = scale > 0 ? scale : 1;
      boolean known = !Double.isNaN(amplitude);
      double sign = options.kind() == RecoveryFit.Kind.INVERSION ? -1 : 0;
      double m0 = known ? amplitude : 0;
      double p0 = 1 / Math.pow((known ? 0.3 : 3) * scale, 2);
      double m1 = known ? sign * amplitude : 0;
      double p1 = 1 / Math.pow((known ? 0.4 : 3) * scale, 2);
      double top = Double.NEGATIVE_INFINITY;
      for (int g = 0; g < NODES; g++) {
        double a = p0;
        double b = 0;
        double d = p1;
        double f = p0 * m0;
        double h = p1 * m1;
        for (RecoveryPoint p : points) {
          double[] v = RecoveryFit.basis(p, t1(g), options.kind());
          double w = 1 / (p.u() * p.u());
          a += w * v[0] * v[0];
          b += w * v[0] * v[1];
          d += w * v[1] * v[1];
          f += w * v[0] * p.amplitude();
          h += w * v[1] * p.amplitude();
        }
        double det = a * d - b * b;
        double x = (d * f - b * h) / det;
        double y = (a * h - b * f) / det;
        mean2[g] = new double[] {x, y};
        cov[g] = new double[] {d / det, -b / det, a / det};
        weight[g] = 0.5 * (x * f + y * h) - 0.5 * Math.log(det);
        top = Math.max(top, weight[g]);
      }
      double sum = 0;
      for (int g = 0; g < NODES; g++) {
        weight[g] = Math.exp(weight[g] - top);
        sum += weight[g];
      }
      double first = 0;
      double second = 0;
      for (int g = 0; g < NODES; g++) {
        weight[g] /= sum;
        double x = Math.log(t1(g));
        first += weight[g] * x;
        second += weight[g] * x * x;
      }
      mean = first;
      deviation = Math.sqrt(Math.max(0, second - first * first));
    }

    private double t1(int g) {
      return options.shortestT1Seconds()
          * Math.pow(options.longestT1Seconds() / options.shortestT1Seconds(), g / (NODES - 1.0));
    }

    double predictedVariance(double time, double rest) {
      RecoveryPoint p = new RecoveryPoint(time, 0, 1, rest);
      double first = 0;
      double second = 0;
      for (int g = 0; g < NODES; g++) {
        double[] v = RecoveryFit.basis(p, t1(g), options.kind());
        double s = mean2[g][0] * v[0] + mean2[g][1] * v[1];
        double c = cov[g][0] * v[0] * v[0] + 2 * cov[g][1] * v[0] * v[1] + cov[g][2] * v[1] * v[1];
        first += weight[g] * s;
        second += weight[g] * (s * s + c);
      }
      return second - first * first;
    }
  }
}
