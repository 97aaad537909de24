package coilside.bench;

import coilside.board.BoardException;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.signal.Fid;
import coilside.signal.NoiseEstimate;
import coilside.signal.Scan;
import java.util.List;
import java.util.Optional;

/**
 * What a capture's own receive-only scan says of the receiver at this gain and dwell time: its
 * noise and its DC offset, which is taken off the scans with a pulse.
 *
 * @param sigma noise of one real channel, one sample, V
 * @param offsetRe DC offset, V
 * @param offsetIm DC offset, V
 * @param uOffset standard uncertainty of each part of the offset, V
 * @param linesHertz offsets of the interference lines that are there without a pulse, Hz
 */
record Quiet(
    double sigma, double offsetRe, double offsetIm, double uOffset, List<Double> linesHertz) {
  /** An offset alone. */
  Quiet(double sigma, double offsetRe, double offsetIm, double uOffset) {
    this(sigma, offsetRe, offsetIm, uOffset, List.of());
  }

  /** Lines closer to the carrier than so many widths of the record cannot be told from signal. */
  private static final double APART = 20;

  /** So many that the offset's uncertainty is small beside that of a scan's amplitude. */
  private static final int POINTS = 16384;

  /**
   * Plays the receive-only scan that belongs to shots like this one, after the same rest: what is
   * left of an earlier signal would pass for an offset.
   */
  static void play(Acquisition a, Shot like) throws BoardException {
    Receive window =
        (Receive) like.flat().stream().filter(Receive.class::isInstance).findFirst().orElseThrow();
    int points = Math.max(window.points(), Choices.points(a.limits(), POINTS));
    a.play(
        new Shot(
            like.carrierHertz(),
            like.gainDecibels(),
            like.restSeconds(),
            List.of(new Receive(points, window.dwellSeconds(), 0))));
  }

  /** From the receive-only scans of a capture. */
  static Quiet of(List<Shot> shots, List<Scan> scans) throws NotMeasurable {
    for (int i = 0; i < shots.size(); i++) {
      if (shots.get(i).receiveOnly()) {
        try {
          NoiseEstimate noise = NoiseEstimate.of(scans.get(i).fid());
          return new Quiet(
              noise.sigma().value(),
              noise.offsetRe().value(),
              noise.offsetIm().value(),
              noise.offsetRe().u(),
              noise.lines().stream().map(l -> l.offsetHertz().value()).toList());
        } catch (IllegalArgumentException e) {
          throw new NotMeasurable(
              "the receive-only scan cannot be used: " + e.getMessage(),
              List.of("measure the noise rung again: it says more"));
        }
      }
    }
    throw new IllegalArgumentException("the capture holds no receive-only scan");
  }

  /**
   * Whether the noise rung found interference, so that even a capture whose phase cycle rids it of
   * the offset needs a receive-only scan.
   */
  static boolean needed(Acquisition a) {
    return a.known()
        .finding(Rung.NOISE)
        .map(f -> f.warnings().stream().anyMatch(w -> w.startsWith("interference")))
        .orElse(false);
  }

  /** The receive-only scan of a capture, where it has one. */
  static Optional<Quiet> find(List<Shot> shots, List<Scan> scans) {
    if (shots.stream().noneMatch(Shot::receiveOnly)) {
      return Optional.empty();
    }
    try {
      return Optional.of(of(shots, scans));
    } catch (NotMeasurable e) {
      return Optional.empty();
    }
  }

  /**
   * The FID without the DC offset and without the interference lines, each with the amplitude and
   * phase it has in this FID: its phase follows no pulse.
   */
  Fid strip(Fid fid) {
    int n = fid.points();
    double[] re = new double[n];
    double[] im = new double[n];
    for (int k = 0; k < n; k++) {
      re[k] = fid.re(k) - offsetRe;
      im[k] = fid.im(k) - offsetIm;
    }
    double nearest = APART / (n * fid.dwellSeconds());
    for (int pass = 0; pass < 2; pass++) {
      for (double line : linesHertz) {
        if (Math.abs(line) > nearest) {
          takeOff(line * fid.dwellSeconds(), re, im);
        }
      }
    }
    return new Fid(re, im, fid.dwellSeconds(), fid.startSeconds(), fid.carrierHertz());
  }

  private static void takeOff(double turnsEach, double[] re, double[] im) {
    int n = re.length;
    double sumRe = 0;
    double sumIm = 0;
    for (int k = 0; k < n; k++) {
      double angle = 2 * Math.PI * turnsEach * k;
      double c = Math.cos(angle);
      double s = Math.sin(angle);
      sumRe += re[k] * c + im[k] * s;
      sumIm += im[k] * c - re[k] * s;
    }
    for (int k = 0; k < n; k++) {
      double angle = 2 * Math.PI * turnsEach * k;
      double c = Math.cos(angle) / n;
      double s = Math.sin(angle) / n;
      re[k] -= sumRe * c - sumIm * s;
      im[k] -= sumRe * s + sumIm * c;
    }
  }
}
