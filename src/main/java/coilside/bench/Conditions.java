package coilside.bench;

import java.util.OptionalDouble;

/**
 * How the bench stood when something was measured. A change of one of these makes findings stale.
 *
 * @param board what the board says it is
 * @param profileDigest SHA-256 of the profile file, hex
 * @param carrierHertz carrier, Hz
 * @param amplitude transmit amplitude, 0..1
 * @param gainDecibels receiver gain, dB
 * @param sample what is in the coil, as the operator calls it
 * @param coil the operator's note on coil and tuning
 * @param temperatureCelsius where the board reports one
 */
public record Conditions(
    String board,
    String profileDigest,
    double carrierHertz,
    double amplitude,
    double gainDecibels,
    String sample,
    String coil,
    OptionalDouble temperatureCelsius) {}
