package coilside.signal;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;

import java.util.Random;
import org.junit.jupiter.api.Test;

class AveragerTest {
  @Test
  void turnsEachScanBackByItsPhase() {
    Averager a = new Averager();
    for (int step = 0; step < 4; step++) {
      double phase = step * Math.PI / 2;
      a.add(Synthetic.decay(8, 1e-3, 0, 1, 0.3 + phase, 50, 1), phase);
    }
    Fid expected = Synthetic.decay(8, 1e-3, 0, 1, 0.3, 50, 1);
    for (int k = 0; k < 8; k++) {
      assertEquals(expected.re(k), a.mean().re(k), 1e-12);
      assertEquals(expected.im(k), a.mean().im(k), 1e-12);
    }
  }

  @Test
  void aConstantOffsetCyclesAway() {
    Averager a = new Averager();
    for (int step = 0; step < 4; step++) {
      a.add(new Fid(new double[] {0.7}, new double[] {-0.2}, 1, 0, 1), step * Math.PI / 2);
    }
    assertEquals(0, a.mean().magnitude(0), 1e-15);
  }

  @Test
  void knowsTheScatterOfOneScan() {
    Random random = new Random(3);
    Averager a = new Averager();
    for (int i = 0; i < 20; i++) {
      a.add(
          Synthetic.sum(
              Synthetic.decay(500, 1e-4, 0, 5, 1, 300, 0.02),
              Synthetic.noise(random, 500, 1e-4, 0.4)));
    }
    // sd of the estimate: 0.4/(2 sqrt(500 * 19)) = 0.0021
    assertEquals(0.4, a.scatterSigma(), 0.0084);
  }

  @Test
  void aRollingAverageForgetsAndStillKnowsTheScatter() {
    Random random = new Random(4);
    Averager a = Averager.rolling(4);
    for (int i = 0; i < 60; i++) {
      a.add(Synthetic.noise(random, 2000, 1e-4, 1));
    }
    assertEquals(1, a.scatterSigma(), 0.03);
    for (int i = 0; i < 60; i++) {
      a.add(Synthetic.decay(2000, 1e-4, 0, 3, 0, 0, 1e9));
    }
    assertEquals(3, a.mean().re(0), 1e-6);
  }

  @Test
  void refusesScansThatDoNotFitOrAreNotNumbers() {
    Averager a = new Averager();
    a.add(Synthetic.decay(8, 1e-3, 0, 1, 0, 0, 1));
    assertThrows(
        IllegalArgumentException.class, () -> a.add(Synthetic.decay(9, 1e-3, 0, 1, 0, 0, 1)));
    assertThrows(
        IllegalArgumentException.class,
        () ->
            a.add(
                new Fid(
                    new double[] {1, Double.NaN, 0, 0, 0, 0, 0, 0}, new double[8], 1e-3, 0, 1)));
    assertEquals(1, a.count());
  }
}
