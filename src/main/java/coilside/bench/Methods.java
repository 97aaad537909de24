package coilside.bench;

import coilside.board.BoardLimits;
import java.util.EnumSet;
import java.util.List;
import java.util.Set;

/** Which method measures which rung, and which rungs a kind of board can serve at all. */
final class Methods {
  /** The fewest receive windows that make an echo train; with fewer, single echoes. */
  static final int FEWEST_ECHOES = 8;

  private Methods() {}

  static Method of(Rung rung) {
    return switch (rung) {
      case NOISE -> new NoiseMethod();
      case RESONANCE -> new ResonanceMethod();
      case GAIN -> new GainMethod();
      case RINGDOWN -> new RingDownMethod();
      case NUTATION -> new NutationMethod();
      case T1 -> new RecoveryMethod();
      case T2STAR -> new DecayMethod();
      case T2 -> new EchoTrainMethod();
    };
  }

  /** Whether the board can serve the rung. */
  static boolean possible(Rung rung, BoardLimits limits) {
    return rung != Rung.T2 || limits.arbitraryShots();
  }

  static Set<Rung> impossible(BoardLimits limits) {
    Set<Rung> out = EnumSet.noneOf(Rung.class);
    for (Rung rung : Rung.values()) {
      if (!possible(rung, limits)) {
        out.add(rung);
      }
    }
    return out;
  }

  /** Refuses a rung that the board cannot serve, with the reason. */
  static void check(Rung rung, BoardLimits limits) throws NotMeasurable {
    if (possible(rung, limits)) {
      return;
    }
    String reason = "T2 needs echoes, and this board plays only 'pulse then receive'";
    throw new NotMeasurable(
        reason,
        List.of("use a board, or a profile of this one, that plays shots of several steps"));
  }
}
