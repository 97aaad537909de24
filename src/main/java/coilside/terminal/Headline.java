package coilside.terminal;

import coilside.bench.Picture;
import coilside.quantity.Measured;
import coilside.quantity.Unit;
import coilside.signal.Fid;
import java.util.EnumMap;
import java.util.Map;

/** One of the numbers that are watched while tuning and shimming. */
enum Headline {
  LINEWIDTH("linewidth", -1),
  T2STAR("T2*", 1),
  AMPLITUDE("amplitude", 1),
  SNR("SNR", 1),
  FREQUENCY("frequency", 0);

  final String words;

  /** +1 where larger is better, -1 where smaller is, 0 where neither. */
  final int better;

  Headline(String words, int better) {
    this.words = words;
    this.better = better;
  }

  Headline next(int by) {
    return values()[Math.floorMod(ordinal() + by, values().length)];
  }

  /**
   * The numbers of a decay with its fit; empty where there is no fit. The fit's samples give the
   * values (they are free of noise), the residuals the noise, and the Cramer-Rao bound of one
   * complex exponential with amplitude, phase, frequency and decay free the standard uncertainties:
   * var(alpha) = var(omega) = sigma^2 S0/(A^2 D), D = S0 S2 - S1^2, S_k = sum t^k exp(-2 alpha t).
   */
  static Map<Headline, Measured> of(Picture.Trace trace) {
    Map<Headline, Measured> out = new EnumMap<>(Headline.class);
    if (trace.fit().isEmpty()) {
      return out;
    }
    Fid fid = trace.fid();
    Fid fit = trace.fit().get();
    int n = Math.min(fid.points(), fit.points());
    int from = Math.max(0, Math.min(n - 2, trace.usedFrom()));
    if (n < 8 || from < 0) {
      return out;
    }
    double start = fit.magnitude(from);
    int to = from + 1;
    while (to < n - 1 && fit.magnitude(to) > 0.3 * start) {
      to++;
    }
    double alpha = Math.log(start / fit.magnitude(to)) / ((to - from) * fit.dwellSeconds());
    if (!(alpha > 0) || !Double.isFinite(alpha) || !(start > 0)) {
      return out;
    }
    double re = fit.re(from + 1) * fit.re(from) + fit.im(from + 1) * fit.im(from);
    double im = fit.im(from + 1) * fit.re(from) - fit.re(from + 1) * fit.im(from);
    double offset = Math.atan2(im, re) / (2 * Math.PI * fit.dwellSeconds());
    double amplitude = start * Math.exp(alpha * fit.time(from));
    double s0 = 0;
    double s1 = 0;
    double s2 = 0;
    double squares = 0;
    for (int k = from; k < n; k++) {
      double t = fid.time(k);
      double w = Math.exp(-2 * alpha * t);
      s0 += w;
      s1 += t * w;
      s2 += t * t * w;
      double dr = fid.re(k) - fit.re(k);
      double di = fid.im(k) - fit.im(k);
      squares += dr * dr + di * di;
    }
    double sigma = Math.sqrt(squares / (2.0 * (n - from)));
    double d = s0 * s2 - s1 * s1;
    double uAlpha = sigma / amplitude * Math.sqrt(s0 / d);
    double uAmplitude = sigma * Math.sqrt(s2 / d);
    if (!Double.isFinite(uAlpha) || !Double.isFinite(uAmplitude)) {
      return out;
    }
    out.put(LINEWIDTH, Measured.of(alpha / Math.PI, uAlpha / Math.PI, Unit.HERTZ));
    out.put(T2STAR, Measured.of(1 / alpha, uAlpha / (alpha * alpha), Unit.SECOND));
    out.put(AMPLITUDE, Measured.of(amplitude, uAmplitude, Unit.VOLT));
    if (sigma > 0) {
      double snr = amplitude / sigma;
      double relative = Math.hypot(uAmplitude / amplitude, 1 / Math.sqrt(4.0 * (n - from)));
      out.put(SNR, Measured.of(snr, snr * relative, Unit.ONE));
    }
    out.put(
        FREQUENCY, Measured.of(fid.carrierHertz() + offset, uAlpha / (2 * Math.PI), Unit.HERTZ));
    return out;
  }
}
