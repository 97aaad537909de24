package coilside.quantity;

/**
 * A nucleus that benches look at.
 *
 * <p>{@code larmorHertzPerTesla} converts between the field and the Larmor frequency.
 */
public enum Nucleus {
  /** The shielded proton in water, 25 degC, spherical sample: CODATA 2022. */
  HYDROGEN_1("1H", 42.576_385_43e6, 0.17);

  private final String symbol;
  private final double larmorHertzPerTesla;
  private final double standardUncertainty;

  Nucleus(String symbol, double larmorHertzPerTesla, double standardUncertainty) {
    this.symbol = symbol;
    this.larmorHertzPerTesla = larmorHertzPerTesla;
    this.standardUncertainty = standardUncertainty;
  }

  /** The usual symbol, mass number first: "1H". */
  public String symbol() {
    return symbol;
  }

  /** |gamma|/2 pi as tuned for, Hz/T. */
  public double larmorHertzPerTesla() {
    return larmorHertzPerTesla;
  }

  /** Standard uncertainty of {@link #larmorHertzPerTesla()}, Hz/T. */
  public double standardUncertainty() {
    return standardUncertainty;
  }
}
