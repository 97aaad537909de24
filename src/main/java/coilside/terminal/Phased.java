package coilside.terminal;

import coilside.bench.Picture;
import coilside.bench.Rung;
import coilside.signal.Fid;
import coilside.signal.Phasing;
import coilside.signal.Spectrum;
import java.util.Optional;

/**
 * Turns a decay, its fit and its spectrum so that the fitted signal is real and positive at time
 * zero: the real part then shows the decay and the absorption line. Only the drawing is turned.
 */
final class Phased {
  private Phased() {}

  static boolean applies(Picture.Trace t) {
    return (t.rung() == Rung.T2STAR || t.rung() == Rung.RESONANCE)
        && t.fit().isPresent()
        && t.fit().get().points() > 2;
  }

  static Picture.Trace of(Picture.Trace t) {
    if (!applies(t)) {
      return t;
    }
    Fid fit = t.fit().get();
    int k = Math.max(0, Math.min(fit.points() - 2, t.usedFrom()));
    double re = fit.re(k + 1) * fit.re(k) + fit.im(k + 1) * fit.im(k);
    double im = fit.im(k + 1) * fit.re(k) - fit.re(k + 1) * fit.im(k);
    double turns = Math.atan2(im, re) / fit.dwellSeconds();
    double phase = Math.atan2(fit.im(k), fit.re(k)) - turns * fit.time(k);
    if (!Double.isFinite(phase)) {
      return t;
    }
    Optional<Spectrum> spectrum =
        t.spectrum().map(s -> Phasing.forStart(phase, t.fid().startSeconds()).apply(s));
    return new Picture.Trace(
        t.rung(),
        turned(t.fid(), phase),
        Optional.of(turned(fit, phase)),
        t.usedFrom(),
        spectrum,
        t.marks(),
        t.caption());
  }

  private static Fid turned(Fid fid, double phase) {
    int n = fid.points();
    double c = Math.cos(phase);
    double s = Math.sin(phase);
    double[] re = new double[n];
    double[] im = new double[n];
    for (int k = 0; k < n; k++) {
      re[k] = fid.re(k) * c + fid.im(k) * s;
      im[k] = fid.im(k) * c - fid.re(k) * s;
    }
    return new Fid(re, im, fid.dwellSeconds(), fid.startSeconds(), fid.carrierHertz());
  }
}
