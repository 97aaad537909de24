package coilside.bench;

import coilside.board.BoardException;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.signal.Fid;
import coilside.signal.NoiseEstimate;
import coilside.signal.Scan;
import java.util.List;

/**
 * What a capture's own receive-only scan says of the receiver at this gain and dwell time: its
 * noise and its DC offset, which is taken off the scans with a pulse.
 *
 * @param sigma noise of one real channel, one sample, V
 * @param offsetRe DC offset, V
 * @param offsetIm DC offset, V
 * @param uOffset standard uncertainty of each part of the offset, V
 */
record Quiet(double sigma, double offsetRe, double offsetIm, double uOffset) {
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
              noise.offsetRe().u());
        } catch (IllegalArgumentException e) {
          throw new NotMeasurable(
              "the receive-only scan cannot be used: " + e.getMessage(),
              List.of("measure the noise rung again: it says more"));
        }
      }
    }
    throw new IllegalArgumentException("the capture holds no receive-only scan");
  }

  /** The FID without the DC offset. */
  Fid strip(Fid fid) {
    double[] re = new double[fid.points()];
    double[] im = new double[fid.points()];
    for (int k = 0; k < re.length; k++) {
      re[k] = fid.re(k) - offsetRe;
      im[k] = fid.im(k) - offsetIm;
    }
    return new Fid(re, im, fid.dwellSeconds(), fid.startSeconds(), fid.carrierHertz());
  }
}
