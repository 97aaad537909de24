package coilside.fit;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;

import coilside.quantity.Measured;
import coilside.quantity.Unit;
import java.util.Random;
import org.junit.jupiter.api.Test;

class MagnetAndAmplifierTest {
  private static Measured seconds(double value) {
    return Measured.of(value, 1e-3 * value, Unit.SECOND);
  }

  /**
   * A line of 2 Hz has T2* 0.16 s; 1 Hz of it being inhomogeneity, T2 is 0.32 s (Univ. Georgia
   * BCMB/CHEM 8190, problem set 2).
   */
  @Test
  void aHertzOfInhomogeneity() throws NotDetermined {
    Measured width = MagnetPart.linewidth(seconds(0.15915), seconds(0.31831));
    assertEquals(1, width.value(), 1e-3);
    assertThrows(NotDetermined.class, () -> MagnetPart.decayTime(seconds(0.1), seconds(0.1001)));
  }

  /** (gamma G)^2 D TE^2/12 with gamma of the shielded proton, worked to 30 digits. */
  @Test
  void diffusionInAGradient() {
    double gamma = 2.675153194e8;
    assertEquals(0.137106, MagnetPart.diffusionRate(gamma, 0.1, 2.299e-9, 1e-3), 1e-6);
    assertEquals(0.00137106, MagnetPart.diffusionRate(gamma, 0.01, 2.299e-9, 1e-3), 1e-8);
    assertEquals(0.548422, MagnetPart.diffusionRate(gamma, 1, 2.299e-9, 2e-4), 2e-6);
  }

  @Test
  void compressionCovers() throws NotDetermined {
    Random random = new Random(1);
    Coverage c = new Coverage("compression");
    double[] a = {0.2, 0.4, 0.6, 0.8, 1};
    for (int i = 0; i < 600; i++) {
      Measured[] rates = new Measured[a.length];
      for (int k = 0; k < a.length; k++) {
        double rate = 25_000 * a[k] * (1 - 0.1 * a[k] * a[k]);
        double u = 0.01 * rate;
        rates[k] = Measured.of(rate + u * random.nextGaussian(), u, Unit.HERTZ);
      }
      AmplitudeCurve curve = AmplitudeCurve.fit(a, rates);
      c.add(curve.compression(), 0.1);
    }
    c.check();
  }
}
