package coilside.signal;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import java.util.Random;
import org.junit.jupiter.api.Test;
import pl.edu.icm.jlargearrays.ConcurrencyUtils;

class FourierTest {
  @Test
  void aLineAboveTheCarrierStandsAtAPositiveOffset() {
    Spectrum s = Fourier.spectrum(Synthetic.decay(1024, 1e-4, 0, 1, 0, 1250, 0.02));
    int top = 0;
    for (int k = 0; k < s.points(); k++) {
      top = s.magnitude(k) > s.magnitude(top) ? k : top;
    }
    assertEquals(1250, s.offsetHertz(top), s.stepHertz());
    assertTrue(s.re()[top] > 0.99 * s.magnitude(top), "a signal of phase 0 is absorptive");
  }

  @Test
  void equalsTheSumThatDefinesIt() {
    Fid fid = Synthetic.noise(new Random(1), 60, 1e-3, 1);
    Spectrum s = Fourier.spectrum(fid, 64, Fourier.FirstPoint.WHOLE);
    for (int k = 0; k < 64; k++) {
      double re = 0;
      double im = 0;
      for (int n = 0; n < 60; n++) {
        double angle = -2 * Math.PI * (k - 32) * n / 64;
        re += fid.re(n) * Math.cos(angle) - fid.im(n) * Math.sin(angle);
        im += fid.re(n) * Math.sin(angle) + fid.im(n) * Math.cos(angle);
      }
      assertEquals(re, s.re()[k], 1e-12);
      assertEquals(im, s.im()[k], 1e-12);
    }
  }

  @Test
  void halvingTheFirstPointPutsTheBaselineAtZero() {
    Fid fid = Synthetic.decay(4096, 1e-4, 0, 1, 0, 0, 0.01);
    double whole = Fourier.spectrum(fid, 4096, Fourier.FirstPoint.WHOLE).re()[0];
    double halved = Fourier.spectrum(fid).re()[0];
    assertEquals(0.5, whole - halved, 1e-12);
    assertTrue(Math.abs(halved) < 0.02, "far from the line: " + halved);
  }

  @Test
  void usesNoThreadsOfTheLibrary() {
    Fourier.transform(new double[2 * 65536], 65536);
    assertEquals(1, ConcurrencyUtils.getNumberOfThreads());
  }

  @Test
  void refusesLengthsThatAreNotPowersOfTwo() {
    assertThrows(
        IllegalArgumentException.class,
        () ->
            Fourier.spectrum(
                Synthetic.noise(new Random(1), 10, 1, 1), 12, Fourier.FirstPoint.HALVED));
    assertEquals(16, Fourier.powerOfTwoAtLeast(9));
    assertEquals(8, Fourier.powerOfTwoAtLeast(8));
  }
}
