package coilside.fit;

import coilside.quantity.Measured;
import coilside.quantity.Unit;
import java.util.List;
import java.util.Optional;

/**
 * A recovery with two T1, fitted once one T1 has left residuals that are not noise: both components
 * share the preparation, S = M sum f_i [(1 - E_i) - eta (1 - W_i) E_i] (saturation: + r E_i in
 * place of the second term), E_i = exp(-recovery/T1_i), W_i = exp(-rest/T1_i).
 *
 * @param oneOverE time in which what is missing to full recovery has fallen to 1/e, s
 * @param longer the longer T1, s
 * @param shorter the shorter T1, s
 * @param longerFraction part of the signal that has the longer T1
 * @param amplitude of the fully recovered signal, V
 * @param preparation as in {@link RecoveryFit.Result}
 * @param weightedSquares squared residuals over uncertainties
 * @param degreesOfFreedom of that
 */
record TwoRecoveries(
    Measured oneOverE,
    Measured longer,
    Measured shorter,
    Measured longerFraction,
    Measured amplitude,
    Measured preparation,
    double weightedSquares,
    int degreesOfFreedom) {
  private static final int PARAMETERS = 5;
  private static final double STEP = 1e-6;

  /** Empty where the points do not carry five parameters or the fit does not settle. */
  static Optional<TwoRecoveries> fit(
      List<RecoveryPoint> points, RecoveryFit.Kind kind, double[] one) {
    int m = points.size();
    if (m < PARAMETERS + 3) {
      return Optional.empty();
    }
    double[] y = new double[m];
    double[] u = new double[m];
    for (int i = 0; i < m; i++) {
      y[i] = points.get(i).amplitude();
      u[i] = points.get(i).u();
    }
    LeastSquares.Solution best = null;
    for (double apart : new double[] {1.5, 2, 3}) {
      double[] start = {one[0], one[1] / one[0], 0, one[2] + Math.log(apart) / 2, Math.log(apart)};
      try {
        LeastSquares.Solution s =
            LeastSquares.solve(
                (p, values, jacobian) -> evaluate(points, kind, p, values, jacobian), y, u, start);
        if (best == null || s.weightedSquares() < best.weightedSquares()) {
          best = s;
        }
      } catch (NotDetermined e) {
        // Another start may do.
      }
    }
    return best == null ? Optional.empty() : answer(best, kind);
  }

  private static void evaluate(
      List<RecoveryPoint> points,
      RecoveryFit.Kind kind,
      double[] p,
      double[] values,
      double[][] jacobian) {
    boolean outside = Math.abs(p[2]) > 8 || Math.abs(p[4]) > 5;
    for (int i = 0; i < values.length; i++) {
      RecoveryPoint point = points.get(i);
      values[i] = outside ? Double.NaN : signal(point, kind, p);
      for (int k = 0; k < PARAMETERS; k++) {
        double[] q = p.clone();
        double h = STEP * (k == 0 ? Math.abs(p[0]) : 1);
        q[k] += h;
        double above = signal(point, kind, q);
        q[k] -= 2 * h;
        jacobian[i][k] = (above - signal(point, kind, q)) / (2 * h);
      }
    }
  }

  private static double fraction(double[] p) {
    return 1 / (1 + Math.exp(-p[2]));
  }

  /** Parameters: M, linear term over M, logit of the longer one's part, ln T1 long, ln ratio. */
  private static double signal(RecoveryPoint point, RecoveryFit.Kind kind, double[] p) {
    double f = fraction(p);
    double[] a = RecoveryFit.basis(point, Math.exp(p[3]), kind);
    double[] b = RecoveryFit.basis(point, Math.exp(p[3] - p[4]), kind);
    return p[0] * (f * (a[0] + p[1] * a[1]) + (1 - f) * (b[0] + p[1] * b[1]));
  }

  private static double oneOverE(double[] p) {
    double f = fraction(p);
    double low = 0;
    double high = Math.exp(p[3] + Math.abs(p[4]));
    for (int i = 0; i < 60; i++) {
      double t = (low + high) / 2;
      double left =
          f * Math.exp(-t / Math.exp(p[3])) + (1 - f) * Math.exp(-t / Math.exp(p[3] - p[4]));
      if (left > Math.exp(-1)) {
        low = t;
      } else {
        high = t;
      }
    }
    return (low + high) / 2;
  }

  private static Optional<TwoRecoveries> answer(LeastSquares.Solution s, RecoveryFit.Kind kind) {
    double[] p = s.parameters();
    double[] gradient = new double[PARAMETERS];
    for (int k = 2; k < PARAMETERS; k++) {
      double[] q = p.clone();
      q[k] += 1e-4;
      double above = oneOverE(q);
      q[k] -= 2e-4;
      gradient[k] = (above - oneOverE(q)) / 2e-4;
    }
    double[][] h = s.unitCovariance();
    double variance = 0;
    for (int i = 0; i < PARAMETERS; i++) {
      for (int j = 0; j < PARAMETERS; j++) {
        variance += gradient[i] * h[i][j] * gradient[j];
      }
    }
    if (!(variance >= 0)) {
      return Optional.empty();
    }
    double f = fraction(p);
    double a = Math.exp(p[3]);
    double b = Math.exp(p[3] - p[4]);
    double uShort = b * Math.sqrt(Math.max(0, h[3][3] - 2 * h[3][4] + h[4][4]));
    double sign = kind == RecoveryFit.Kind.INVERSION ? -1 : 1;
    Measured first = Measured.of(a, a * s.u(3), Unit.SECOND);
    Measured second = Measured.of(b, uShort, Unit.SECOND);
    boolean inOrder = a >= b;
    return Optional.of(
        new TwoRecoveries(
            Measured.of(oneOverE(p), Math.sqrt(variance), Unit.SECOND),
            inOrder ? first : second,
            inOrder ? second : first,
            Measured.of(inOrder ? f : 1 - f, f * (1 - f) * s.u(2), Unit.ONE),
            Measured.of(p[0], s.u(0), Unit.VOLT),
            Measured.of(sign * p[1], s.u(1), Unit.ONE),
            s.weightedSquares(),
            s.degreesOfFreedom()));
  }
}
