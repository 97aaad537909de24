package coilside.fit;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.quantity.Measured;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;

class TwoExponentialsTest {
  private static final double DWELL = 1e-4;

  /** Two lines on the carrier, of these amplitudes and decay rates in 1/s. */
  private static TwoExponentials of(double a1, double rate1, double a2, double rate2) {
    Exponentials fit =
        new Exponentials(
            new double[16],
            new double[16],
            new double[] {-rate1 * DWELL, -rate2 * DWELL},
            new double[2],
            false);
    fit.cRe[0] = a1;
    fit.cRe[1] = a2;
    fit.inverseRe = new double[4][4];
    fit.inverseIm = new double[4][4];
    for (int i = 0; i < 4; i++) {
      fit.inverseRe[i][i] = 1;
    }
    return new TwoExponentials(fit, DWELL, 0, 1e-12);
  }

  @Test
  void twoEqualLinesAreAsWideAsOne() {
    assertEquals(200 / Math.PI, of(0.5, 200, 0.5, 200).linewidth().value(), 1e-6);
  }

  @Test
  void theHalfHeightOfTwoLorentzLinesIsFoundWhereItLies() {
    // Validation against the closed form: a1 r1/(r1^2 + w^2) + a2 r2/(r2^2 + w^2) at half its top.
    double width = of(1, 100, 1, 300).linewidth().value();
    double w = Math.PI * width;
    double top = 1 / 100.0 + 1 / 300.0;
    assertEquals(top / 2, 100 / (1e4 + w * w) + 300 / (9e4 + w * w), 1e-9);
  }

  @Test
  @Timeout(value = 10, threadMode = Timeout.ThreadMode.SEPARATE_THREAD)
  void aLineThatHardlyDecaysBesideAWideOneIsNoEndlessSearch() {
    for (double rate : new double[] {1e-3, 1e-9, 0, -1e-6}) {
      Measured width = of(1e-12, rate, 1, 1e3).linewidth();
      assertTrue(width.value() >= 0 && width.value() < 1e3, rate + ": " + width.value());
    }
  }
}
