package coilside.terminal;

import coilside.board.BoardLimits;
import java.util.List;

/** What has to be read before the transmitter is let loose. */
final class Cautions {
  private Cautions() {}

  static List<String> text(BoardLimits limits) {
    return List.of(
        "This lets the board send radio-frequency power into the coil.",
        "- Never on people or animals, nor on anything they are connected to.",
        "- Coil, tuning capacitors and cables carry high voltage during a pulse: hands off. RF burns.",
        "- The magnet: keep people with pacemakers or other implants away; keep iron away.",
        "- The amplifier must stand pulses up to "
            + Numbers.si(limits.pulseSeconds().max(), "s", 3)
            + " at a duty cycle up to "
            + Numbers.si(limits.maxDutyCycle() * 100, "%", 3)
            + ", and have coil or load connected.",
        "- Emission: what leaves the shield may disturb others. You answer for it.");
  }
}
