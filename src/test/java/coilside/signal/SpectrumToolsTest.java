package coilside.signal;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import java.util.List;
import java.util.Random;
import org.junit.jupiter.api.Test;

class SpectrumToolsTest {
  private static Spectrum spectrum(Fid fid) {
    return Fourier.spectrum(
        fid, 8 * Fourier.powerOfTwoAtLeast(fid.points()), Fourier.FirstPoint.HALVED);
  }

  /**
   * Two published textbook statements: FWHM = 1/(pi T2) (Atkins, solution P12C.8), T2 15 ms gives
   * 21.2 Hz (MMLU college chemistry item); an exponential window of 1 Hz adds 1 Hz (Univ. Georgia
   * BCMB/CHEM 8190, problem set 2).
   */
  @Test
  void linewidthsAreThoseOfTheTextbooks() {
    Fid fid = Synthetic.decay(8192, 1e-4, 0, 1, 0, 500, 0.015);
    double width = Peaks.find(spectrum(fid), 1e-3, 100).get(0).widthHertz().value();
    assertEquals(21.2, width, 0.1);
    double wider =
        Peaks.find(spectrum(Windows.exponential(fid, 5)), 1e-3, 100).get(0).widthHertz().value();
    assertEquals(width + 5, wider, 0.1);
    double doubled =
        Peaks.find(spectrum(Windows.matched(fid, 0.015)), 1e-3, 100).get(0).widthHertz().value();
    assertEquals(2 * width, doubled, 0.2);
  }

  @Test
  void aGaussianWindowGivesTheWidthItNames() {
    Fid flat = Synthetic.decay(8192, 1e-4, 0, 1, 0, 0, 1e9);
    double width =
        Peaks.find(spectrum(Windows.gaussian(flat, 40)), 1e-3, 100).get(0).widthHertz().value();
    assertEquals(40, width, 0.2);
  }

  @Test
  void areasAreInitialAmplitudesAndPositionsOffsets() {
    Fid fid =
        Synthetic.sum(
            Synthetic.decay(8192, 1e-4, 0, 3, 0, -800, 0.05),
            Synthetic.decay(8192, 1e-4, 0, 1, 0, 1200, 0.05));
    List<Peaks.Peak> peaks = Peaks.find(spectrum(fid), 0.01, 100);
    assertEquals(2, peaks.size());
    assertEquals(-800, peaks.get(0).offsetHertz().value(), 0.1);
    assertEquals(1200, peaks.get(1).offsetHertz().value(), 0.1);
    assertEquals(1200 / 8.09, peaks.get(1).offsetPpm(), 0.1);
    // The reach of eight widths leaves 4 % of a Lorentzian's area outside.
    assertEquals(3, peaks.get(0).area().value(), 0.15);
    assertEquals(1, peaks.get(1).area().value(), 0.06);
  }

  @Test
  void overlappingLinesAreParted() {
    Fid fid =
        Synthetic.sum(
            Synthetic.decay(8192, 1e-4, 0, 1, 0, 100, 0.05),
            Synthetic.decay(8192, 1e-4, 0, 1, 0, 125, 0.05));
    List<Peaks.Peak> peaks = Peaks.find(spectrum(fid), 0.01, 100);
    assertEquals(2, peaks.size());
    assertEquals(100, peaks.get(0).offsetHertz().value(), 1.5);
    assertEquals(125, peaks.get(1).offsetHertz().value(), 1.5);
  }

  @Test
  void theStartTimeGivesTheFirstOrderPhase() {
    Fid fid =
        Synthetic.sum(
            Synthetic.decay(4096, 1e-4, 3e-3, 1, 0.8, 1500, 0.05),
            Synthetic.decay(4096, 1e-4, 3e-3, 1, 0.8, -900, 0.05));
    Spectrum s = Phasing.forStart(0.8, 3e-3).apply(spectrum(fid));
    for (double f : new double[] {1500, -900}) {
      int k = (int) Math.round(f / s.stepHertz()) + s.points() / 2;
      assertTrue(s.re()[k] > 0.97 * s.magnitude(k), "line at " + f + " Hz is not absorptive");
    }
  }

  @Test
  void findsTheZeroOrderWithoutHelp() {
    Random random = new Random(9);
    for (double phase : new double[] {0, 1, 2.5, -2.8, -0.4}) {
      Fid fid =
          Synthetic.sum(
              Synthetic.decay(2048, 1e-4, 1e-3, 1, phase, 700, 0.03),
              Synthetic.noise(random, 2048, 1e-4, 0.05));
      Phasing found = Phasing.automaticZero(Fourier.spectrum(fid), 1e-3);
      double error = Math.IEEEremainder(found.zeroRadians() - phase, 2 * Math.PI);
      assertEquals(0, error, 0.1, "phase " + phase);
    }
  }

  @Test
  void findsTheFirstOrderFromTwoLines() {
    Fid fid =
        Synthetic.sum(
            Synthetic.sum(
                Synthetic.decay(4096, 1e-4, 5e-4, 1, 0.5, 2500, 0.05),
                Synthetic.decay(4096, 1e-4, 5e-4, 1, 0.5, -2000, 0.05)),
            Synthetic.noise(new Random(10), 4096, 1e-4, 0.02));
    Phasing found = Phasing.automatic(Fourier.spectrum(fid), 0);
    Spectrum s = found.apply(Fourier.spectrum(fid));
    for (double f : new double[] {2500, -2000}) {
      int k = (int) Math.round(f / s.stepHertz()) + s.points() / 2;
      assertTrue(s.re()[k] > 0.95 * s.magnitude(k), "line at " + f + " Hz: " + found);
    }
  }

  @Test
  void aSlopingBaselineIsTakenOffAndTheLineLeft() {
    Fid fid = Synthetic.decay(4096, 1e-4, 0, 1, 0, 300, 0.02);
    Spectrum clean = Fourier.spectrum(fid);
    double[] re = clean.re().clone();
    Random random = new Random(12);
    for (int k = 0; k < re.length; k++) {
      double x = 2.0 * k / re.length - 1;
      re[k] += 5 + 3 * x - 2 * x * x + random.nextGaussian();
    }
    Spectrum s =
        Baseline.subtract(new Spectrum(re, clean.im(), clean.stepHertz(), clean.carrierHertz()), 2);
    assertEquals(0, s.re()[200], 4);
    assertEquals(0, s.re()[3900], 4);
    int k = (int) Math.round(300 / s.stepHertz()) + s.points() / 2;
    assertEquals(clean.re()[k], s.re()[k], 4);
  }

  @Test
  void aPeakBesideADeepHoleKeepsItsHeightAndAWidthAboveZero() {
    double[] y = new double[64];
    y[31] = 0.99;
    y[32] = 1;
    y[33] = -1000;
    Peaks.Peak peak = Peaks.find(new Spectrum(y, new double[64], 1, 1e6), 0.01, 5).get(0);
    org.junit.jupiter.api.Assertions.assertEquals(1, peak.height().value(), 0.13);
    org.junit.jupiter.api.Assertions.assertTrue(peak.widthHertz().value() > 0, peak.toString());
  }

  @Test
  void spectraThatAreNotPhasedGivePeaksAboveTheThresholdOrNone() {
    java.util.SplittableRandom random = new java.util.SplittableRandom(5);
    int found = 0;
    for (int draw = 0; draw < 300; draw++) {
      int n = 512;
      double[] re = new double[n];
      double[] im = new double[n];
      double phase = 2 * Math.PI * random.nextDouble();
      double f = 2e3 * (random.nextDouble() - 0.5);
      for (int k = 0; k < n; k++) {
        double t = k * 1e-4;
        double size = Math.exp(-t / 0.01) + 0.3 * Math.exp(-t / 0.002);
        re[k] = size * Math.cos(phase + 2 * Math.PI * f * t) + 0.05 * random.nextGaussian();
        im[k] = size * Math.sin(phase + 2 * Math.PI * f * t) + 0.05 * random.nextGaussian();
      }
      for (Peaks.Peak peak : Peaks.find(spectrum(new Fid(re, im, 1e-4, 0, 1e6)), 0.8, 5)) {
        org.junit.jupiter.api.Assertions.assertTrue(peak.height().value() > 4, peak.toString());
        org.junit.jupiter.api.Assertions.assertTrue(peak.widthHertz().u() >= 0, peak.toString());
        found++;
      }
    }
    org.junit.jupiter.api.Assertions.assertTrue(found > 100, found + " peaks");
  }
}
