package coilside.board.simulated;

import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.shot.Step;
import java.util.ArrayList;
import java.util.List;

/**
 * A bench for wire tests: after the last pulse the receiver sees one undamped line, V exp(i(pulse
 * phase + 2 pi f t)), t from that pulse's centre; without a pulse nothing at all.
 */
final class ToneBench implements AnalogBench {
  final double volts;
  final double lineHertz;
  final double celsius;
  double idled;

  /**
   * @param lineHertz absolute frequency of the line, Hz
   */
  ToneBench(double volts, double lineHertz, double celsius) {
    this.volts = volts;
    this.lineHertz = lineHertz;
    this.celsius = celsius;
  }

  @Override
  public List<Trace> play(Shot shot) {
    List<Trace> out = new ArrayList<>();
    double now = 0;
    double zero = Double.NaN;
    double phase = 0;
    double offset = lineHertz - shot.carrierHertz();
    for (Step step : shot.flat()) {
      if (step instanceof Pulse pulse) {
        zero = now + pulse.seconds() / 2;
        phase = pulse.phaseRadians();
      } else if (step instanceof Receive receive) {
        double[] re = new double[receive.points()];
        double[] im = new double[receive.points()];
        for (int k = 0; k < re.length && !Double.isNaN(zero); k++) {
          double t = now + k * receive.dwellSeconds() - zero;
          double angle = phase - receive.phaseRadians() + 2 * Math.PI * offset * t;
          re[k] = volts * Math.cos(angle);
          im[k] = volts * Math.sin(angle);
        }
        out.add(new Trace(re, im));
      }
      now += step.seconds();
    }
    return out;
  }

  @Override
  public void idle(double seconds) {
    idled += seconds;
  }

  @Override
  public double temperatureCelsius() {
    return celsius;
  }
}
