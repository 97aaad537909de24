package coilside.quantity;

/**
 * A constant of physics with where it comes from.
 *
 * @param name its name in words
 * @param value in {@code unit}
 * @param u standard uncertainty in {@code unit}; 0 where the value is exact by definition
 * @param unit SI unit symbol
 * @param source the adjustment or table it was taken from
 */
public record Constant(String name, double value, double u, String unit, String source) {
  private static final String CODATA_2022 = "CODATA 2022, NIST ASCII table";

  /** Gyromagnetic ratio over 2 pi of the proton in water, sphere, 25 degC: the one to tune by. */
  public static final Constant SHIELDED_PROTON_HERTZ_PER_TESLA =
      codata("shielded proton gyromagnetic ratio over 2 pi", 42.576_385_43e6, 0.17, "Hz/T");

  /** The same in angular measure. */
  public static final Constant SHIELDED_PROTON =
      codata("shielded proton gyromagnetic ratio", 2.675_153_194e8, 1.1, "rad/s/T");

  /** Gyromagnetic ratio over 2 pi of the free proton. */
  public static final Constant PROTON_HERTZ_PER_TESLA =
      codata("proton gyromagnetic ratio over 2 pi", 42.577_478_461e6, 0.018, "Hz/T");

  public static final Constant PROTON_SHIELDING =
      codata("proton magnetic shielding correction in water", 2.567_15e-5, 4.1e-9, "1");

  public static final Constant MAGNETIC_CONSTANT =
      codata("vacuum magnetic permeability", 1.256_637_061_27e-6, 2.0e-16, "N/A^2");

  public static final Constant BOLTZMANN = codata("Boltzmann constant", 1.380_649e-23, 0, "J/K");

  public static final Constant PLANCK = codata("Planck constant", 6.626_070_15e-34, 0, "J/Hz");

  public static final Constant AVOGADRO = codata("Avogadro constant", 6.022_140_76e23, 0, "1/mol");

  private static Constant codata(String name, double value, double u, String unit) {
    return new Constant(name, value, u, unit, CODATA_2022);
  }
}
