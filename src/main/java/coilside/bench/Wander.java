package coilside.bench;

import coilside.fit.DecayFit;
import coilside.fit.DecayResult;
import coilside.fit.NotDetermined;
import coilside.quantity.Measured;
import coilside.shot.Shot;
import coilside.signal.Scan;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Optional;

/**
 * How far the line moves from scan to scan: the frequencies of the single scans, as far as one scan
 * shows it, against their own uncertainties.
 *
 * @param scans how many scans showed the line
 * @param deviation standard deviation of their frequencies, Hz
 * @param alone standard uncertainty that a single scan's frequency has by itself (rms), Hz
 * @param linewidth of a single scan (mean), Hz
 */
record Wander(int scans, double deviation, double alone, double linewidth) {
  private static final int FEWEST = 3;
  private static final int MOST = 64;

  /** Ratio of variances that noise alone reaches with three scans once in 10000 times. */
  private static final double IMPROBABLE = 9.2;

  /** Part of the linewidth below which unequal receiver channels may be the cause. */
  private static final double PART = 0.02;

  /** From the single scans of a capture. */
  static Wander of(List<Shot> shots, List<Scan> scans) {
    List<Measured> seen = new ArrayList<>();
    double widths = 0;
    for (int i = 0; i < scans.size() && seen.size() < MOST; i++) {
      if (shots.get(i).receiveOnly()) {
        continue;
      }
      try {
        DecayResult fit =
            DecayFit.fit(
                scans.get(i).fid(),
                DecayFit.Options.usual()
                    .withForm(DecayFit.Form.ONE_EXPONENTIAL)
                    .withConstant(true));
        seen.add(fit.offsetHertz());
        widths += fit.linewidthHertz().value();
      } catch (NotDetermined e) {
        // One scan shows too little: how far it moves remains open.
      }
    }
    double sum = 0;
    double own = 0;
    for (Measured m : seen) {
      sum += m.value() / seen.size();
      own += m.u() * m.u() / seen.size();
    }
    double squares = 0;
    for (Measured m : seen) {
      squares += Math.pow(m.value() - sum, 2);
    }
    return new Wander(
        seen.size(),
        seen.size() < 2 ? 0 : Math.sqrt(squares / (seen.size() - 1)),
        Math.sqrt(own),
        widths / seen.size());
  }

  /** Whether the line moves more than noise explains. */
  boolean moves() {
    return scans >= FEWEST
        && deviation * deviation > IMPROBABLE * alone * alone
        && deviation > PART * linewidth;
  }

  /** The frequency with the uncertainty that its movement gives the mean of the scans. */
  Measured widen(Measured larmor) {
    if (!moves()) {
      return larmor;
    }
    double u = Math.hypot(larmor.u(), deviation / Math.sqrt(scans));
    return Measured.of(larmor.value(), u, larmor.unit());
  }

  Optional<String> warning() {
    return moves() ? Optional.of(movement(deviation, scans, alone)) : Optional.empty();
  }

  /** How a moving line is told, with its likely causes. */
  static String movement(double deviation, int scans, double alone) {
    return String.format(
        Locale.ROOT,
        "the line moves from scan to scan: %.3g Hz (standard deviation of %d scans), noise"
            + " explains %.2g Hz: mains hum in the field (a transformer or a motor nearby, a"
            + " ground loop), or a magnet that drifts or is shaken",
        deviation,
        scans,
        alone);
  }
}
