package coilside.terminal;

import coilside.bench.Picture;
import coilside.bench.Rung;
import coilside.signal.Fid;
import coilside.signal.Spectrum;
import java.util.List;
import java.util.Optional;
import java.util.Random;

/** Invented curves and traces with a fixed seed. */
final class FakeData {
  private static final int N = 2048;
  private static final double DWELL = 20e-6;
  private final Random random = new Random(1);
  private int traces;

  double noise() {
    return random.nextGaussian();
  }

  double x(Rung rung, int i, int n) {
    return switch (rung) {
      case RESONANCE -> 7.9e6 + 4e5 * i / (n - 1.0);
      case GAIN -> 5.0 * i;
      case NUTATION -> 4e-6 * (i + 1);
      case T1 -> 2e-3 * Math.pow(1.8, i);
      default -> 2e-3 * (i + 1) * 5;
    };
  }

  double y(Rung rung, double x) {
    return switch (rung) {
      case RESONANCE -> Math.abs(x - 8.09e6) < 8e3 ? 31 : 1 + 0.5 * Math.abs(noise());
      case GAIN -> 0.01 * Math.pow(10, x / 20) / 10;
      case NUTATION -> 3e-5 * Math.sin(Math.PI / 2 * x / 11e-6) * Math.exp(-x / 120e-6);
      case T1 -> 3e-5 * (1 - 1.96 * Math.exp(-x / 0.2));
      default -> 3e-5 * Math.exp(-x / 0.153);
    };
  }

  Picture.Curve curve(Rung rung, double[] x, double[] y, int planned) {
    double scale = rung == Rung.RESONANCE || rung == Rung.GAIN ? 1 : 3e-5;
    double[] noisy = y.clone();
    double[] u = new double[x.length];
    for (int i = 0; i < x.length; i++) {
      noisy[i] = y(rung, x[i]) + (scale == 1 ? 0 : 0.03 * scale * Math.sin(17 * i));
      u[i] = scale == 1 ? 0 : 0.04 * scale;
    }
    boolean fitted = scale != 1 && x.length > 4;
    double[] fx = new double[fitted ? 200 : 0];
    double[] fy = new double[fx.length];
    double last = x(rung, planned - 1, planned);
    for (int i = 0; i < fx.length; i++) {
      fx[i] = last * (i + 1) / fx.length;
      fy[i] = y(rung, fx[i]);
    }
    double[] next = x.length < planned ? new double[] {x(rung, x.length, planned)} : new double[0];
    String name =
        rung == Rung.RESONANCE
            ? "carrier"
            : rung == Rung.GAIN ? "gain" : rung == Rung.NUTATION ? "pulse width" : "time";
    String unit = rung == Rung.RESONANCE ? "Hz" : rung == Rung.GAIN ? "dB" : "s";
    String yName = rung == Rung.RESONANCE ? "detection" : rung == Rung.GAIN ? "peak" : "amplitude";
    String yUnit = rung == Rung.RESONANCE ? "sigma" : rung == Rung.GAIN ? "1" : "V";
    return new Picture.Curve(
        rung,
        name,
        unit,
        yName,
        yUnit,
        x,
        noisy,
        u,
        fx,
        fy,
        next,
        rung == Rung.NUTATION
            ? "90-degree pulse 11.02(9) us, 0.8 % after " + x.length + " scans"
            : x.length + " points");
  }

  Picture.Trace trace(Rung rung, int scans, boolean fitted) {
    double[] re = new double[N];
    double[] im = new double[N];
    double[] fr = new double[N];
    double[] fi = new double[N];
    double sigma = 4e-7 / Math.sqrt(scans);
    double t2 =
        rung == Rung.RINGDOWN
            ? 8e-6
            : 8.3e-3 * (1 + 0.01 * noise() + 0.05 * Math.sin(0.02 * traces++));
    double a = rung == Rung.NOISE ? 0 : 3e-5;
    double f = 132;
    double start = 60e-6;
    for (int k = 0; k < N; k++) {
      double t = start + k * DWELL;
      double e = a * Math.exp(-t / t2);
      fr[k] = e * Math.cos(2 * Math.PI * f * t);
      fi[k] = e * Math.sin(2 * Math.PI * f * t);
      re[k] = fr[k] + sigma * noise();
      im[k] = fi[k] + sigma * noise();
    }
    double carrier = FakeScript.CARRIER;
    Fid fid = new Fid(re, im, DWELL, start, carrier);
    Optional<Fid> fit =
        fitted ? Optional.of(new Fid(fr, fi, DWELL, start, carrier)) : Optional.empty();
    int m = 1024;
    double[] sr = new double[m];
    double[] si = new double[m];
    double step = 1 / (N * DWELL);
    for (int k = 0; k < m; k++) {
      double d = 2 * Math.PI * ((k - m / 2) * step - f);
      double q = 1 + d * d * t2 * t2;
      sr[k] = a * t2 / DWELL / q + sigma * Math.sqrt(N) * noise();
      si[k] = -a * t2 / DWELL * d * t2 / q + sigma * Math.sqrt(N) * noise();
    }
    String caption =
        rung == Rung.NOISE
            ? "noise 1.23(2) nV/Hz^0.5; no line above 5 sigma"
            : "T2* " + Numbers.si(t2, "s", 3) + ", linewidth 38.3(5) Hz";
    return new Picture.Trace(
        rung, fid, fit, 4, Optional.of(new Spectrum(sr, si, step, carrier)), List.of(), caption);
  }
}
