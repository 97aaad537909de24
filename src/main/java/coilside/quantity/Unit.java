package coilside.quantity;

/** A coherent SI unit (or the decibel, or one) in which values are held inside the program. */
public enum Unit {
  ONE("1", ""),
  HERTZ("Hz", "Hz"),
  SECOND("s", "s"),
  TESLA("T", "T"),
  VOLT("V", "V"),
  VOLT_PER_ROOT_HERTZ("V/Hz^0.5", "V/√Hz"),
  DECIBEL("dB", "dB"),
  RADIAN("rad", "rad"),
  CELSIUS("degC", "°C"),
  HERTZ_PER_SECOND("Hz/s", "Hz/s");

  private final String symbol;
  private final String pretty;

  Unit(String symbol, String pretty) {
    this.symbol = symbol;
    this.pretty = pretty;
  }

  /** The ASCII symbol used in JSON, CSV and metadata; "1" for a pure number. */
  public String symbol() {
    return symbol;
  }

  /** The symbol shown to people, possibly with characters beyond ASCII; empty for a pure number. */
  public String pretty() {
    return pretty;
  }

  /** The unit with this ASCII symbol. */
  public static Unit ofSymbol(String symbol) {
    for (Unit unit : values()) {
      if (unit.symbol.equals(symbol)) {
        return unit;
      }
    }
    throw new IllegalArgumentException("unknown unit symbol '" + symbol + "'");
  }
}
