package coilside.fit;

/**
 * The signed amplitude of one recovery measurement.
 *
 * @param recoverySeconds between the centre of the preparing pulse and that of the reading pulse, s
 * @param amplitude along the run's common phase, with its sign, V
 * @param u its standard uncertainty, V
 * @param restSeconds between the reading pulse before and the preparing pulse, s; infinite for full
 *     recovery. Unused for saturation recovery
 */
public record RecoveryPoint(
    double recoverySeconds, double amplitude, double u, double restSeconds) {
  boolean usable() {
    return recoverySeconds >= 0
        && Double.isFinite(recoverySeconds)
        && Double.isFinite(amplitude)
        && u > 0
        && Double.isFinite(u)
        && restSeconds >= 0;
  }
}
