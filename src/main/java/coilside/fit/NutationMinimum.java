package coilside.fit;

import coilside.fit.NotDetermined.Reason;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;

/**
 * One minimum of a nutation fit.
 *
 * @param rate nutation rate, Hz
 * @param uRate its standard uncertainty, Hz
 * @param damping the spread's parameter
 * @param uDamping its standard uncertainty
 * @param amplitude size of the complex amplitude, V
 * @param uAmplitude its standard uncertainty, V
 * @param uAmplitudeGiven the same if all but the amplitude were known, V
 * @param phase its phase, rad
 * @param chiSquare squared residuals over uncertainties
 * @param degreesOfFreedom of the points alone
 * @param spread shape of the damping
 */
record NutationMinimum(
    double rate,
    double uRate,
    double damping,
    double uDamping,
    double amplitude,
    double uAmplitude,
    double uAmplitudeGiven,
    double phase,
    double chiSquare,
    int degreesOfFreedom,
    NutationFit.Spread spread) {
  private static final int REFINED = 3;

  double dampingSignificance() {
    return damping / uDamping;
  }

  private record Candidate(double rate, double damping, double chiSquare) {}

  /** All minima worth having, best first; at least one. */
  static List<NutationMinimum> search(
      List<NutationPoint> points, NutationFit.Options options, NutationFit.Spread spread)
      throws NotDetermined {
    NutationModel model =
        new NutationModel(points, options.recovery(), spread, options.decayRate());
    List<Candidate> candidates = grid(points, options, spread, model);
    List<NutationMinimum> minima = new ArrayList<>();
    NotDetermined failure = null;
    double limit = Double.POSITIVE_INFINITY;
    for (Candidate c : candidates.subList(0, Math.min(REFINED, candidates.size()))) {
      if (c.chiSquare() > limit) {
        break;
      }
      try {
        NutationMinimum m = refine(points, options, spread, model, c);
        minima.add(m);
        // A grid point misses its minimum by about as much everywhere.
        limit =
            Math.min(limit, m.chiSquare() + 30 + 4 * Math.max(0, c.chiSquare() - m.chiSquare()));
      } catch (NotDetermined e) {
        failure = e;
      }
    }
    if (minima.isEmpty()) {
      throw failure == null
          ? NotDetermined.of(Reason.NO_CONVERGENCE, "no minimum was found", "measure more points")
          : failure;
    }
    minima.sort(Comparator.comparingDouble(NutationMinimum::chiSquare));
    return minima;
  }

  /** This minimum refined with another shape of damping. */
  NutationMinimum reshaped(
      List<NutationPoint> points, NutationFit.Options options, NutationFit.Spread other)
      throws NotDetermined {
    // Both shapes damp alike at 180 degrees.
    double factor = Math.max(1e-6, -Math.log(spread.factor(Math.max(damping, 0), Math.PI)));
    double start = other == NutationFit.Spread.EXPONENTIAL ? factor / 2 : 2 * factor / 9.87;
    return refine(
        points,
        options,
        other,
        new NutationModel(points, options.recovery(), other, options.decayRate()),
        new Candidate(rate, start, chiSquare));
  }

  private static List<Candidate> grid(
      List<NutationPoint> points,
      NutationFit.Options options,
      NutationFit.Spread spread,
      NutationModel model) {
    int n = points.size();
    double longest = 0;
    double square = 0;
    for (NutationPoint p : points) {
      if (p.counted()) {
        longest = Math.max(longest, p.pulseSeconds());
        square += (p.re() * p.re() + p.im() * p.im()) / (p.u() * p.u());
      }
    }
    double low = 1 / (4 * options.longest90Seconds());
    double high = 1 / (4 * options.shortest90Seconds());
    int steps =
        (int) Math.max(24, Math.min(4000, Math.ceil((high - low) * longest * 2 * Math.PI / 0.5)));
    double[] dampings = {0, spread == NutationFit.Spread.EXPONENTIAL ? 0.12 : 0.01};
    double[] chi = new double[steps + 1];
    double[] with = new double[steps + 1];
    double[] re = new double[n];
    double[] im = new double[n];
    for (int g = 0; g <= steps; g++) {
      double nu = low + (high - low) * g / steps;
      chi[g] = Double.POSITIVE_INFINITY;
      for (double damping : dampings) {
        model.fill(nu, damping, options.t1Seconds(), re, im);
        double norm = 0;
        double br = 0;
        double bi = 0;
        for (int j = 0; j < n; j++) {
          NutationPoint p = points.get(j);
          if (p.counted()) {
            double w = 1 / (p.u() * p.u());
            norm += w * (re[j] * re[j] + im[j] * im[j]);
            br += w * (re[j] * p.re() + im[j] * p.im());
            bi += w * (re[j] * p.im() - im[j] * p.re());
          }
        }
        double value = square - (br * br + bi * bi) / norm;
        if (value < chi[g]) {
          chi[g] = value;
          with[g] = damping;
        }
      }
    }
    List<Candidate> out = new ArrayList<>();
    for (int g = 0; g <= steps; g++) {
      boolean left = g == 0 || chi[g] <= chi[g - 1];
      boolean right = g == steps || chi[g] < chi[g + 1];
      if (left && right) {
        out.add(new Candidate(low + (high - low) * g / steps, with[g], chi[g]));
      }
    }
    out.sort(Comparator.comparingDouble(Candidate::chiSquare));
    return out;
  }

  private static NutationMinimum refine(
      List<NutationPoint> points,
      NutationFit.Options options,
      NutationFit.Spread spread,
      NutationModel model,
      Candidate start)
      throws NotDetermined {
    int n = points.size();
    int counted = (int) points.stream().filter(NutationPoint::counted).count();
    boolean withT1 = !Double.isNaN(options.t1Seconds()) && options.t1Uncertainty() > 0;
    int p = withT1 ? 5 : 4;
    int rows = 2 * counted + (withT1 ? 2 : 1);
    double[] y = new double[rows];
    double[] u = new double[rows];
    int row = 0;
    for (NutationPoint point : points) {
      if (point.counted()) {
        y[row] = point.re();
        u[row++] = point.u();
        y[row] = point.im();
        u[row++] = point.u();
      }
    }
    y[row] = 0;
    u[row++] = spread.prior();
    if (withT1) {
      y[row] = 0;
      u[row] = options.t1Uncertainty() / options.t1Seconds();
    }
    double[] first = new double[p];
    double[] amplitude = amplitude(points, model, start, options.t1Seconds());
    first[0] = amplitude[0];
    first[1] = amplitude[1];
    first[2] = 1;
    first[3] = start.damping();
    double rate = start.rate();
    double low = 1 / (4 * options.longest90Seconds()) / rate * 0.98;
    double high = 1 / (4 * options.shortest90Seconds()) / rate * 1.02;
    double[][] f = new double[2][n];
    double[][] g = new double[2][n];
    LeastSquares.Solution s =
        LeastSquares.solve(
            (q, values, jacobian) -> {
              double t1 = withT1 ? options.t1Seconds() * Math.exp(q[4]) : options.t1Seconds();
              double h = 1e-6;
              model.fill(rate * q[2], q[3], t1, f[0], f[1]);
              boolean outside = !(q[2] > 0.5 * low && q[2] < 2 * high && Math.abs(q[3]) < 3);
              int r = 0;
              for (int j = 0; j < n; j++) {
                if (points.get(j).counted()) {
                  values[r] = outside ? Double.NaN : q[0] * f[0][j] - q[1] * f[1][j];
                  values[r + 1] = q[0] * f[1][j] + q[1] * f[0][j];
                  jacobian[r][0] = f[0][j];
                  jacobian[r][1] = -f[1][j];
                  jacobian[r + 1][0] = f[1][j];
                  jacobian[r + 1][1] = f[0][j];
                  r += 2;
                }
              }
              for (int k = 2; k < p; k++) {
                model.fill(
                    rate * (q[2] + (k == 2 ? h : 0)),
                    q[3] + (k == 3 ? h : 0),
                    t1 * (k == 4 ? Math.exp(h) : 1),
                    g[0],
                    g[1]);
                r = 0;
                for (int j = 0; j < n; j++) {
                  if (points.get(j).counted()) {
                    double dr = (g[0][j] - f[0][j]) / h;
                    double di = (g[1][j] - f[1][j]) / h;
                    jacobian[r][k] = q[0] * dr - q[1] * di;
                    jacobian[r + 1][k] = q[0] * di + q[1] * dr;
                    r += 2;
                  }
                }
              }
              values[r] = q[3];
              jacobian[r][3] = 1;
              if (withT1) {
                values[r + 1] = q[4];
                jacobian[r + 1][4] = 1;
              }
            },
            y,
            u,
            first,
            1e-9);
    double[] q = s.parameters();
    double size = Math.hypot(q[0], q[1]);
    double c = q[0] / size;
    double d = q[1] / size;
    double[][] h = s.unitCovariance();
    double variance = c * c * h[0][0] + 2 * c * d * h[0][1] + d * d * h[1][1];
    double prior = Math.pow(q[3] / spread.prior(), 2);
    model.fill(rate * q[2], q[3], options.t1Seconds(), f[0], f[1]);
    double norm = 0;
    for (int j = 0; j < n; j++) {
      if (points.get(j).counted()) {
        norm += (f[0][j] * f[0][j] + f[1][j] * f[1][j]) / Math.pow(points.get(j).u(), 2);
      }
    }
    return new NutationMinimum(
        rate * q[2],
        rate * s.u(2),
        q[3],
        s.u(3),
        size,
        Math.sqrt(variance),
        1 / Math.sqrt(norm),
        Math.atan2(q[1], q[0]),
        s.weightedSquares() - prior,
        2 * counted - 4,
        spread);
  }

  private static double[] amplitude(
      List<NutationPoint> points, NutationModel model, Candidate at, double t1) {
    int n = points.size();
    double[] re = new double[n];
    double[] im = new double[n];
    model.fill(at.rate(), at.damping(), t1, re, im);
    double norm = 0;
    double br = 0;
    double bi = 0;
    for (int j = 0; j < n; j++) {
      NutationPoint p = points.get(j);
      if (p.counted()) {
        double w = 1 / (p.u() * p.u());
        norm += w * (re[j] * re[j] + im[j] * im[j]);
        br += w * (re[j] * p.re() + im[j] * p.im());
        bi += w * (re[j] * p.im() - im[j] * p.re());
      }
    }
    return new double[] {br / norm, bi / norm};
  }
}
