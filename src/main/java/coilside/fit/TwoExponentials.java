package coilside.fit;

import coilside.quantity.Measured;
import coilside.quantity.Unit;

/**
 * The joint envelope of two exponentials that overlap in frequency: its amplitude and phase at time
 * zero, its 1/e time and linewidth, with uncertainties by numerical derivatives.
 */
final class TwoExponentials {
  /** Narrowest line beside the widest: one that does not decay at all has no width to step in. */
  private static final double NARROWEST = 1e-9;

  private interface Quantity {
    double of(double[] p);
  }

  private final Exponentials fit;
  private final double dt;
  private final double t0;
  private final double sigma;

  TwoExponentials(Exponentials fit, double dt, double t0, double sigma) {
    this.fit = fit;
    this.dt = dt;
    this.t0 = t0;
    this.sigma = sigma;
  }

  Measured oneOverE() {
    return measured(this::oneOverE, Unit.SECOND);
  }

  Measured amplitude() {
    return measured(p -> magnitude(p, 0), Unit.VOLT);
  }

  Measured phase() {
    double near = Math.atan2(at(parameters(), 0)[1], at(parameters(), 0)[0]);
    return measured(
        p -> {
          double[] z = at(p, 0);
          return near + Math.IEEEremainder(Math.atan2(z[1], z[0]) - near, 2 * Math.PI);
        },
        Unit.RADIAN);
  }

  Measured linewidth() {
    return measured(this::linewidth, Unit.HERTZ);
  }

  /** (c re, c im, lambda re, lambda im) of each of the two. */
  private double[] parameters() {
    double[] p = new double[8];
    for (int j = 0; j < 2; j++) {
      p[4 * j] = fit.cRe[j];
      p[4 * j + 1] = fit.cIm[j];
      p[4 * j + 2] = fit.lambdaRe[j];
      p[4 * j + 3] = fit.lambdaIm[j];
    }
    return p;
  }

  private double[] at(double[] p, double seconds) {
    double k = (seconds - t0) / dt;
    double r = 0;
    double i = 0;
    for (int j = 0; j < 2; j++) {
      double e = Math.exp(p[4 * j + 2] * k);
      double c = e * Math.cos(p[4 * j + 3] * k);
      double s = e * Math.sin(p[4 * j + 3] * k);
      r += p[4 * j] * c - p[4 * j + 1] * s;
      i += p[4 * j] * s + p[4 * j + 1] * c;
    }
    return new double[] {r, i};
  }

  private double magnitude(double[] p, double seconds) {
    double[] z = at(p, seconds);
    return Math.hypot(z[0], z[1]);
  }

  private double oneOverE(double[] p) {
    double target = magnitude(p, 0) / Math.E;
    double longest = -dt / Math.max(p[2], p[6]);
    double low = 0;
    double high = longest / 256;
    while (magnitude(p, high) > target && high < 100 * longest) {
      low = high;
      high += longest / 64;
    }
    for (int i = 0; i < 60; i++) {
      double mid = (low + high) / 2;
      if (magnitude(p, mid) > target) {
        low = mid;
      } else {
        high = mid;
      }
    }
    return (low + high) / 2;
  }

  /** Full width at half height of the absorption line, phased for the joint phase at time zero. */
  private double linewidth(double[] p) {
    double[] z0 = at(p, 0);
    double phase = Math.atan2(z0[1], z0[0]);
    double wide = Math.max(-p[2], -p[6]) / dt;
    double narrow = Math.max(Math.min(-p[2], -p[6]) / dt, NARROWEST * wide);
    double low = Math.min(p[3], p[7]) / dt;
    double high = Math.max(p[3], p[7]) / dt;
    double top = -1;
    double centre = low;
    for (int i = 0; i <= 400; i++) {
      double w = low - narrow + (high - low + 2 * narrow) * i / 400;
      double y = absorption(p, w, phase);
      if (y > top) {
        top = y;
        centre = w;
      }
    }
    double width = 0;
    for (int side = -1; side <= 1; side += 2) {
      double in = 0;
      double out = narrow / 4;
      while (absorption(p, centre + side * out, phase) > top / 2 && out < 100 * wide) {
        in = out;
        // In proportion: even steps would take wide/narrow of them, which has no bound.
        out *= 1.1;
      }
      for (int i = 0; i < 50; i++) {
        double mid = (in + out) / 2;
        if (absorption(p, centre + side * mid, phase) > top / 2) {
          in = mid;
        } else {
          out = mid;
        }
      }
      width += in;
    }
    return width / (2 * Math.PI);
  }

  private double absorption(double[] p, double omega, double phase) {
    double y = 0;
    for (int j = 0; j < 2; j++) {
      double alpha = -p[4 * j + 2] / dt;
      double w = p[4 * j + 3] / dt;
      double k = -t0 / dt;
      double e = Math.exp(p[4 * j + 2] * k);
      double angle = p[4 * j + 3] * k - phase;
      double cr = e * (p[4 * j] * Math.cos(angle) - p[4 * j + 1] * Math.sin(angle));
      double ci = e * (p[4 * j] * Math.sin(angle) + p[4 * j + 1] * Math.cos(angle));
      double d = omega - w;
      // Re of c/(alpha + i d)
      y += (cr * alpha + ci * d) / (alpha * alpha + d * d);
    }
    return y;
  }

  private Measured measured(Quantity quantity, Unit unit) {
    double[] p = parameters();
    double value = quantity.of(p);
    // Order in the inverse matrix: all amplitudes, then all lambdas.
    int[] row = {0, fit.terms, 1, fit.terms + 1};
    int[] place = {0, 2, 4, 6};
    double[] gRe = new double[4];
    double[] gIm = new double[4];
    for (int i = 0; i < 4; i++) {
      for (int part = 0; part < 2; part++) {
        int k = place[i] + part;
        double kept = p[k];
        double sd = sigma * Math.sqrt(fit.inverseRe[row[i]][row[i]]);
        double h = Math.max(1e-3 * sd, 1e-12 * Math.abs(kept));
        p[k] = kept + h;
        double up = quantity.of(p);
        p[k] = kept - h;
        double down = quantity.of(p);
        p[k] = kept;
        if (part == 0) {
          gRe[i] = (up - down) / (2 * h);
        } else {
          gIm[i] = (up - down) / (2 * h);
        }
      }
    }
    double variance = 0;
    for (int i = 0; i < 4; i++) {
      for (int j = 0; j < 4; j++) {
        double hr = fit.inverseRe[row[i]][row[j]];
        double hi = fit.inverseIm[row[i]][row[j]];
        // Re(conj(g_i) H_ij g_j)
        double tr = hr * gRe[j] - hi * gIm[j];
        double ti = hr * gIm[j] + hi * gRe[j];
        variance += gRe[i] * tr + gIm[i] * ti;
      }
    }
    return Measured.of(value, sigma * Math.sqrt(Math.max(0, variance)), unit);
  }
}
