package coilside.board.simulated;

import coilside.board.profile.DeviceProfile;
import coilside.board.profile.SampleFormat;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.shot.Step;
import coilside.shot.Wait;
import java.util.ArrayList;
import java.util.List;

/**
 * The receiver of a simulated board in front of a bench: its filter's delay and run-in, its gain,
 * its ADC's scale, and for boards with real samples the mixing up to the intermediate frequency.
 *
 * <p>A filter delay of d points is made of whole points, by which the samples are late, and the
 * fraction left, by which the window opens earlier - where a wait stands before it to be shortened.
 * The first {@code lostSamples} points are those of a filter that fills. Rounding and clipping are
 * done where the samples are written.
 */
public final class FirmwareAdc implements FirmwareReceiver {
  private final SampleFormat format;
  private final AnalogBench bench;
  private final int wholeDelay;
  private final double partDelay;

  public FirmwareAdc(DeviceProfile profile, AnalogBench bench) {
    this.format = profile.samples();
    this.bench = bench;
    this.wholeDelay = (int) Math.floor(format.filterDelaySamples());
    this.partDelay = format.filterDelaySamples() - wholeDelay;
  }

  @Override
  public List<Counts> play(Shot shot) {
    List<Step> flat = shot.flat();
    List<AnalogBench.Trace> traces =
        bench.play(
            new Shot(
                shot.carrierHertz(),
                shot.gainDecibels(),
                shot.restSeconds(),
                partDelay > 0 ? openedEarlier(flat) : shot.steps()));
    double countsPerVolt = Math.pow(10, shot.gainDecibels() / 20) / format.voltsPerCount();
    List<Counts> out = new ArrayList<>(traces.size());
    for (AnalogBench.Trace trace : traces) {
      out.add(convert(trace, countsPerVolt, shot.carrierHertz()));
    }
    return out;
  }

  private List<Step> openedEarlier(List<Step> flat) {
    List<Step> out = new ArrayList<>(flat.size() + 4);
    double owed = 0;
    for (Step step : flat) {
      if (step instanceof Wait wait) {
        out.add(new Wait(wait.seconds() + owed));
        owed = 0;
        continue;
      }
      if (owed > 0) {
        out.add(new Wait(owed));
        owed = 0;
      }
      if (step instanceof Receive receive && !out.isEmpty()) {
        double early = partDelay * receive.dwellSeconds();
        int last = out.size() - 1;
        if (out.get(last) instanceof Wait before && before.seconds() >= early) {
          out.set(last, new Wait(before.seconds() - early));
          owed = early;
        }
      }
      out.add(step);
    }
    if (owed > 0) {
      out.add(new Wait(owed));
    }
    return out;
  }

  private Counts convert(AnalogBench.Trace trace, double countsPerVolt, double carrierHertz) {
    int n = trace.re().length;
    double[] i = new double[n];
    double[] q = new double[n];
    for (int k = wholeDelay; k < n; k++) {
      double share = k < format.lostSamples() ? (k + 0.5) / format.lostSamples() : 1;
      i[k] = trace.re()[k - wholeDelay] * countsPerVolt * share;
      q[k] = trace.im()[k - wholeDelay] * countsPerVolt * share;
    }
    return format.real().map(r -> real(i, q, r, carrierHertz)).orElseGet(() -> new Counts(i, q));
  }

  /** Sample n is Re(s exp(2 pi i f n / rate)), phase zero at the window's first sample. */
  private static Counts real(
      double[] i, double[] q, SampleFormat.RealSampling sampling, double carrierHertz) {
    double turns = sampling.intermediateHertz().orElse(carrierHertz) / sampling.rateHertz();
    double[] out = new double[i.length];
    for (int n = 0; n < out.length; n++) {
      double part = turns * n;
      double angle = 2 * Math.PI * (part - Math.rint(part));
      out[n] = i[n] * Math.cos(angle) - q[n] * Math.sin(angle);
    }
    return new Counts(out, new double[0]);
  }

  @Override
  public void idle(double seconds) {
    bench.idle(seconds);
  }

  @Override
  public double temperatureCelsius() {
    return bench.temperatureCelsius();
  }
}
