package coilside.spin;

import static org.junit.jupiter.api.Assertions.assertArrayEquals;
import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.spin.EchoTrain.Phases;
import org.junit.jupiter.api.Test;

class EchoTrainTest {
  private static final double NEVER = Double.POSITIVE_INFINITY;

  @Test
  void perfectPulsesGiveThePlainDecay() {
    double[] a =
        EchoTrain.amplitudes(Math.PI / 2, Math.PI, Phases.QUARTER_TURN, 2e-3, 0.12, 0.11, 64);
    for (int k = 0; k < a.length; k++) {
      assertEquals(Math.exp(-(k + 1) * 2e-3 / 0.11), a[k], 1e-12);
    }
  }

  /** E. L. Hahn, Phys. Rev. 80, 580 (1950): two pulses give an echo of sin a sin^2(b/2). */
  @Test
  void hahnsEcho() {
    double[] a =
        EchoTrain.amplitudes(
            Math.toRadians(70), Math.toRadians(110), Phases.QUARTER_TURN, 1, NEVER, NEVER, 1);
    double s = Math.sin(Math.toRadians(55));
    assertEquals(Math.sin(Math.toRadians(70)) * s * s, a[0], 1e-12);
  }

  /** Independent: the sum over isochromats dephased by whole turns, each played out. */
  @Test
  void theIsochromatsThemselves() {
    for (Phases phases : Phases.values()) {
      double excite = Math.toRadians(85);
      double refocus = Math.toRadians(150);
      double[] expected = EchoTrain.amplitudes(excite, refocus, phases, 4e-3, 0.05, 0.02, 12);
      assertArrayEquals(expected, phasorSum(excite, refocus, phases, 12), 1e-9);
    }
  }

  private static double[] phasorSum(double excite, double refocus, Phases phases, int echoes) {
    int n = 64;
    double rate = 1e7;
    double[] sum = new double[echoes];
    for (int j = 0; j < n; j++) {
      double offset = (double) j / n / 2e-3;
      Magnetisation m = Magnetisation.EQUILIBRIUM.pulsed(excite / (2 * Math.PI * rate), rate, 0, 0);
      for (int k = 0; k < echoes; k++) {
        double phase = phases == Phases.EQUAL ? 0 : Math.PI / 2;
        m =
            m.free(2e-3, offset, 0.05, 0.02)
                .pulsed(refocus / (2 * Math.PI * rate), rate, phase, 0)
                .free(2e-3, offset, 0.05, 0.02);
        sum[k] += (phases == Phases.EQUAL && k % 2 == 0 ? 1 : -1) * m.y() / n;
      }
    }
    return sum;
  }

  /** Meiboom and Gill's point: with their phases a wrong angle hurts far less in the long run. */
  @Test
  void aQuarterTurnForgivesWrongAngles() {
    double wrong = Math.toRadians(165);
    double[] kind =
        EchoTrain.amplitudes(Math.PI / 2, wrong, Phases.QUARTER_TURN, 1e-3, NEVER, NEVER, 20);
    double[] harsh = EchoTrain.amplitudes(Math.PI / 2, wrong, Phases.EQUAL, 1e-3, NEVER, NEVER, 20);
    assertTrue(kind[19] > 0.97, "" + kind[19]);
    assertTrue(harsh[19] < 0.8, "" + harsh[19]);
  }
}
