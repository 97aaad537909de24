package coilside.board.profile;

import java.util.OptionalDouble;

/**
 * What the operator says about the bench behind the board; its limits are already worked into
 * {@link DeviceProfile#limits()}.
 *
 * @param coil note on coil and tuning; may be empty
 * @param lowestResonanceHertz where the search for the resonance begins, Hz; empty when not told
 * @param highestResonanceHertz where it ends, Hz; empty when not told
 * @param amplitude default transmit amplitude, 0..1
 */
public record OperatorSection(
    String coil,
    OptionalDouble lowestResonanceHertz,
    OptionalDouble highestResonanceHertz,
    double amplitude) {}
