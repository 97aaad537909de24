package coilside.spin;

/**
 * A magnetisation in the rotating frame, relative to equilibrium; see the package's conventions.
 *
 * @param x transverse, along phase 0
 * @param y transverse, a quarter turn on
 * @param z longitudinal, 1 at equilibrium
 */
public record Magnetisation(double x, double y, double z) {
  public static final Magnetisation EQUILIBRIUM = new Magnetisation(0, 0, 1);

  /** Size of the transverse part, what the coil sees. */
  public double transverse() {
    return Math.hypot(x, y);
  }

  /** Phase of the transverse part, rad. */
  public double phase() {
    return Math.atan2(y, x);
  }

  /**
   * A pulse without relaxation: the turn about the effective field.
   *
   * @param seconds width, s
   * @param nutationHertz nutation rate on resonance, Hz
   * @param phaseRadians phase of the pulse, rad
   * @param offsetHertz Larmor frequency above the carrier, Hz
   */
  public Magnetisation pulsed(
      double seconds, double nutationHertz, double phaseRadians, double offsetHertz) {
    double effective = Math.hypot(nutationHertz, offsetHertz);
    if (effective == 0 || seconds == 0) {
      return this;
    }
    double nx = nutationHertz * Math.cos(phaseRadians) / effective;
    double ny = nutationHertz * Math.sin(phaseRadians) / effective;
    double nz = offsetHertz / effective;
    double turns = effective * seconds;
    double angle = 2 * Math.PI * (turns - Math.rint(turns));
    double c = Math.cos(angle);
    double s = Math.sin(angle);
    double along = (nx * x + ny * y + nz * z) * (1 - c);
    return new Magnetisation(
        x * c + (ny * z - nz * y) * s + nx * along,
        y * c + (nz * x - nx * z) * s + ny * along,
        z * c + (nx * y - ny * x) * s + nz * along);
  }

  /**
   * Free precession with relaxation.
   *
   * @param seconds time, s
   * @param offsetHertz Larmor frequency above the carrier, Hz
   * @param t1Seconds T1, s; infinite for none
   * @param t2Seconds T2, s; infinite for none
   */
  public Magnetisation free(
      double seconds, double offsetHertz, double t1Seconds, double t2Seconds) {
    double turns = offsetHertz * seconds;
    double angle = 2 * Math.PI * (turns - Math.rint(turns));
    double decay = Math.exp(-seconds / t2Seconds);
    double c = decay * Math.cos(angle);
    double s = decay * Math.sin(angle);
    return new Magnetisation(
        x * c - y * s, x * s + y * c, 1 + (z - 1) * Math.exp(-seconds / t1Seconds));
  }
}
