package coilside.fit;

import coilside.quantity.Measured;
import coilside.quantity.Unit;

/** What T2 and T2* together say of the magnet, and what diffusion does to an echo train. */
public final class MagnetPart {
  private MagnetPart() {}

  /**
   * The magnet's own decay time: 1/T2' = 1/T2* - 1/T2 (exponential decays).
   *
   * @throws NotDetermined when T2* is not shorter than T2 by twice the uncertainty of the
   *     difference
   */
  public static Measured decayTime(Measured t2Star, Measured t2) throws NotDetermined {
    double rate = 1 / t2Star.value() - 1 / t2.value();
    double u =
        Math.hypot(
            t2Star.u() / (t2Star.value() * t2Star.value()), t2.u() / (t2.value() * t2.value()));
    if (!(rate > 2 * u)) {
      throw NotDetermined.of(
          NotDetermined.Reason.TOO_NOISY,
          String.format(
              java.util.Locale.ROOT,
              "T2* %.4g s and T2 %.4g s do not differ by more than their uncertainties",
              t2Star.value(),
              t2.value()),
          "the magnet is better than this sample shows, or both need more scans");
    }
    return Measured.of(1 / rate, u / (rate * rate), Unit.SECOND);
  }

  /** The magnet's part of the linewidth, 1/(pi T2'), Hz. */
  public static Measured linewidth(Measured t2Star, Measured t2) throws NotDetermined {
    Measured t = decayTime(t2Star, t2);
    return Measured.of(
        1 / (Math.PI * t.value()), t.u() / (Math.PI * t.value() * t.value()), Unit.HERTZ);
  }

  /**
   * The rate that diffusion in a gradient adds to an echo train's decay: (gamma G)^2 D TE^2/12
   * (Carr and Purcell, Phys. Rev. 94, 630-638, 1954), 1/s.
   *
   * @param gammaRadians gyromagnetic ratio, rad/(s T)
   * @param teslaPerMetre gradient, T/m
   * @param diffusion self-diffusion coefficient, m^2/s
   * @param echoSpacingSeconds from echo to echo, s
   */
  public static double diffusionRate(
      double gammaRadians, double teslaPerMetre, double diffusion, double echoSpacingSeconds) {
    double g = gammaRadians * teslaPerMetre * echoSpacingSeconds;
    return g * g * diffusion / 12;
  }
}
