package coilside.signal;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;

import java.util.Random;
import org.junit.jupiter.api.Test;

class QuadratureErrorTest {
  private static Fid spoilt(Fid fid, double gain, double skew, double dcRe, double dcIm) {
    double[] re = new double[fid.points()];
    double[] im = new double[fid.points()];
    for (int k = 0; k < re.length; k++) {
      re[k] = fid.re(k) + dcRe;
      im[k] = gain * (fid.im(k) * Math.cos(skew) + fid.re(k) * Math.sin(skew)) + dcIm;
    }
    return new Fid(re, im, fid.dwellSeconds(), fid.startSeconds(), fid.carrierHertz());
  }

  /** 10 log10((1 + 2 g cos p + g^2)/(1 - 2 g cos p + g^2)), worked to 30 digits. */
  @Test
  void imageRejectionOfKnownErrors() {
    assertEquals(39.96, QuadratureError.imageRejectionDecibels(1.01, Math.toRadians(1)), 0.005);
    assertEquals(32.26, QuadratureError.imageRejectionDecibels(1.05, 0), 0.005);
    assertEquals(41.18, QuadratureError.imageRejectionDecibels(1, Math.toRadians(1)), 0.005);
    assertEquals(23.79, QuadratureError.imageRejectionDecibels(1.1, Math.toRadians(5)), 0.005);
  }

  @Test
  void errorsAreMeasuredAndRemoved() {
    Random random = new Random(31);
    double squares = 0;
    int draws = 60;
    for (int i = 0; i < draws; i++) {
      Fid clean = Synthetic.decay(4096, 1e-4, 0, 1, 6 * random.nextDouble(), 1700, 0.05);
      Fid noisy =
          Synthetic.sum(
              spoilt(clean, 1.07, Math.toRadians(-3), 0.05, -0.02),
              Synthetic.noise(random, 4096, 1e-4, 0.02));
      QuadratureError q = QuadratureError.measure(noisy, 0.02);
      double g = (q.gainRatio().value() - 1.07) / q.gainRatio().u();
      double s = (q.skewRadians().value() - Math.toRadians(-3)) / q.skewRadians().u();
      squares += (g * g + s * s) / (2 * draws);
      assertEquals(0.05, q.offsetRe().value(), 5 * q.offsetRe().u());
      assertEquals(-0.02, q.offsetIm().value(), 5 * q.offsetIm().u());
      if (i == 0) {
        Fid mended = q.remove(spoilt(clean, 1.07, Math.toRadians(-3), 0.05, -0.02));
        for (int k = 0; k < 100; k++) {
          assertEquals(clean.re(k), mended.re(k), 0.01);
          assertEquals(clean.im(k), mended.im(k), 0.02);
        }
      }
    }
    assertEquals(1, squares, 0.45, "uncertainties are neither too small nor too large");
  }

  @Test
  void refusesALineTooNearTheCarrier() {
    Fid near = Synthetic.decay(4096, 1e-4, 0, 1, 0, 5, 0.05);
    assertThrows(IllegalArgumentException.class, () -> QuadratureError.measure(near, 0.01));
  }
}
