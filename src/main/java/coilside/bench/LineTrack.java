package coilside.bench;

import coilside.fit.DecayFit;
import coilside.fit.DecayResult;
import coilside.fit.NotDetermined;
import coilside.signal.Fid;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;

/**
 * Where the line stood in each scan of a run whose field moves: the frequency of every scan strong
 * enough to show it, drawn on to the weak ones between.
 *
 * @param offsets one a scan, Hz; empty when the line did not move more than noise explains
 * @param deviation standard deviation of those, Hz
 * @param alone what noise explains of that, Hz
 */
record LineTrack(double[] offsets, double deviation, double alone) {
  /** As in {@link Wander}. */
  private static final double IMPROBABLE = 9.2;

  private static final double PART = 0.02;
  private static final int FEWEST = 3;

  /**
   * From the scans of a run.
   *
   * @param seconds when each was taken
   */
  static LineTrack of(List<Fid> fids, double[] seconds) {
    int n = fids.size();
    double[] f = new double[n];
    double[] u = new double[n];
    double mean = 0;
    double weights = 0;
    double width = 0;
    int seen = 0;
    for (int j = 0; j < n; j++) {
      f[j] = Double.NaN;
      try {
        DecayResult fit =
            DecayFit.fit(
                fids.get(j), DecayFit.Options.usual().withForm(DecayFit.Form.ONE_EXPONENTIAL));
        f[j] = fit.offsetHertz().value();
        u[j] = fit.offsetHertz().u();
        mean += f[j] / (u[j] * u[j]);
        weights += 1 / (u[j] * u[j]);
        width += fit.linewidthHertz().value();
        seen++;
      } catch (NotDetermined e) {
        // A weak scan: its neighbours tell.
      }
    }
    if (seen < FEWEST) {
      return new LineTrack(new double[0], 0, 0);
    }
    mean /= weights;
    double chi = 0;
    for (int j = 0; j < n; j++) {
      chi += Double.isNaN(f[j]) ? 0 : Math.pow((f[j] - mean) / u[j], 2) / (seen - 1);
    }
    double deviation = Math.sqrt(chi * seen / weights);
    if (chi < IMPROBABLE || deviation < PART * width / seen) {
      return new LineTrack(new double[0], 0, 0);
    }
    double[] out = new double[n];
    for (int j = 0; j < n; j++) {
      out[j] = Double.isNaN(f[j]) ? between(f, seconds, j) : f[j];
    }
    return new LineTrack(out, deviation, deviation / Math.sqrt(chi));
  }

  private static double between(double[] f, double[] seconds, int at) {
    int before = at;
    while (before >= 0 && Double.isNaN(f[before])) {
      before--;
    }
    int after = at;
    while (after < f.length && Double.isNaN(f[after])) {
      after++;
    }
    if (before < 0) {
      return f[after];
    }
    if (after >= f.length) {
      return f[before];
    }
    double part = (seconds[at] - seconds[before]) / (seconds[after] - seconds[before]);
    return f[before] + part * (f[after] - f[before]);
  }

  boolean moved() {
    return offsets.length > 0;
  }

  /** What a line that moves is most likely to come from, with the figures. */
  Optional<String> cause() {
    return moved()
        ? Optional.of(Wander.movement(deviation, offsets.length, alone))
        : Optional.empty();
  }

  /** The refusal with the movement as its first cause, where the line moved. */
  NotMeasurable named(NotMeasurable plain) {
    List<String> causes = new ArrayList<>(plain.refusal().likelyCauses());
    cause().ifPresent(c -> causes.add(0, c));
    return new NotMeasurable(plain.refusal().reason(), causes);
  }

  /** The scans as if the line had stood at its mean offset all the time, time zero kept. */
  List<Fid> steadied(List<Fid> fids) {
    if (!moved()) {
      return fids;
    }
    double mean = 0;
    for (double f : offsets) {
      mean += f / offsets.length;
    }
    List<Fid> out = new ArrayList<>();
    for (int j = 0; j < offsets.length; j++) {
      out.add(turned(fids.get(j), mean - offsets[j]));
    }
    return out;
  }

  private static Fid turned(Fid fid, double hertz) {
    double[] re = new double[fid.points()];
    double[] im = new double[fid.points()];
    for (int k = 0; k < re.length; k++) {
      double angle = 2 * Math.PI * hertz * fid.time(k);
      double c = Math.cos(angle);
      double s = Math.sin(angle);
      re[k] = fid.re(k) * c - fid.im(k) * s;
      im[k] = fid.re(k) * s + fid.im(k) * c;
    }
    return new Fid(re, im, fid.dwellSeconds(), fid.startSeconds(), fid.carrierHertz());
  }
}
