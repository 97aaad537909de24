package coilside.fit;

import coilside.fit.DecayResult.Envelope;
import coilside.quantity.Measured;
import coilside.signal.Fid;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;

/**
 * T2* without a model of the decay: the time after which the block means of the FID, turned to the
 * line and along the model's phase, fall through 1/e of the amplitude at time zero. A parabola
 * through the blocks around the crossing averages their noise.
 */
final class FreeEnvelope {
  private FreeEnvelope() {}

  static Optional<DecayResult> of(Fid fid, DecayResult near, String why) {
    double dt = fid.dwellSeconds();
    double t2 = near.t2Star().value();
    int block = Misfit.block(fid.points(), -dt / t2);
    Fid model = near.model(fid);
    int blocks = fid.points() / block;
    double[] t = new double[blocks];
    double[] y = new double[blocks];
    int crossing = -1;
    double target = near.amplitude().value() / Math.E;
    for (int b = 0; b < blocks; b++) {
      double sum = 0;
      for (int k = b * block; k < (b + 1) * block; k++) {
        double size = Math.max(1e-300, model.magnitude(k));
        sum += (fid.re(k) * model.re(k) + fid.im(k) * model.im(k)) / size;
      }
      y[b] = sum / block;
      t[b] = fid.time(b * block) + (block - 1) / 2.0 * dt;
      if (crossing < 0 && t[b] > 0.3 * t2 && y[b] < target) {
        crossing = b;
      }
    }
    if (crossing < 0) {
      return Optional.empty();
    }
    double centre = t[crossing];
    List<double[]> inside = new ArrayList<>();
    for (int b = 0; b < blocks; b++) {
      if (Math.abs(t[b] - centre) < 0.4 * t2) {
        inside.add(new double[] {(t[b] - centre) / t2, y[b]});
      }
    }
    if (inside.size() < 5) {
      return Optional.empty();
    }
    double[] data = inside.stream().mapToDouble(r -> r[1]).toArray();
    try {
      LeastSquares.Solution s =
          LeastSquares.solve(
              (p, values, jacobian) -> {
                for (int i = 0; i < values.length; i++) {
                  double x = inside.get(i)[0];
                  values[i] = p[0] + p[1] * x + p[2] * x * x;
                  jacobian[i][0] = 1;
                  jacobian[i][1] = x;
                  jacobian[i][2] = x * x;
                }
              },
              data,
              null,
              new double[] {target, -target, 0});
      double[] p = s.parameters();
      double x = 0;
      for (int i = 0; i < 20; i++) {
        x -= (p[0] + p[1] * x + p[2] * x * x - target) / (p[1] + 2 * p[2] * x);
      }
      double slope = p[1] + 2 * p[2] * x;
      if (!(slope < 0) || Math.abs(x) > 0.5) {
        return Optional.empty();
      }
      double[] g = {1, x, x * x};
      double variance = 0;
      for (int i = 0; i < 3; i++) {
        for (int j = 0; j < 3; j++) {
          variance += g[i] * s.unitCovariance()[i][j] * g[j];
        }
      }
      double sigma = near.noiseSigma().value() / Math.sqrt(block);
      double u =
          t2
              * Math.sqrt(variance * sigma * sigma + Math.pow(near.amplitude().u() / Math.E, 2))
              / -slope;
      Measured value = DecayForms.seconds(centre + x * t2, u);
      List<String> warnings = new ArrayList<>(near.warnings());
      warnings.add(
          "no simple form fits this decay: T2* is the time after which the averaged envelope falls to"
              + " 1/e; see the residuals");
      return Optional.of(DecayForms.with(near, Envelope.FREE, value, why, warnings));
    } catch (NotDetermined e) {
      return Optional.empty();
    }
  }
}
