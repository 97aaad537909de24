package coilside.spin;

import coilside.quantity.Constant;

/** Thermal magnetisation of a sample of spins one half. */
public final class Sample {
  private Sample() {}

  /** Polarisation tanh(h f/(2 k T)) at Larmor frequency f, Hz, and temperature T, K. */
  public static double polarisation(double larmorHertz, double kelvin) {
    return Math.tanh(
        Constant.PLANCK.value() * larmorHertz / (2 * Constant.BOLTZMANN.value() * kelvin));
  }

  /**
   * Magnetisation at rest, A/m: density times the moment (h/2)(gamma/2 pi) times the polarisation.
   *
   * @param spinsPerCubicMetre number density of the spins, 1/m^3
   * @param hertzPerTesla gamma/2 pi, Hz/T
   */
  public static double magnetisation(
      double spinsPerCubicMetre, double hertzPerTesla, double larmorHertz, double kelvin) {
    double moment = Constant.PLANCK.value() * hertzPerTesla / 2;
    return spinsPerCubicMetre * moment * polarisation(larmorHertz, kelvin);
  }
}
