package coilside.spin;

import coilside.quantity.Constant;

/**
 * What a tuned coil does: noise, ringing, pulse field, damping of the spins by their own signal.
 */
public final class Coil {
  private Coil() {}

  /**
   * Thermal noise of a resistance, V/Hz^0.5, one-sided: sqrt(4 k T R) (H. Nyquist, Phys. Rev. 32,
   * 110, 1928).
   */
  public static double noiseDensity(double ohms, double kelvin) {
    return Math.sqrt(4 * Constant.BOLTZMANN.value() * kelvin * ohms);
  }

  /** Time constant of the ringing's amplitude, s: 2 Q/omega. */
  public static double ringDownSeconds(double quality, double tunedHertz) {
    return quality / (Math.PI * tunedHertz);
  }

  /** The turning part of B1 that makes this 90-degree pulse, T: 1/(4 t90 gamma/2 pi). */
  public static double b1Tesla(double pulse90Seconds, double hertzPerTesla) {
    return 1 / (4 * pulse90Seconds * hertzPerTesla);
  }

  /**
   * The turning part of B1 for a power, T: sqrt(mu0 P Q/(2 omega V)), all of the coil's energy
   * taken to lie in its volume (D. I. Hoult and R. E. Richards, J. Magn. Reson. 24, 71-85, 1976).
   */
  public static double b1Tesla(double watts, double quality, double hertz, double cubicMetres) {
    double omega = 2 * Math.PI * hertz;
    return Math.sqrt(
        Constant.MAGNETIC_CONSTANT.value() * watts * quality / (2 * omega * cubicMetres));
  }

  /**
   * Time constant with which the coil's reaction damps the signal, s: 2/(mu0 eta Q gamma M0) (N.
   * Bloembergen and R. V. Pound, Phys. Rev. 95, 8-12, 1954; reference from memory).
   *
   * @param fillingFactor eta, 0..1
   * @param magnetisation M0, A/m
   */
  public static double radiationDampingSeconds(
      double fillingFactor, double quality, double hertzPerTesla, double magnetisation) {
    double gamma = 2 * Math.PI * hertzPerTesla;
    return 2
        / (Constant.MAGNETIC_CONSTANT.value() * fillingFactor * quality * gamma * magnetisation);
  }
}
