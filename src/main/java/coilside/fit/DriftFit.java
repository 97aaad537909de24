package coilside.fit;

import coilside.fit.NotDetermined.Reason;
import coilside.quantity.Measured;
import coilside.quantity.Unit;

/**
 * A straight line through frequencies against time or temperature: drift rate and temperature
 * coefficient.
 */
public final class DriftFit {
  private DriftFit() {}

  /**
   * The line y = mean + slope (x - centre).
   *
   * @param slope per unit of x
   * @param uSlope its standard uncertainty
   * @param mean of y at {@code centre}
   * @param uMean its standard uncertainty
   * @param centre weighted mean of x
   * @param reducedChiSquare squared residuals over uncertainties, by degree of freedom; where it is
   *     improbably large the uncertainties have been widened by its root
   */
  public record Line(
      double slope,
      double uSlope,
      double mean,
      double uMean,
      double centre,
      double reducedChiSquare) {
    /** The slope as a drift rate, Hz/s, where x is in seconds. */
    public Measured hertzPerSecond() {
      return Measured.of(slope, uSlope, Unit.HERTZ_PER_SECOND);
    }

    /** The slope over a frequency, 1e-6 per hour, where x is in seconds. */
    public double ppmPerHour(double larmorHertz) {
      return slope * 3600e6 / larmorHertz;
    }

    /** The slope over a frequency, 1e-6 per unit of x (per degree, where x is a temperature). */
    public double ppmPerUnit(double larmorHertz) {
      return slope * 1e6 / larmorHertz;
    }

    /** Value of the line. */
    public double at(double x) {
      return mean + slope * (x - centre);
    }

    /** Standard uncertainty of that value. */
    public double uAt(double x) {
      return Math.hypot(uMean, uSlope * (x - centre));
    }
  }

  /**
   * Fits a line.
   *
   * @param x times, s, or temperatures, degC
   * @param y frequencies, Hz
   * @param u their standard uncertainties, Hz
   * @throws NotDetermined below 3 points, or where x does not vary
   */
  public static Line line(double[] x, double[] y, double[] u) throws NotDetermined {
    int n = x.length;
    if (n != y.length || n != u.length) {
      throw new IllegalArgumentException(
          n + " abscissae, " + y.length + " values and " + u.length + " uncertainties");
    }
    if (n < 3) {
      throw NotDetermined.of(
          Reason.TOO_FEW_POINTS, n + " values do not show a drift", "log at least 3 values");
    }
    double w = 0;
    double cx = 0;
    double cy = 0;
    for (int i = 0; i < n; i++) {
      double k = 1 / (u[i] * u[i]);
      if (!(k > 0) || !Double.isFinite(k + x[i] + y[i])) {
        throw NotDetermined.of(
            Reason.BAD_INPUT,
            "value " + i + " is " + y[i] + " at " + x[i] + " with uncertainty " + u[i],
            "give finite values with uncertainties above 0");
      }
      w += k;
      cx += k * x[i];
      cy += k * y[i];
    }
    cx /= w;
    cy /= w;
    double sxx = 0;
    double sxy = 0;
    double scale = 0;
    for (int i = 0; i < n; i++) {
      double k = 1 / (u[i] * u[i]);
      sxx += k * (x[i] - cx) * (x[i] - cx);
      sxy += k * (x[i] - cx) * (y[i] - cy);
      scale = Math.max(scale, Math.abs(x[i]));
    }
    if (!(sxx > w * 1e-24 * scale * scale)) {
      throw NotDetermined.of(
          Reason.TOO_SHORT, "all values stand at the same place", "log for a longer time");
    }
    double slope = sxy / sxx;
    double chi = 0;
    for (int i = 0; i < n; i++) {
      double r = (y[i] - cy - slope * (x[i] - cx)) / u[i];
      chi += r * r;
    }
    double reduced = chi / (n - 2);
    double widen = NutationFit.improbable(reduced, n - 2) ? Math.sqrt(reduced) : 1;
    return new Line(slope, widen / Math.sqrt(sxx), cy, widen / Math.sqrt(w), cx, reduced);
  }
}
