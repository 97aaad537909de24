package coilside.quantity;

/**
 * A nucleus that benches look at.
 *
 * <p>Frequencies follow the unified scale of IUPAC (R. K. Harris et al., Pure Appl. Chem. 73,
 * 1795-1818, 2001): in one field, f_X = f_H . ratio/100. The proton stands for water, 25 degC, a
 * sphere (CODATA 2022). The ratios belong to reference compounds, the proton's to
 * tetramethylsilane, which lies about 4.8 ppm from water; the uncertainty of the other nuclei's
 * Hz/T covers that with 5 ppm. Samples with other chemical shifts lie further off.
 */
public enum Nucleus {
  /** The shielded proton in water. */
  HYDROGEN_1("1H", 0.5, 99.9885, 26.752_2128e7, 100.000_000),
  HYDROGEN_2("2H", 1, 0.0115, 4.106_627_91e7, 15.350_609),
  LITHIUM_7("7Li", 1.5, 92.41, 10.397_7013e7, 38.863_797),
  BORON_11("11B", 1.5, 80.1, 8.584_7044e7, 32.083_974),
  CARBON_13("13C", 0.5, 1.07, 6.728_284e7, 25.145_020),
  FLUORINE_19("19F", 0.5, 100, 25.181_48e7, 94.094_011),
  SODIUM_23("23Na", 1.5, 100, 7.080_8493e7, 26.451_900),
  PHOSPHORUS_31("31P", 0.5, 100, 10.839_4e7, 40.480_742);

  private static final double REFERENCE_SHIFT = 5e-6;

  private final String symbol;
  private final double spin;
  private final double abundancePercent;
  private final double gyromagneticRatio;
  private final double frequencyRatioPercent;

  Nucleus(
      String symbol,
      double spin,
      double abundancePercent,
      double gyromagneticRatio,
      double frequencyRatioPercent) {
    this.symbol = symbol;
    this.spin = spin;
    this.abundancePercent = abundancePercent;
    this.gyromagneticRatio = gyromagneticRatio;
    this.frequencyRatioPercent = frequencyRatioPercent;
  }

  /** The usual symbol, mass number first: "1H". */
  public String symbol() {
    return symbol;
  }

  /** Spin quantum number. */
  public double spin() {
    return spin;
  }

  /** Natural abundance, percent. */
  public double abundancePercent() {
    return abundancePercent;
  }

  /** Of the bare nucleus, rad/s/T; not what to tune by. */
  public double gyromagneticRatio() {
    return gyromagneticRatio;
  }

  /** Frequency of the reference compound where the protons of tetramethylsilane have 100. */
  public double frequencyRatioPercent() {
    return frequencyRatioPercent;
  }

  /** |gamma|/2 pi as tuned for, Hz/T. */
  public double larmorHertzPerTesla() {
    return Constant.SHIELDED_PROTON_HERTZ_PER_TESLA.value() * frequencyRatioPercent / 100;
  }

  /** Standard uncertainty of {@link #larmorHertzPerTesla()}, Hz/T. */
  public double standardUncertainty() {
    return this == HYDROGEN_1
        ? Constant.SHIELDED_PROTON_HERTZ_PER_TESLA.u()
        : REFERENCE_SHIFT * larmorHertzPerTesla();
  }

  /** The nucleus with this symbol. */
  public static Nucleus ofSymbol(String symbol) {
    StringBuilder known = new StringBuilder();
    for (Nucleus nucleus : values()) {
      if (nucleus.symbol.equalsIgnoreCase(symbol.strip())) {
        return nucleus;
      }
      known.append(known.isEmpty() ? "" : ", ").append(nucleus.symbol);
    }
    throw new IllegalArgumentException(
        "nucleus '" + Quantities.clean(symbol) + "' is not known; known are " + known);
  }
}
