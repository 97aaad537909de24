package coilside.fit;

import coilside.fit.DecayResult.Component;
import coilside.quantity.Measured;
import coilside.quantity.Unit;
import coilside.signal.Fid;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;

/** Turns a fit in samples into values at time zero in SI units, with their covariance. */
final class DecayAnswer {
  private final Fid fid;
  private final double widen;

  DecayAnswer(Fid fid, DecayFit.Options options) {
    this.fid = fid;
    double bandwidth = options.noiseBandwidthHertz();
    // The residuals' variance is density times bandwidth; what reaches the line is the density.
    widen = Double.isNaN(bandwidth) ? 1 : Math.sqrt(1 / (bandwidth * fid.dwellSeconds()));
  }

  /** Standard deviation of one channel that a white noise of the same density would have. */
  double effectiveSigma(double sigma) {
    return sigma * widen;
  }

  DecayResult of(
      Exponentials fit, double rss, Misfit misfit, String criterion, List<String> warnings) {
    int n = fit.n;
    double dt = fid.dwellSeconds();
    double t0 = fid.startSeconds();
    double sigma = Math.sqrt(rss / (2.0 * n - 2 * (fit.terms + fit.poles)));
    double s = effectiveSigma(sigma);
    List<Component> components = new ArrayList<>();
    int main = 0;
    for (int j = 0; j < fit.poles; j++) {
      components.add(component(fit, j, s));
      if (components.get(j).amplitude().value() > components.get(main).amplitude().value()) {
        main = j;
      }
    }
    Measured t2 = components.get(main).t2Star();
    Measured amplitude = components.get(main).amplitude();
    Measured phase = components.get(main).phaseRadians();
    Measured offset = components.get(main).offsetHertz();
    double[][] covariance = covariance(fit, main, s);
    Measured width =
        Measured.of(
            1 / (Math.PI * t2.value()), t2.u() / (Math.PI * t2.value() * t2.value()), Unit.HERTZ);
    if (fit.poles > 1 && DecayForms.overlap(components)) {
      TwoExponentials both = new TwoExponentials(fit, dt, t0, s);
      t2 = both.oneOverE();
      amplitude = both.amplitude();
      phase = both.phase();
      width = both.linewidth();
      covariance[0][0] = amplitude.u() * amplitude.u();
      covariance[1][1] = phase.u() * phase.u();
      covariance[3][3] = t2.u() * t2.u();
      for (int i = 0; i < 4; i++) {
        for (int j = 0; j < 4; j++) {
          covariance[i][j] = i == j ? covariance[i][j] : 0;
        }
      }
    }
    components.sort(Comparator.comparingDouble((Component c) -> -c.amplitude().value()));
    boolean constant = fit.terms > fit.poles;
    return new DecayResult(
        DecayFit.envelope(fit),
        t2,
        offset,
        phase,
        amplitude,
        width,
        snr(amplitude, sigma, n),
        DecayFit.sigma(sigma, n),
        components,
        constant ? fit.cRe[fit.poles] : 0,
        constant ? fit.cIm[fit.poles] : 0,
        covariance,
        misfit.statistic(),
        misfit.threshold(),
        criterion,
        warnings);
  }

  static Measured snr(Measured amplitude, double sigma, int n) {
    double snr = amplitude.value() / sigma;
    return Measured.of(
        snr, snr * Math.hypot(amplitude.relative(), 1 / (2 * Math.sqrt(n))), Unit.ONE);
  }

  private Component component(Exponentials fit, int j, double s) {
    double[][] c = covariance(fit, j, s);
    double dt = fid.dwellSeconds();
    double t0 = fid.startSeconds();
    double alpha = -fit.lambdaRe[j] / dt;
    double omega = fit.lambdaIm[j] / dt;
    double size = Math.hypot(fit.cRe[j], fit.cIm[j]) * Math.exp(alpha * t0);
    double phase = Math.IEEEremainder(Math.atan2(fit.cIm[j], fit.cRe[j]) - omega * t0, 2 * Math.PI);
    return new Component(
        Measured.of(size, Math.sqrt(c[0][0]), Unit.VOLT),
        Measured.of(phase, Math.sqrt(c[1][1]), Unit.RADIAN),
        Measured.of(omega / (2 * Math.PI), Math.sqrt(c[2][2]), Unit.HERTZ),
        Measured.of(1 / alpha, Math.sqrt(c[3][3]), Unit.SECOND),
        0);
  }

  /** Covariance of (amplitude, phase, offset, T2*) of component j at time zero. */
  private double[][] covariance(Exponentials fit, int j, double s) {
    double dt = fid.dwellSeconds();
    double t0 = fid.startSeconds();
    int l = fit.terms + j;
    double cr = fit.cRe[j];
    double ci = fit.cIm[j];
    double size2 = cr * cr + ci * ci;
    double k0 = t0 / dt;
    // ln c0 = ln c - lambda k0; with H the covariance of (c, lambda) a channel, divided by c.
    double hcc = fit.inverseRe[j][j] / size2;
    double hll = fit.inverseRe[l][l];
    // H_cl/c
    double hr = (fit.inverseRe[j][l] * cr + fit.inverseIm[j][l] * ci) / size2;
    double hi = (fit.inverseIm[j][l] * cr - fit.inverseRe[j][l] * ci) / size2;
    double varLog = hcc - 2 * k0 * hr + k0 * k0 * hll;
    double crossRe = hr - k0 * hll;
    double crossIm = hi;
    double alpha = -fit.lambdaRe[j] / dt;
    double amplitude = Math.sqrt(size2) * Math.exp(alpha * t0);
    double t2 = 1 / alpha;
    double v = s * s;
    // d ln A = Re, d phi = Im of d ln c0; d T2 = T2^2/dt Re d lambda; d f = Im d lambda/(2 pi dt).
    double toT2 = t2 * t2 / dt;
    double toF = 1 / (2 * Math.PI * dt);
    double[][] m = new double[4][4];
    m[0][0] = v * varLog * amplitude * amplitude;
    m[1][1] = v * varLog;
    m[2][2] = v * hll * toF * toF;
    m[3][3] = v * hll * toT2 * toT2;
    // E[x conj(y)] = 2 v h: Re x Re y = Im x Im y = v Re h; Im x Re y = -Re x Im y = v Im h.
    m[0][2] = -v * crossIm * amplitude * toF;
    m[0][3] = v * crossRe * amplitude * toT2;
    m[1][2] = v * crossRe * toF;
    m[1][3] = v * crossIm * toT2;
    m[2][0] = m[0][2];
    m[3][0] = m[0][3];
    m[2][1] = m[1][2];
    m[3][1] = m[1][3];
    return m;
  }
}
