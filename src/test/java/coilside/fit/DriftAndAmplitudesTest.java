package coilside.fit;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.signal.Fid;
import coilside.signal.Synthetic;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Random;
import org.junit.jupiter.api.Test;

class DriftAndAmplitudesTest {
  @Test
  void driftRatesCover() throws NotDetermined {
    Random random = new Random(1);
    Coverage c = new Coverage("drift");
    for (int i = 0; i < 600; i++) {
      double[] x = new double[30];
      double[] y = new double[30];
      double[] u = new double[30];
      for (int k = 0; k < 30; k++) {
        x[k] = 1.7e9 + 60 * k;
        u[k] = 0.5 + random.nextDouble();
        y[k] = 8.09e6 - 0.02 * (x[k] - 1.7e9) + u[k] * random.nextGaussian();
      }
      DriftFit.Line line = DriftFit.line(x, y, u);
      c.add(line.hertzPerSecond(), -0.02);
    }
    c.check();
  }

  /** NdFeB at -0.10 to -0.12 %/K: -1000 to -1200 ppm/K (magnet makers' pages). */
  @Test
  void aTemperatureCoefficientInPpm() throws NotDetermined {
    double[] t = {20, 21, 22, 23, 24};
    double[] f = new double[5];
    for (int i = 0; i < 5; i++) {
      f[i] = 8.09e6 * (1 - 1.1e-3 * (t[i] - 20));
    }
    DriftFit.Line line = DriftFit.line(t, f, new double[] {1, 1, 1, 1, 1});
    assertEquals(-1100, line.ppmPerUnit(8.09e6), 1e-6);
    assertEquals(f[4], line.at(24), 1e-6);
  }

  @Test
  void noDriftWithoutTime() {
    double[] same = {5, 5, 5, 5};
    assertThrows(NotDetermined.class, () -> DriftFit.line(same, same, new double[] {1, 1, 1, 1}));
  }

  @Test
  void scanAmplitudesAreUnbiasedAndCover() throws NotDetermined {
    Random random = new Random(2);
    double[] truth = {0.9, 2.4, 1.5, -0.6, -1.5, -1.9, 0, 0.4};
    double squares = 0;
    int draws = 60;
    double[] mean = new double[truth.length];
    for (int i = 0; i < draws; i++) {
      List<Fid> scans = new ArrayList<>();
      for (double a : truth) {
        scans.add(
            Synthetic.sum(
                Synthetic.decay(2048, 1e-4, 1e-3, a, 1, 300, 0.04),
                Synthetic.noise(random, 2048, 1e-4, 1)));
      }
      ScanAmplitudes.Result r = ScanAmplitudes.of(scans, 1);
      for (int j = 0; j < truth.length; j++) {
        double z = (r.projection().amplitude(j).value() - truth[j]) / r.projection().uncertainty();
        squares += z * z / (draws * truth.length);
        mean[j] += r.projection().amplitude(j).value() / draws;
      }
    }
    // The decay itself is known to a few percent only, and moves all amplitudes together.
    assertEquals(1.05, squares, 0.25);
    for (int j = 0; j < truth.length; j++) {
      assertEquals(truth[j], mean[j], 0.06, Arrays.toString(mean));
    }
  }

  @Test
  void scansOfNoiseHaveNoAmplitudes() {
    Random random = new Random(3);
    List<Fid> scans = new ArrayList<>();
    for (int j = 0; j < 8; j++) {
      scans.add(Synthetic.noise(random, 1024, 1e-4, 1));
    }
    NotDetermined e = assertThrows(NotDetermined.class, () -> ScanAmplitudes.of(scans, 1));
    assertTrue(
        e.reason() == NotDetermined.Reason.NO_SIGNAL
            || e.reason() == NotDetermined.Reason.TOO_NOISY,
        e.reason().toString());
  }
}
