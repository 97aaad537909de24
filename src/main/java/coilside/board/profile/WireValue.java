package coilside.board.profile;

/**
 * How one named value travels: the number on the wire is {@code (x / unitInSi) * scale + offset},
 * rounded to the nearest multiple of {@code step}, then written in {@code format}; x is the value
 * in SI.
 *
 * <p>Angles are first wrapped to 0 (inclusive) .. one turn (exclusive); a result that rounds up to
 * a full turn is sent as 0 turns.
 *
 * @param name which value
 * @param unit the unit as written in the profile: "us", "quarter-turn", "tick"
 * @param unitInSi one such unit in SI: 1e-6 for "us", pi/2 for "quarter-turn"
 * @param scale factor from units to the number on the wire: 4095 for a DAC code of "fraction"
 * @param offset added after the scale
 * @param step grain of the number on the wire, &gt;= 0; 0 leaves rounding to the format
 * @param format how the number is written
 */
public record WireValue(
    ValueName name,
    String unit,
    double unitInSi,
    double scale,
    double offset,
    double step,
    NumberFormat format) {
  public WireValue {
    if (!(unitInSi > 0) || scale == 0 || !Double.isFinite(scale) || !(step >= 0)) {
      throw new IllegalArgumentException(
          "unit " + unitInSi + ", scale " + scale + ", step " + step + " of " + name);
    }
  }
}
