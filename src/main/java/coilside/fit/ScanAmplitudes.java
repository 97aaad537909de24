package coilside.fit;

import coilside.signal.Averager;
import coilside.signal.Fid;
import coilside.signal.MatchedProjection;
import java.util.List;

/**
 * The complex amplitudes of a run of scans, each projected on the decay that all of them share.
 *
 * <p>The scans are turned to one phase and weighted by their first amplitudes (from the first
 * singular vector), added, and the sum's decay is fitted; the projection on that decay gives better
 * amplitudes, with which it is done once more. Amplitudes are those at time zero.
 */
public final class ScanAmplitudes {
  private ScanAmplitudes() {}

  /**
   * Amplitudes and the decay they rest on.
   *
   * @param projection the amplitudes
   * @param decay the fit of the combined scans
   */
  public record Result(MatchedProjection projection, DecayResult decay) {
    /** Scan j as a point of a nutation curve. */
    public NutationPoint nutation(int j, double pulseSeconds, double recoverySeconds) {
      return new NutationPoint(
          pulseSeconds,
          projection.re(j),
          projection.im(j),
          projection.uncertainty(),
          recoverySeconds,
          decay.offsetHertz().value());
    }

    /** Scan j as a point of a recovery. */
    public RecoveryPoint recovery(int j, double recoverySeconds, double restSeconds) {
      return new RecoveryPoint(
          recoverySeconds, projection.amplitude(j).value(), projection.uncertainty(), restSeconds);
    }
  }

  /**
   * Projects scans that share one grid of samples.
   *
   * @param scans one FID a scan, DC offset removed or cycled away
   * @param sigma noise of one real channel, one sample, of one scan, V
   * @throws NotDetermined when the combined scans show no decay
   */
  public static Result of(List<Fid> scans, double sigma) throws NotDetermined {
    MatchedProjection p = MatchedProjection.bySingularVector(scans, sigma);
    DecayFit.Options options =
        DecayFit.Options.usual().withScans(scans.size()).withLargestRelative(0.5);
    DecayResult decay = null;
    for (int pass = 0; pass < 2; pass++) {
      decay = DecayFit.fit(combined(scans, p), options);
      p = MatchedProjection.onShape(scans, decay.shape(scans.get(0)), sigma);
    }
    return new Result(p, decay);
  }

  /**
   * Projects scans on a decay that is already known.
   *
   * @param decay from an earlier fit at the same carrier
   */
  public static Result onDecay(List<Fid> scans, DecayResult decay, double sigma) {
    return new Result(MatchedProjection.onShape(scans, decay.shape(scans.get(0)), sigma), decay);
  }

  /** The scans' best sum: each times the conjugate of its amplitude. */
  private static Fid combined(List<Fid> scans, MatchedProjection p) {
    Fid first = scans.get(0);
    int n = first.points();
    double[] re = new double[n];
    double[] im = new double[n];
    double norm = 0;
    for (int j = 0; j < scans.size(); j++) {
      norm += Math.hypot(p.re(j), p.im(j));
    }
    if (!(norm > 0)) {
      Averager average = new Averager();
      scans.forEach(average::add);
      return average.mean();
    }
    for (int j = 0; j < scans.size(); j++) {
      double c = p.re(j) / norm;
      double s = p.im(j) / norm;
      Fid fid = scans.get(j);
      for (int k = 0; k < n; k++) {
        re[k] += c * fid.re(k) + s * fid.im(k);
        im[k] += c * fid.im(k) - s * fid.re(k);
      }
    }
    return new Fid(re, im, first.dwellSeconds(), first.startSeconds(), first.carrierHertz());
  }
}
