package coilside.fit;

import coilside.fit.NotDetermined.Reason;
import coilside.quantity.Measured;
import coilside.quantity.Unit;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Optional;
import java.util.OptionalLong;

/**
 * T1 from inversion recovery or saturation recovery.
 *
 * <p>Inversion: S = M (1 - E) - M eta (1 - W) E, with E = exp(-recovery/T1), W = exp(-rest/T1) for
 * the incomplete rest before the inversion, eta the fitted efficiency of the inversion (1 when
 * perfect). Saturation: S = M (1 - E) + R E with R, what the saturation left, fitted too. The
 * reading pulse is taken to leave nothing along the field. Both amplitudes are linear: a grid over
 * T1 finds the minimum whatever the start, Levenberg-Marquardt refines it.
 */
public final class RecoveryFit {
  private static final double GRID_STEP = 0.04;

  /**
   * Part of the distance between two T1 by which their common 1/e time is uncertain: the amplitudes
   * weigh the components by their FIDs, too, by some percent.
   */
  private static final double WEIGHTS = 0.01;

  /** So much must chi-square fall before two T1 are believed. */
  private static final double CLEARLY = 25;

  private RecoveryFit() {}

  /** How the spins are prepared. */
  public enum Kind {
    INVERSION,
    SATURATION
  }

  /**
   * What is asked.
   *
   * @param kind preparation
   * @param shortestT1Seconds T1 is sought from here, s
   * @param longestT1Seconds to here, s
   * @param largestRelative largest u(T1)/T1 that counts as determined, usually 0.2
   */
  public record Options(
      Kind kind, double shortestT1Seconds, double longestT1Seconds, double largestRelative) {
    public Options {
      if (!(shortestT1Seconds > 0 && longestT1Seconds > shortestT1Seconds)
          || !Double.isFinite(longestT1Seconds)) {
        throw new IllegalArgumentException(
            "T1 is sought from "
                + shortestT1Seconds
                + " s to "
                + longestT1Seconds
                + " s: the range must rise from above 0 s");
      }
    }

    public static Options of(Kind kind, double shortestT1Seconds, double longestT1Seconds) {
      return new Options(kind, shortestT1Seconds, longestT1Seconds, 0.2);
    }
  }

  /**
   * The answer.
   *
   * @param t1 s
   * @param amplitude of the fully recovered signal, V
   * @param preparation inversion: its efficiency eta, 1 when perfect; saturation: the fraction left
   * @param reducedChiSquare squared residuals over uncertainties, by degree of freedom
   * @param degreesOfFreedom of that
   * @param kind preparation
   * @param longestT1Seconds the longest T1 in the sample, for the repetition time, s
   * @param warnings one sentence each
   */
  public record Result(
      Measured t1,
      Measured amplitude,
      Measured preparation,
      double reducedChiSquare,
      int degreesOfFreedom,
      Kind kind,
      double longestT1Seconds,
      List<String> warnings) {
    public Result {
      warnings = List.copyOf(warnings);
    }

    /** Whether the points scatter more about the fit than their uncertainties allow. */
    public boolean scatters() {
      return degreesOfFreedom > 0 && NutationFit.improbable(reducedChiSquare, degreesOfFreedom);
    }

    /** The fitted curve for full rest before each preparation, V. */
    public double[] curve(double[] recoverySeconds) {
      double[] y = new double[recoverySeconds.length];
      for (int i = 0; i < y.length; i++) {
        double e = Math.exp(-recoverySeconds[i] / t1.value());
        double sign = kind == Kind.INVERSION ? -1 : 1;
        y[i] = amplitude.value() * (1 - e + sign * preparation.value() * e);
      }
      return y;
    }
  }

  /**
   * Fits a recovery.
   *
   * @throws NotDetermined when there is no signal, there are too few points, the times do not reach
   *     far enough, or the uncertainty is above the limit
   */
  public static Result fit(List<RecoveryPoint> points, Options options) throws NotDetermined {
    for (RecoveryPoint p : points) {
      if (!p.usable()) {
        throw NotDetermined.of(
            Reason.BAD_INPUT,
            "a recovery point is not usable: " + p,
            "give finite amplitudes, uncertainties above 0 and times of 0 s or more");
      }
    }
    if (points.size() < 4) {
      throw NotDetermined.of(
          Reason.TOO_FEW_POINTS,
          points.size() + " recovery times cannot determine T1, amplitude and preparation",
          "measure at least 4 recovery times");
    }
    return answer(solve(points, options), points.size(), points, options);
  }

  /**
   * Squared residuals over uncertainties by degree of freedom of one T1, determined or not; NaN for
   * fewer than 4 points or where the fit does not settle.
   */
  public static double reducedChiSquare(List<RecoveryPoint> points, Options options) {
    if (points.size() < 4) {
      return Double.NaN;
    }
    try {
      LeastSquares.Solution s = solve(points, options);
      return s.weightedSquares() / Math.max(1, s.degreesOfFreedom());
    } catch (NotDetermined e) {
      return Double.NaN;
    }
  }

  private static LeastSquares.Solution solve(List<RecoveryPoint> points, Options options)
      throws NotDetermined {
    int m = points.size();
    double[] y = new double[m];
    double[] u = new double[m];
    for (int i = 0; i < m; i++) {
      y[i] = points.get(i).amplitude();
      u[i] = points.get(i).u();
    }
    double[] start = grid(points, options);
    return LeastSquares.solve(
        (p, values, jacobian) -> {
          double t1 = Math.exp(p[2]);
          boolean outside =
              !(t1 > options.shortestT1Seconds() / 10 && t1 < options.longestT1Seconds() * 10);
          for (int i = 0; i < m; i++) {
            double[] b = basis(points.get(i), t1, options.kind());
            values[i] = outside ? Double.NaN : p[0] * b[0] + p[1] * b[1];
            jacobian[i][0] = b[0];
            jacobian[i][1] = b[1];
            jacobian[i][2] = p[0] * b[2] + p[1] * b[3];
          }
        },
        y,
        u,
        start);
  }

  private static Result answer(
      LeastSquares.Solution s, int m, List<RecoveryPoint> points, Options options)
      throws NotDetermined {
    double[] p = s.parameters();
    double[][] h = s.unitCovariance();
    double significance = Math.abs(p[0]) / s.u(0);
    double largest = 0;
    for (RecoveryPoint point : points) {
      largest = Math.max(largest, Math.abs(point.amplitude()) / point.u());
    }
    if (largest < 5) {
      throw NotDetermined.of(
          Reason.NO_SIGNAL,
          String.format(Locale.ROOT, "no signal in the recovery: largest %.1f sigma", largest),
          "check resonance and pulse, or take more scans");
    }
    List<String> warnings = new ArrayList<>();
    double inflate = 1;
    int dof = Math.max(1, s.degreesOfFreedom());
    if (NutationFit.improbable(s.weightedSquares() / dof, dof)) {
      inflate = Math.sqrt(s.weightedSquares() / dof);
      warnings.add(
          String.format(
              Locale.ROOT,
              "the points scatter %.1f times more than their uncertainties: widened accordingly;"
                  + " more than one T1 looks like this",
              inflate));
    }
    if (inflate > 1) {
      Optional<Result> two = two(s, points, options);
      if (two.isPresent()) {
        return two.get();
      }
    }
    double t1 = Math.exp(p[2]);
    double relative = inflate * s.u(2);
    if (!(relative <= options.largestRelative()) || significance < 3) {
      double longest = points.stream().mapToDouble(RecoveryPoint::recoverySeconds).max().orElse(0);
      boolean tooShort = longest < t1;
      double factor = relative / options.largestRelative();
      double scans = Math.ceil(m * factor * factor);
      throw new NotDetermined(
          tooShort ? Reason.TOO_SHORT : Reason.TOO_NOISY,
          String.format(
              Locale.ROOT,
              "T1 is not determined: its uncertainty is %.0f %%, the limit %.0f %%",
              100 * relative,
              100 * options.largestRelative()),
          tooShort
              ? String.format(
                  Locale.ROOT,
                  "measure recovery times up to %.3g s and more",
                  3 * Math.max(t1, longest))
              : "measure more scans",
          tooShort || !(scans < 1e9) ? OptionalLong.empty() : OptionalLong.of((long) scans));
    }
    double ratio = p[1] / p[0];
    double sign = options.kind() == Kind.INVERSION ? -1 : 1;
    double uRatio =
        Math.sqrt(Math.max(0, h[1][1] - 2 * ratio * h[0][1] + ratio * ratio * h[0][0]))
            / Math.abs(p[0]);
    Measured preparation = Measured.of(sign * ratio, inflate * uRatio, Unit.ONE);
    if (options.kind() == Kind.INVERSION && sign * ratio < 0.7) {
      warnings.add(
          String.format(
              Locale.ROOT,
              "the inversion reaches only %.2f of full inversion: check the 180-degree pulse",
              sign * ratio));
    }
    return new Result(
        Measured.of(t1, relative * t1, Unit.SECOND),
        Measured.of(p[0], inflate * s.u(0), Unit.VOLT),
        preparation,
        s.weightedSquares() / dof,
        s.degreesOfFreedom(),
        options.kind(),
        Math.exp(p[2]),
        warnings);
  }

  /** Two T1 where they leave noise only and the 1/e time is determined. */
  private static Optional<Result> two(
      LeastSquares.Solution one, List<RecoveryPoint> points, Options options) {
    Optional<TwoRecoveries> fit = TwoRecoveries.fit(points, options.kind(), one.parameters());
    if (fit.isEmpty()) {
      return Optional.empty();
    }
    TwoRecoveries t = fit.get();
    double reduced = t.weightedSquares() / t.degreesOfFreedom();
    if (one.weightedSquares() - t.weightedSquares() < CLEARLY
        || NutationFit.improbable(reduced, t.degreesOfFreedom())
        || t.oneOverE().relative() > options.largestRelative()) {
      return Optional.empty();
    }
    double weights = WEIGHTS * (t.longer().value() - t.shorter().value());
    return Optional.of(
        new Result(
            Measured.of(t.oneOverE().value(), Math.hypot(t.oneOverE().u(), weights), Unit.SECOND),
            t.amplitude(),
            t.preparation(),
            reduced,
            t.degreesOfFreedom(),
            options.kind(),
            t.longer().value(),
            List.of(
                String.format(
                    Locale.ROOT,
                    "the sample recovers with two T1, %.3g s (%.0f %% of the signal) and %.3g s:"
                        + " the T1 given is the time in which what is missing falls to 1/e"
                        + " (chi-square lower by %.0f than with one)",
                    t.longer().value(),
                    100 * t.longerFraction().value(),
                    t.shorter().value(),
                    one.weightedSquares() - t.weightedSquares()))));
  }

  /** The two linear terms and their derivatives with respect to ln T1. */
  static double[] basis(RecoveryPoint p, double t1, Kind kind) {
    double x = p.recoverySeconds() / t1;
    double e = Math.exp(-x);
    if (kind == Kind.SATURATION) {
      return new double[] {1 - e, e, -x * e, x * e};
    }
    if (Double.isInfinite(p.restSeconds())) {
      return new double[] {1 - e, e, -x * e, x * e};
    }
    double w = p.restSeconds() / t1;
    double f = Math.exp(-w);
    return new double[] {1 - e, e * (1 - f), -x * e, x * e * (1 - f) - w * f * e};
  }

  private static double[] grid(List<RecoveryPoint> points, Options options) {
    double low = Math.log(options.shortestT1Seconds());
    double high = Math.log(options.longestT1Seconds());
    int steps = (int) Math.ceil((high - low) / GRID_STEP);
    double[] best = {0, 0, low};
    double least = Double.POSITIVE_INFINITY;
    for (int g = 0; g <= steps; g++) {
      double log = low + (high - low) * g / steps;
      double[] c = linear(points, Math.exp(log), options.kind());
      if (c[2] < least) {
        least = c[2];
        best = new double[] {c[0], c[1], log};
      }
    }
    return best;
  }

  /** Both amplitudes and chi-square at this T1. */
  static double[] linear(List<RecoveryPoint> points, double t1, Kind kind) {
    double a = 0;
    double b = 0;
    double d = 0;
    double f = 0;
    double g = 0;
    double square = 0;
    for (RecoveryPoint p : points) {
      double[] v = basis(p, t1, kind);
      double w = 1 / (p.u() * p.u());
      a += w * v[0] * v[0];
      b += w * v[0] * v[1];
      d += w * v[1] * v[1];
      f += w * v[0] * p.amplitude();
      g += w * v[1] * p.amplitude();
      square += w * p.amplitude() * p.amplitude();
    }
    a *= 1 + 1e-9;
    d *= 1 + 1e-9;
    double det = a * d - b * b;
    double x = (d * f - b * g) / det;
    double y = (a * g - b * f) / det;
    return new double[] {x, y, square - x * f - y * g};
  }
}
