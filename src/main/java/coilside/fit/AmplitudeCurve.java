package coilside.fit;

import coilside.fit.NotDetermined.Reason;
import coilside.quantity.Measured;
import coilside.quantity.Unit;

/**
 * Nutation rate against transmit amplitude: rate = slope a (1 - c a^2), the first term of an
 * amplifier's compression.
 *
 * @param slope nutation rate per unit of amplitude where the amplifier is linear, Hz
 * @param compression c: the fraction missing at full amplitude, 1
 * @param compressionDecibels the same in decibels, below 0
 * @param reducedChiSquare squared residuals over uncertainties, by degree of freedom
 */
public record AmplitudeCurve(
    Measured slope, Measured compression, Measured compressionDecibels, double reducedChiSquare) {

  /**
   * Fits the curve.
   *
   * @param amplitudes fractions of full amplitude, 0..1
   * @param rates nutation rate at each, Hz
   * @throws NotDetermined below three amplitudes, or where they do not spread over a factor 1.5
   */
  public static AmplitudeCurve fit(double[] amplitudes, Measured[] rates) throws NotDetermined {
    int n = amplitudes.length;
    if (n != rates.length) {
      throw new IllegalArgumentException(n + " amplitudes and " + rates.length + " rates");
    }
    double low = Double.POSITIVE_INFINITY;
    double high = 0;
    double[] y = new double[n];
    double[] u = new double[n];
    double start = 0;
    for (int i = 0; i < n; i++) {
      low = Math.min(low, amplitudes[i]);
      high = Math.max(high, amplitudes[i]);
      y[i] = rates[i].value();
      u[i] = rates[i].u();
      start += y[i] / amplitudes[i] / n;
    }
    if (n < 3 || !(low > 0) || high < 1.5 * low) {
      throw NotDetermined.of(
          Reason.TOO_FEW_POINTS,
          n + " amplitudes from " + low + " to " + high + " do not show a compression",
          "measure at 3 amplitudes or more, the largest at least 1.5 times the smallest");
    }
    LeastSquares.Solution s =
        LeastSquares.solve(
            (p, values, jacobian) -> {
              for (int i = 0; i < n; i++) {
                double a = amplitudes[i];
                values[i] = p[0] * a - p[1] * a * a * a;
                jacobian[i][0] = a;
                jacobian[i][1] = -a * a * a;
              }
            },
            y,
            u,
            new double[] {start, 0});
    double slope = s.parameters()[0];
    double c = s.parameters()[1] / slope;
    double[][] h = s.unitCovariance();
    double uC = Math.sqrt(Math.max(0, h[1][1] - 2 * c * h[0][1] + c * c * h[0][0])) / slope;
    double left = Math.max(1e-6, 1 - c);
    return new AmplitudeCurve(
        Measured.of(slope, s.u(0), Unit.HERTZ),
        Measured.of(c, uC, Unit.ONE),
        Measured.of(20 * Math.log10(left), 20 / Math.log(10) * uC / left, Unit.DECIBEL),
        s.degreesOfFreedom() > 0 ? s.reducedChiSquare() : Double.NaN);
  }

  /** Nutation rate at an amplitude, Hz. */
  public double rate(double amplitude) {
    return slope.value() * amplitude * (1 - compression.value() * amplitude * amplitude);
  }
}
