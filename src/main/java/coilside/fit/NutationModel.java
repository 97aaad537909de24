package coilside.fit;

import java.util.List;

/**
 * The signal after a pulse, per unit of fully recovered magnetisation: rotation about the effective
 * field (Rabi), damping by the spread of B1, and what recovery left of the magnetisation.
 *
 * <p>nu is the nutation rate on resonance, nu_e = sqrt(nu^2 + offset^2), n = (nu, offset)/nu_e,
 * theta = 2 pi nu_e t. Along the pulse's own phase, extrapolated to the pulse's centre:
 *
 * <pre>f = M n_x (D sin theta - k (1 - D cos theta) + i n_z (1 - D cos theta))
 *       exp(r t/2 - i pi offset t),   k = r/(2 pi nu)
 * M after = M (n_z^2 + n_x^2 D cos theta)</pre>
 *
 * <p>r is the rate at which the FID decays. A strong pulse holds the spins together while it lasts,
 * so that the decay does not start at its centre: with offsets x spread over the sample the signal
 * after the pulse is the mean of (sin theta + i (x/omega1)(1 - cos theta)) exp(i x t), to first
 * order in x/omega1, and the mean of i x exp(i x t) is the derivative of the decay, -r times the
 * decay. For a Lorentzian line this holds to all orders with x = i r (the contour closes on the one
 * pole). At 360 degrees the term is zero; left out, it moves amplitudes by 0.1 to 0.5 %.
 *
 * <p>Transverse magnetisation is taken to be gone when the next pulse comes.
 */
final class NutationModel {
  private final double[] t;
  private final double[] recovery;
  private final double[] offset;
  private final double[] turnRe;
  private final double[] turnIm;
  private final double[] kept;
  private double keptT1 = Double.NEGATIVE_INFINITY;
  private final NutationFit.Recovery history;
  private final NutationFit.Spread spread;
  private final double decayRate;
  private final double[] grown;

  NutationModel(
      List<NutationPoint> points, NutationFit.Recovery history, NutationFit.Spread spread) {
    this(points, history, spread, 0);
  }

  /**
   * @param decayRate of the FID, 1/s; 0 for a line much narrower than the decay allows to see
   */
  NutationModel(
      List<NutationPoint> points,
      NutationFit.Recovery history,
      NutationFit.Spread spread,
      double decayRate) {
    this.decayRate = decayRate;
    int n = points.size();
    t = new double[n];
    recovery = new double[n];
    offset = new double[n];
    turnRe = new double[n];
    turnIm = new double[n];
    kept = new double[n];
    grown = new double[n];
    for (int j = 0; j < n; j++) {
      t[j] = points.get(j).pulseSeconds();
      recovery[j] = points.get(j).recoverySeconds();
      offset[j] = points.get(j).offsetHertz();
      double turn = Math.PI * offset[j] * t[j];
      turnRe[j] = Math.cos(turn);
      turnIm[j] = Math.sin(turn);
      grown[j] = Math.exp(decayRate * t[j] / 2);
    }
    this.history = history;
    this.spread = spread;
  }

  /**
   * Fills f for all points.
   *
   * @param nu nutation rate, Hz
   * @param damping parameter of the spread: exponent per 90 degrees, or squared relative deviation
   * @param t1 s; NaN for full recovery before every pulse
   */
  void fill(double nu, double damping, double t1, double[] re, double[] im) {
    if (t1 != keptT1) {
      for (int j = 0; j < t.length; j++) {
        kept[j] = Double.isNaN(t1) ? 0 : Math.exp(-recovery[j] / t1);
      }
      keptT1 = t1;
    }
    double after = 1;
    double held = decayRate / (2 * Math.PI * nu);
    for (int j = 0; j < t.length; j++) {
      double e1 = kept[j];
      double d = offset[j];
      double effective = d == 0 ? nu : Math.sqrt(nu * nu + d * d);
      double nx = nu / effective;
      double nz = d / effective;
      double theta = 2 * Math.PI * effective * t[j];
      double nominal = 2 * Math.PI * nu * t[j];
      double loss = damping == 0 ? 1 : spread.factor(damping, nominal);
      double sine = loss * Math.sin(theta);
      double cosine = loss * Math.cos(theta);
      double left = nz * nz + nx * nx * cosine;
      double m =
          history == NutationFit.Recovery.STEADY_STATE
              ? (1 - e1) / (1 - e1 * left)
              : 1 - e1 * (1 - after);
      after = m * left;
      double a = m * nx * (sine - held * (1 - cosine)) * grown[j];
      double b = m * nx * nz * (1 - cosine) * grown[j];
      if (d == 0) {
        re[j] = a;
        im[j] = b;
      } else {
        double c = turnRe[j];
        double s = turnIm[j];
        re[j] = a * c + b * s;
        im[j] = b * c - a * s;
      }
    }
  }
}
