package coilside.fit;

import coilside.fit.NotDetermined.Reason;
import java.util.Arrays;
import org.apache.commons.math3.exception.MathIllegalStateException;
import org.apache.commons.math3.fitting.leastsquares.LeastSquaresFactory;
import org.apache.commons.math3.fitting.leastsquares.LevenbergMarquardtOptimizer;
import org.apache.commons.math3.fitting.leastsquares.MultivariateJacobianFunction;
import org.apache.commons.math3.linear.Array2DRowRealMatrix;
import org.apache.commons.math3.linear.ArrayRealVector;
import org.apache.commons.math3.linear.QRDecomposition;
import org.apache.commons.math3.linear.RealMatrix;
import org.apache.commons.math3.linear.RealVector;
import org.apache.commons.math3.util.Pair;

/**
 * The one entry to nonlinear least squares: the library's Levenberg-Marquardt with its traps
 * closed.
 *
 * <p>Input is screened (a NaN would burn the whole budget); weights are applied to rows, never as a
 * matrix; tolerances are 1e-15, which solves the certified problems to six digits; the best point
 * seen is kept, so that a stop at the limit of precision loses nothing; the covariance comes from
 * the QR decomposition of the column-scaled Jacobian, not from the inverse of J'J.
 *
 * <p>For curves of up to some hundred points; an FID has {@link DecayFit}.
 */
public final class LeastSquares {
  private static final double TOLERANCE = 1e-15;
  private static final int MOST_EVALUATIONS = 20_000;

  private LeastSquares() {}

  /** A model with its derivatives. */
  @FunctionalInterface
  public interface Model {
    /**
     * Evaluates the model.
     *
     * @param parameters p of them
     * @param values filled with the m model values
     * @param jacobian filled with the derivatives, m rows of p
     */
    void evaluate(double[] parameters, double[] values, double[][] jacobian);
  }

  /**
   * The minimum.
   *
   * @param parameters where it is
   * @param unitCovariance inverse of J'WJ: the covariance for uncertainties as given (or of 1)
   * @param weightedSquares sum of the squares of residual/uncertainty
   * @param degreesOfFreedom rows less parameters
   * @param residuals data less model, unweighted
   */
  public record Solution(
      double[] parameters,
      double[][] unitCovariance,
      double weightedSquares,
      int degreesOfFreedom,
      double[] residuals) {
    /** Weighted squares over degrees of freedom. */
    public double reducedChiSquare() {
      return weightedSquares / degreesOfFreedom;
    }

    /** Standard uncertainty of a parameter, the rows' uncertainties taken as given. */
    public double u(int parameter) {
      return Math.sqrt(unitCovariance[parameter][parameter]);
    }

    /** Standard uncertainty of a parameter, the rows' scatter taken from the residuals. */
    public double uFromScatter(int parameter) {
      return u(parameter) * Math.sqrt(reducedChiSquare());
    }
  }

  /**
   * Minimises the sum of ((y - model)/u)^2.
   *
   * @param y data, m
   * @param u standard uncertainty of each, &gt; 0; null for 1
   * @param start p parameters, p &lt;= m
   * @throws NotDetermined on input that is not finite, or where the parameters cannot be told apart
   */
  public static Solution solve(Model model, double[] y, double[] u, double[] start)
      throws NotDetermined {
    return solve(model, y, u, start, TOLERANCE);
  }

  /**
   * The same with a relative tolerance of its own, for models whose derivatives are differences.
   */
  static Solution solve(Model model, double[] y, double[] u, double[] start, double tolerance)
      throws NotDetermined {
    int m = y.length;
    int p = start.length;
    if (m < p) {
      throw NotDetermined.of(
          Reason.TOO_FEW_POINTS,
          m + " values cannot determine " + p + " unknowns",
          "measure at least " + (p + 1) + " values");
    }
    double[] weights = new double[m];
    for (int i = 0; i < m; i++) {
      weights[i] = u == null ? 1 : 1 / u[i];
      if (!Double.isFinite(y[i]) || !(weights[i] > 0) || !Double.isFinite(weights[i])) {
        throw NotDetermined.of(
            Reason.BAD_INPUT,
            "value " + i + " is " + y[i] + (u == null ? "" : " with uncertainty " + u[i]),
            "give finite values with uncertainties above 0");
      }
    }
    for (double s : start) {
      if (!Double.isFinite(s)) {
        throw NotDetermined.of(
            Reason.BAD_INPUT, "a starting value is " + s, "give finite starting values");
      }
    }
    Rows rows = new Rows(model, y, weights, p);
    LevenbergMarquardtOptimizer optimizer =
        new LevenbergMarquardtOptimizer()
            .withCostRelativeTolerance(tolerance)
            .withParameterRelativeTolerance(tolerance)
            .withOrthoTolerance(tolerance);
    try {
      optimizer.optimize(
          LeastSquaresFactory.create(
              rows,
              new ArrayRealVector(m),
              new ArrayRealVector(start, true),
              null,
              MOST_EVALUATIONS,
              MOST_EVALUATIONS));
    } catch (MathIllegalStateException e) {
      // The budget is spent or the limit of precision reached: the best point seen is the answer.
      assert rows.least < Double.POSITIVE_INFINITY || rows.best == null : e;
    }
    if (rows.best == null) {
      throw NotDetermined.of(
          Reason.NO_CONVERGENCE, "the fit did not settle", "start nearer to the answer");
    }
    return rows.solution();
  }

  /** The weighted residuals as the library wants them; remembers the best point. */
  private static final class Rows implements MultivariateJacobianFunction {
    private final Model model;
    private final double[] y;
    private final double[] weights;
    private final int p;
    private double[] best;
    private double least = Double.POSITIVE_INFINITY;

    Rows(Model model, double[] y, double[] weights, int p) {
      this.model = model;
      this.y = y;
      this.weights = weights;
      this.p = p;
    }

    @Override
    public Pair<RealVector, RealMatrix> value(RealVector point) {
      int m = y.length;
      double[] values = new double[m];
      double[][] jacobian = new double[m][p];
      double[] parameters = point.toArray();
      model.evaluate(parameters, values, jacobian);
      double sum = 0;
      for (int i = 0; i < m; i++) {
        values[i] = weights[i] * (values[i] - y[i]);
        sum += values[i] * values[i];
        for (int j = 0; j < p; j++) {
          jacobian[i][j] *= weights[i];
        }
      }
      if (!Double.isFinite(sum)) {
        // A step that left the model's domain: worse than anything, so that it is taken back.
        Arrays.fill(values, 1e150);
        for (double[] row : jacobian) {
          Arrays.fill(row, 0);
        }
      } else if (sum < least) {
        least = sum;
        best = parameters;
      }
      return new Pair<>(
          new ArrayRealVector(values, false), new Array2DRowRealMatrix(jacobian, false));
    }

    Solution solution() throws NotDetermined {
      int m = y.length;
      double[] values = new double[m];
      double[][] jacobian = new double[m][p];
      model.evaluate(best, values, jacobian);
      double[] residuals = new double[m];
      double[] scale = new double[p];
      double sum = 0;
      for (int i = 0; i < m; i++) {
        residuals[i] = y[i] - values[i];
        sum += residuals[i] * weights[i] * residuals[i] * weights[i];
        for (int j = 0; j < p; j++) {
          jacobian[i][j] *= weights[i];
          scale[j] += jacobian[i][j] * jacobian[i][j];
        }
      }
      for (int j = 0; j < p; j++) {
        scale[j] = Math.sqrt(scale[j]);
        if (!(scale[j] > 0)) {
          throw unresolved();
        }
        for (int i = 0; i < m; i++) {
          jacobian[i][j] /= scale[j];
        }
      }
      RealMatrix r = new QRDecomposition(new Array2DRowRealMatrix(jacobian, false)).getR();
      double[][] inverse = new double[p][p];
      for (int c = 0; c < p; c++) {
        for (int i = c; i >= 0; i--) {
          double v = i == c ? 1 : 0;
          for (int k = i + 1; k <= c; k++) {
            v -= r.getEntry(i, k) * inverse[k][c];
          }
          if (Math.abs(r.getEntry(i, i)) < 1e-13) {
            throw unresolved();
          }
          inverse[i][c] = v / r.getEntry(i, i);
        }
      }
      double[][] covariance = new double[p][p];
      for (int a = 0; a < p; a++) {
        for (int b = 0; b < p; b++) {
          double v = 0;
          for (int k = Math.max(a, b); k < p; k++) {
            v += inverse[a][k] * inverse[b][k];
          }
          covariance[a][b] = v / (scale[a] * scale[b]);
        }
      }
      return new Solution(best, covariance, sum, m - p, residuals);
    }

    private NotDetermined unresolved() {
      return NotDetermined.of(
          Reason.AMBIGUOUS,
          "the points do not tell the unknowns apart",
          "measure at places where they act differently");
    }
  }
}
