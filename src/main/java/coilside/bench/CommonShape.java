package coilside.bench;

import coilside.fit.DecayFit;
import coilside.fit.DecayResult;
import coilside.fit.NotDetermined;
import coilside.shot.Shot;
import coilside.signal.Averager;
import coilside.signal.Fid;
import coilside.signal.MatchedProjection;
import coilside.signal.Scan;
import java.util.ArrayList;
import java.util.List;

/**
 * The amplitudes of a run's scans on the decay they share: complex, at the pulse's centre, turned
 * back by the phase of the scan's last pulse.
 *
 * @param indices which scans of the run they belong to (those with a pulse)
 * @param fids those scans' FIDs without the DC offset
 * @param re real parts, V
 * @param im imaginary parts, V
 * @param u standard uncertainty of each part, V
 * @param decay the shared decay
 * @param quiet what the receive-only scan said
 * @param track where the line stood from scan to scan
 */
record CommonShape(
    List<Integer> indices,
    List<Fid> fids,
    double[] re,
    double[] im,
    double[] u,
    DecayResult decay,
    Quiet quiet,
    LineTrack track) {

  /** u(T2*)/T2* at which a shape still projects well: its error enters amplitudes squared. */
  private static final double LOOSE = 0.5;

  /**
   * The rate at which the FIDs decay as the projection sees it, 1/s: minus the derivative of the
   * shape projected on the shape. For an exponential 1/T2*, for any other form the weighted mean,
   * |s(first)|^2/(2 integral |s|^2).
   */
  double decayRate() {
    Fid shape = decay.shape(fids.get(0));
    double sum = 0;
    for (int k = 0; k < shape.points(); k++) {
      sum += Math.pow(shape.magnitude(k), 2);
    }
    double first = Math.pow(shape.magnitude(0), 2);
    double last = Math.pow(shape.magnitude(shape.points() - 1), 2);
    return (first - last) / ((2 * sum - first - last) * shape.dwellSeconds());
  }

  /** From the scans of a run, the receive-only one among them. */
  static CommonShape of(List<Shot> shots, List<Scan> scans) throws NotMeasurable {
    Quiet quiet = Quiet.of(shots, scans);
    List<Integer> indices = new ArrayList<>();
    List<Fid> fids = new ArrayList<>();
    for (int i = 0; i < shots.size(); i++) {
      if (!shots.get(i).receiveOnly()) {
        indices.add(i);
        fids.add(quiet.strip(scans.get(i).fid()));
      }
    }
    double[] seconds = new double[indices.size()];
    double now = 0;
    for (int i = 0, j = 0; i < shots.size(); i++) {
      now += scans.get(i).restSeconds() + shots.get(i).playedSeconds();
      if (!shots.get(i).receiveOnly()) {
        seconds[j++] = now;
      }
    }
    LineTrack track = LineTrack.of(fids, seconds);
    fids = track.steadied(fids);
    DecayResult decay;
    try {
      decay = sharedDecay(fids, quiet.sigma());
    } catch (NotMeasurable e) {
      throw track.named(e);
    }
    int n = fids.size();
    double[] re = new double[n];
    double[] im = new double[n];
    double[] u = new double[n];
    for (int j = 0; j < n; j++) {
      Fid fid = fids.get(j);
      MatchedProjection p =
          MatchedProjection.onShape(List.of(fid), decay.shape(fid), quiet.sigma());
      double phase = BenchShots.readingPhase(shots.get(indices.get(j)));
      re[j] = p.re(0) * Math.cos(phase) + p.im(0) * Math.sin(phase);
      im[j] = p.im(0) * Math.cos(phase) - p.re(0) * Math.sin(phase);
      u[j] = Math.hypot(p.uncertainty(), quiet.uOffset() * constant(p.shape()));
    }
    return new CommonShape(indices, fids, re, im, u, decay, quiet, track);
  }

  /** What the projection on this shape makes of a constant of 1. */
  private static double constant(Fid shape) {
    double re = 0;
    double im = 0;
    double norm = 0;
    for (int k = 0; k < shape.points(); k++) {
      re += shape.re(k);
      im += shape.im(k);
      norm += Math.pow(shape.magnitude(k), 2);
    }
    return Math.hypot(re, im) / norm;
  }

  /** The decay of the strong scans, each turned so that it adds up. */
  private static DecayResult sharedDecay(List<Fid> fids, double sigma) throws NotMeasurable {
    MatchedProjection first = MatchedProjection.bySingularVector(fids, sigma);
    double top = 0;
    for (int j = 0; j < fids.size(); j++) {
      top = Math.max(top, Math.abs(first.amplitude(j).value()));
    }
    if (top < 4 * first.uncertainty()) {
      throw new NotMeasurable(
          String.format(
              java.util.Locale.ROOT,
              "no scan stands out of the noise: the largest amplitude is %.1f of its uncertainty",
              top / first.uncertainty()),
          List.of(
              "the resonance has moved away: measure the resonance rung again",
              "the pulse does not reach the coil, or the sample is gone"));
    }
    Averager average = new Averager();
    for (int j = 0; j < fids.size(); j++) {
      double a = first.amplitude(j).value();
      if (Math.abs(a) > 0.4 * top) {
        average.add(fids.get(j), a > 0 ? 0 : Math.PI);
      }
    }
    try {
      return DecayFit.fit(
          average.mean(),
          DecayFit.Options.usual().withScans(average.count()).withLargestRelative(LOOSE));
    } catch (NotDetermined e) {
      throw Readings.refused("the decay that the scans share is not determined", e);
    }
  }
}
