package coilside.terminal;

import coilside.signal.Spectrum;
import java.util.Arrays;
import java.util.Optional;

/**
 * The largest peak of a magnitude spectrum, as a guide to the eye; no measured value comes from it.
 *
 * @param offsetHertz where it stands, from the carrier
 * @param widthHertz full width at half height of the magnitude
 */
record Peak(double offsetHertz, double widthHertz) {
  private static final double CLEAR_OF_NOISE = 6;

  /** Empty where no peak stands clear of the noise. */
  static Optional<Peak> of(Spectrum s, double[] magnitude, double noise) {
    int p = 0;
    for (int k = 1; k < magnitude.length; k++) {
      if (magnitude[k] > magnitude[p]) {
        p = k;
      }
    }
    if (!(magnitude[p] > CLEAR_OF_NOISE * noise)) {
      return Optional.empty();
    }
    double width = (crossing(magnitude, p, 1) - crossing(magnitude, p, -1)) * s.stepHertz();
    return Optional.of(new Peak(s.offsetHertz(p), width));
  }

  /** Noise of one component, from the median of a Rayleigh-distributed magnitude. */
  static double baseline(double[] magnitude) {
    double[] sorted = magnitude.clone();
    Arrays.sort(sorted);
    return sorted[sorted.length / 2] / Math.sqrt(2 * Math.log(2));
  }

  private static double crossing(double[] m, int peak, int step) {
    double half = m[peak] / 2;
    for (int k = peak + step; k >= 0 && k < m.length; k += step) {
      if (m[k] <= half) {
        double f = (m[k - step] - half) / (m[k - step] - m[k]);
        return k - step + step * f;
      }
    }
    return step < 0 ? 0 : m.length - 1.0;
  }

  /** Some widths about it, between round numbers. */
  double[] around() {
    double half = Math.pow(10, Math.ceil(Math.log10(6 * widthHertz) * 3) / 3);
    double centre = Math.rint(offsetHertz / (half / 4)) * (half / 4);
    return new double[] {centre - half, centre + half};
  }

  String text() {
    return "; peak at " + Numbers.si(offsetHertz, "Hz", 4);
  }
}
