package coilside.board;

/**
 * What a board can do and what the operator allows; SI units. The guard holds every shot against
 * these. "min" and "max" are inclusive; a step of 0 means continuous. Where {@code pulsePhases} is
 * false the board pulses with one phase only and the host turns the samples instead: the signal is
 * as if the pulse had that phase, but the receiver's DC offset and interference turn with it.
 */
public record BoardLimits(
    Range carrierHertz,
    Range gainDecibels,
    Range pulseSeconds,
    Range amplitude,
    Range waitSeconds,
    Range dwellSeconds,
    int minPoints,
    int maxPoints,
    int maxWindows,
    int maxSteps,
    int maxRepeats,
    double maxReceiveSeconds,
    double maxDutyCycle,
    double dutyWindowSeconds,
    boolean arbitraryShots,
    boolean pulsePhases,
    boolean repeatLoops,
    boolean settableReceivePhase,
    boolean reportsTemperature) {

  /** Limits of a board whose pulses have a phase of their own. */
  public BoardLimits(
      Range carrierHertz,
      Range gainDecibels,
      Range pulseSeconds,
      Range amplitude,
      Range waitSeconds,
      Range dwellSeconds,
      int minPoints,
      int maxPoints,
      int maxWindows,
      int maxSteps,
      int maxRepeats,
      double maxReceiveSeconds,
      double maxDutyCycle,
      double dutyWindowSeconds,
      boolean arbitraryShots,
      boolean repeatLoops,
      boolean settableReceivePhase,
      boolean reportsTemperature) {
    this(
        carrierHertz,
        gainDecibels,
        pulseSeconds,
        amplitude,
        waitSeconds,
        dwellSeconds,
        minPoints,
        maxPoints,
        maxWindows,
        maxSteps,
        maxRepeats,
        maxReceiveSeconds,
        maxDutyCycle,
        dutyWindowSeconds,
        arbitraryShots,
        true,
        repeatLoops,
        settableReceivePhase,
        reportsTemperature);
  }

  /**
   * An inclusive range with a step, in the unit of the field's name.
   *
   * @param min smallest allowed value
   * @param max largest allowed value
   * @param step distance between allowed values counted from 0; 0 where any value will do
   */
  public record Range(double min, double max, double step) {
    public Range {
      if (!(min <= max) || !(step >= 0)) {
        throw new IllegalArgumentException("range " + min + ".." + max + " step " + step);
      }
    }

    public boolean contains(double x) {
      // Each end has its own slack for rounding: that of 100 s would swallow an end at 1 us.
      return x >= min - 1e-10 * Math.abs(min) - 1e-15 && x <= max + 1e-10 * Math.abs(max) + 1e-15;
    }

    /** The nearest allowed value. */
    public double snap(double x) {
      double y = step > 0 ? Math.rint(x / step) * step : x;
      if (y < min) {
        y = step > 0 ? Math.ceil(min / step - 1e-9) * step : min;
      }
      if (y > max) {
        y = step > 0 ? Math.floor(max / step + 1e-9) * step : max;
      }
      return y;
    }

    /** What both ranges allow; the coarser step. Throws when they have nothing in common. */
    public Range narrowedBy(Range other) {
      return new Range(
          Math.max(min, other.min), Math.min(max, other.max), Math.max(step, other.step));
    }
  }
}
