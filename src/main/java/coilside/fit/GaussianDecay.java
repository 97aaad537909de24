package coilside.fit;

import coilside.fit.DecayResult.Component;
import coilside.fit.DecayResult.Envelope;
import coilside.quantity.Measured;
import coilside.quantity.Unit;
import coilside.signal.Fid;
import java.util.List;
import java.util.Optional;

/**
 * An exponential decay times a Gaussian one, c exp(i omega t) exp(-alpha t - beta t^2): what a
 * magnet with a Gaussian spread of fields gives. Fitted to block means of the FID turned to the
 * line, which keep white noise white.
 */
final class GaussianDecay {
  private GaussianDecay() {}

  record Fitted(DecayResult result, double residualSquares) {}

  static Optional<Fitted> fit(Fid fid, DecayAnswer answer, double lambdaRe, double lambdaIm) {
    int n = fid.points();
    double dt = fid.dwellSeconds();
    int block = Misfit.block(n, lambdaRe);
    double[][] z = Misfit.blocks(fid.re(), fid.im(), n, block, lambdaIm);
    int blocks = z[0].length;
    double[] t = new double[blocks];
    double[] y = new double[2 * blocks];
    for (int b = 0; b < blocks; b++) {
      t[b] = fid.startSeconds() + (b * (double) block + (block - 1) / 2.0) * dt;
      y[2 * b] = z[0][b];
      y[2 * b + 1] = z[1][b];
    }
    double alpha = -lambdaRe / dt;
    // All in units of the exponential's T2*, so that the columns are alike.
    double unit = 1 / alpha;
    LeastSquares.Solution best = null;
    boolean pure = false;
    try {
      best = solve(t, y, unit, new double[] {z[0][0], z[1][0], 0, 0.5, 0.3}, false);
      if (best.parameters()[3] < 0) {
        double[] p = best.parameters();
        best = solve(t, y, unit, new double[] {p[0], p[1], p[2], p[4]}, true);
        pure = true;
      }
    } catch (NotDetermined e) {
      return Optional.empty();
    }
    double[] p = best.parameters();
    double beta = p[pure ? 3 : 4];
    if (!(beta > 0)) {
      return Optional.empty();
    }
    return Optional.of(result(fid, answer, best, pure, unit, lambdaIm / dt));
  }

  private static LeastSquares.Solution solve(
      double[] t, double[] y, double unit, double[] start, boolean pure) throws NotDetermined {
    return LeastSquares.solve(
        (p, values, jacobian) -> {
          for (int b = 0; b < t.length; b++) {
            double x = t[b] / unit;
            double a = pure ? 0 : p[3];
            double beta = p[pure ? 3 : 4];
            double e = Math.exp(-a * x - beta * x * x);
            double c = e * Math.cos(p[2] * x);
            double s = e * Math.sin(p[2] * x);
            double re = p[0] * c - p[1] * s;
            double im = p[0] * s + p[1] * c;
            values[2 * b] = re;
            values[2 * b + 1] = im;
            double[] jr = jacobian[2 * b];
            double[] ji = jacobian[2 * b + 1];
            jr[0] = c;
            ji[0] = s;
            jr[1] = -s;
            ji[1] = c;
            jr[2] = -im * x;
            ji[2] = re * x;
            int last = pure ? 3 : 4;
            if (!pure) {
              jr[3] = -re * x;
              ji[3] = -im * x;
            }
            jr[last] = -re * x * x;
            ji[last] = -im * x * x;
          }
        },
        y,
        null,
        start);
  }

  private static Fitted result(
      Fid fid,
      DecayAnswer answer,
      LeastSquares.Solution s,
      boolean pure,
      double unit,
      double turn) {
    double[] p = s.parameters();
    double[][] h = s.unitCovariance();
    int last = pure ? 3 : 4;
    double a = pure ? 0 : p[3];
    double beta = p[last];
    double root = Math.sqrt(a * a + 4 * beta);
    double x = (root - a) / (2 * beta);
    // a x + beta x^2 = 1 differentiated.
    double slope = a + 2 * beta * x;
    double dA = -x / slope;
    double dB = -x * x / slope;
    double lorentz = a / Math.PI;
    double gauss = 2 * Math.sqrt(beta * Math.log(2)) / Math.PI;
    double inner = Math.sqrt(0.2166 * lorentz * lorentz + gauss * gauss);
    double width = 0.5346 * lorentz + inner;
    double wA = (0.5346 + 0.2166 * lorentz / inner) / Math.PI;
    double wB = gauss / inner * gauss / (2 * beta);
    double size = Math.hypot(p[0], p[1]);
    double[] toT2 = new double[p.length];
    double[] toWidth = new double[p.length];
    toT2[last] = dB;
    toWidth[last] = wB;
    if (!pure) {
      toT2[3] = dA;
      toWidth[3] = wA;
    }
    double[] toAmplitude = new double[p.length];
    toAmplitude[0] = p[0] / size;
    toAmplitude[1] = p[1] / size;
    double[] toPhase = new double[p.length];
    toPhase[0] = -p[1] / (size * size);
    toPhase[1] = p[0] / (size * size);
    double[] toOffset = new double[p.length];
    toOffset[2] = 1 / (2 * Math.PI * unit);
    int n = fid.points();
    double omega = turn + p[2] / unit;
    // The blocks were turned from the first sample on, not from time zero.
    double phase = Math.atan2(p[1], p[0]) - turn * fid.startSeconds();
    phase = Math.IEEEremainder(phase, 2 * Math.PI);
    double[] re = Scratch.residualRe(n);
    double[] im = Scratch.residualIm(n);
    double rss = 0;
    for (int k = 0; k < n; k++) {
      double t = fid.time(k);
      double e = size * Math.exp(-(a + beta * t / unit) * t / unit);
      re[k] = fid.re(k) - e * Math.cos(phase + omega * t);
      im[k] = fid.im(k) - e * Math.sin(phase + omega * t);
      rss += re[k] * re[k] + im[k] * im[k];
    }
    double sigma = Math.sqrt(rss / (2.0 * n - p.length));
    int block = Misfit.block(n, -fid.dwellSeconds() / unit);
    double v = Math.pow(answer.effectiveSigma(sigma), 2) / block;
    Measured t2 = Measured.of(x * unit, unit * Math.sqrt(v * form(h, toT2, toT2)), Unit.SECOND);
    Measured amplitude =
        Measured.of(size, Math.sqrt(v * form(h, toAmplitude, toAmplitude)), Unit.VOLT);
    Measured phaseM = Measured.of(phase, Math.sqrt(v * form(h, toPhase, toPhase)), Unit.RADIAN);
    Measured offset =
        Measured.of(omega / (2 * Math.PI), Math.sqrt(v * form(h, toOffset, toOffset)), Unit.HERTZ);
    Measured linewidth =
        Measured.of(width / unit, Math.sqrt(v * form(h, toWidth, toWidth)) / unit, Unit.HERTZ);
    double[][] g = {toAmplitude, toPhase, toOffset, scaled(toT2, unit)};
    double[][] covariance = new double[4][4];
    for (int i = 0; i < 4; i++) {
      for (int j = 0; j < 4; j++) {
        covariance[i][j] = v * form(h, g[i], g[j]);
      }
    }
    Misfit misfit =
        Misfit.of(re, im, n, sigma, -fid.dwellSeconds() / unit, omega * fid.dwellSeconds());
    Measured rate =
        pure
            ? Measured.withoutUncertainty(
                Double.POSITIVE_INFINITY, Unit.SECOND, "the decay is wholly Gaussian")
            : Measured.of(unit / a, unit / (a * a) * Math.sqrt(v * h[3][3]), Unit.SECOND);
    Component only = new Component(amplitude, phaseM, offset, rate, beta / (unit * unit));
    DecayResult result =
        new DecayResult(
            Envelope.GAUSSIAN,
            t2,
            offset,
            phaseM,
            amplitude,
            linewidth,
            DecayAnswer.snr(amplitude, sigma, n),
            DecayFit.sigma(sigma, n),
            List.of(only),
            0,
            0,
            covariance,
            misfit.statistic(),
            misfit.threshold(),
            "",
            List.of());
    return new Fitted(result, rss);
  }

  private static double[] scaled(double[] g, double by) {
    double[] out = g.clone();
    for (int i = 0; i < out.length; i++) {
      out[i] *= by;
    }
    return out;
  }

  private static double form(double[][] h, double[] a, double[] b) {
    double sum = 0;
    for (int i = 0; i < a.length; i++) {
      for (int j = 0; j < b.length; j++) {
        sum += a[i] * h[i][j] * b[j];
      }
    }
    return sum;
  }
}
