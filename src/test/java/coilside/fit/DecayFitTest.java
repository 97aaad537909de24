package coilside.fit;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.fit.DecayResult.Envelope;
import coilside.signal.Fid;
import coilside.signal.Synthetic;
import java.util.Random;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;

class DecayFitTest {
  private static final double DWELL = 1e-4;

  @Test
  void exactWithoutNoiseAtAnyFrequencyAndStart() throws NotDetermined {
    Random random = new Random(1);
    for (int i = 0; i < 40; i++) {
      double f = (random.nextDouble() - 0.5) * 9000;
      double t2 = 0.01 + 0.1 * random.nextDouble();
      double start = 5e-3 * random.nextDouble();
      double phase = 6 * random.nextDouble() - 3;
      int n = 1000 + random.nextInt(3000);
      DecayResult r = DecayFit.fit(Synthetic.decay(n, DWELL, start, 2e-3, phase, f, t2));
      assertEquals(t2, r.t2Star().value(), 1e-7 * t2);
      assertEquals(f, r.offsetHertz().value(), 1e-6);
      assertEquals(2e-3, r.amplitude().value(), 1e-9);
      assertEquals(0, Math.IEEEremainder(r.phaseRadians().value() - phase, 2 * Math.PI), 1e-6);
      assertEquals(1 / (Math.PI * t2), r.linewidthHertz().value(), 1e-5);
    }
  }

  private static Fid noisy(
      Random random, int n, double start, double snr, double phase, double f, double t2) {
    return Synthetic.sum(
        Synthetic.decay(n, DWELL, start, snr, phase, f, t2), Synthetic.noise(random, n, DWELL, 1));
  }

  /** Variance over the Cramer-Rao bound, and coverage, in one cell of SNR and record length. */
  private static void cell(Random random, int draws, int n, double snr, double record, double limit)
      throws NotDetermined {
    double t2 = n * DWELL / record;
    double start = 1.5e-3;
    Coverage t = new Coverage("T2* at SNR " + snr + ", " + record + " T2*");
    Coverage f = new Coverage("frequency");
    Coverage a = new Coverage("amplitude at time zero");
    Coverage p = new Coverage("phase at time zero");
    Coverage s = new Coverage("sigma");
    double atTimeZero = snr * Math.exp(start / t2);
    for (int i = 0; i < draws; i++) {
      double offset = (random.nextDouble() - 0.5) * 6000;
      double phase = 2 * random.nextDouble() - 1;
      DecayResult r = DecayFit.fit(noisy(random, n, start, atTimeZero, phase, offset, t2));
      t.add(r.t2Star(), t2);
      f.add(r.offsetHertz(), offset);
      a.add(r.amplitude(), atTimeZero);
      p.add(r.phaseRadians(), phase);
      s.add(r.noiseSigma(), 1);
    }
    double bound = DecayBound.exact(snr, t2, DWELL, n).t2Star();
    double ratio = t.variance() / (bound * bound);
    // A variance from so many draws is itself known to sqrt(2/draws).
    assertTrue(ratio < limit + 2.5 * Math.sqrt(2.0 / draws), t + ": variance ratio " + ratio);
    assertTrue(ratio > 0.9 - 2.5 * Math.sqrt(2.0 / draws), t + ": below the bound, " + ratio);
    assertEquals(0, t.bias(), 3 * bound / Math.sqrt(draws) + 2 * bound * bound);
    for (Coverage c : new Coverage[] {t, f, a, p, s}) {
      c.check();
    }
  }

  @Test
  void reachesTheBoundWithHonestUncertainties() throws NotDetermined {
    cell(new Random(101), 400, 1024, 10, 3, 1.06);
    cell(new Random(102), 400, 1024, 20, 1, 1.06);
  }

  @Test
  @Tag("validation")
  void reachesTheBoundInEveryCell() throws NotDetermined {
    Random random = new Random(7);
    for (double snr : new double[] {5, 10, 20, 50, 100}) {
      for (double record : new double[] {1, 2, 3, 5}) {
        cell(random, 10_000, 2048, snr, record, 1.06);
      }
    }
  }

  @Test
  void noiseAloneIsRefused() {
    Random random = new Random(3);
    int refused = 0;
    for (int i = 0; i < 200; i++) {
      try {
        DecayFit.fit(Synthetic.noise(random, 1024, DWELL, 1));
      } catch (NotDetermined e) {
        refused++;
        assertFalse(e.remedy().isEmpty());
      }
    }
    assertEquals(200, refused);
  }

  @Test
  void aWeakDecayIsRefusedWithTheScansItWouldTake() {
    Random random = new Random(4);
    // Matched SNR 7.7: a signal, but u(T2*)/T2* = 2/7.7 = 26 %.
    double snr = 7.7 / Math.sqrt(0.02 / (2 * DWELL));
    int noisy = 0;
    double scans = 0;
    for (int i = 0; i < 60; i++) {
      try {
        DecayFit.fit(
            noisy(random, 1024, 0, snr, 1, 500, 0.02), DecayFit.Options.usual().withScans(10));
      } catch (NotDetermined e) {
        if (e.reason() == NotDetermined.Reason.TOO_NOISY) {
          noisy++;
          scans += e.scansNeeded().orElseThrow();
        }
      }
    }
    assertTrue(noisy > 30, noisy + " of 60 refused as too noisy");
    // 10 scans * (0.26/0.2)^2 = 17
    assertEquals(17, scans / noisy, 8);
  }

  @Test
  void aRecordTooShortIsRefusedAsSuch() {
    NotDetermined e =
        assertThrows(
            NotDetermined.class, () -> DecayFit.fit(noisy(new Random(5), 1024, 0, 5, 1, 500, 3)));
    assertEquals(NotDetermined.Reason.TOO_SHORT, e.reason());
    assertTrue(e.remedy().contains("record"), e.remedy());
  }

  @Test
  void badSamplesAreRefused() {
    double[] re = new double[64];
    re[7] = Double.NaN;
    NotDetermined e =
        assertThrows(
            NotDetermined.class, () -> DecayFit.fit(new Fid(re, new double[64], DWELL, 0, 1)));
    assertEquals(NotDetermined.Reason.BAD_INPUT, e.reason());
    e =
        assertThrows(
            NotDetermined.class,
            () -> DecayFit.fit(new Fid(new double[64], new double[64], DWELL, 0, 1)));
    assertEquals(NotDetermined.Reason.NO_SIGNAL, e.reason());
  }

  private static Fid shaped(Random random, double start, java.util.function.DoubleUnaryOperator e) {
    int n = 4096;
    double[] re = new double[n];
    double[] im = new double[n];
    for (int k = 0; k < n; k++) {
      double t = start + k * 2e-5;
      double size = e.applyAsDouble(t);
      double angle = 0.4 + 2 * Math.PI * 700 * t;
      re[k] = size * Math.cos(angle) + 0.03 * random.nextGaussian();
      im[k] = size * Math.sin(angle) + 0.03 * random.nextGaussian();
    }
    return new Fid(re, im, 2e-5, start, 8.09e6);
  }

  @Test
  void aGaussianDecayIsCalledOne() throws NotDetermined {
    Random random = new Random(6);
    Coverage c = new Coverage("Gaussian 1/e time");
    for (int i = 0; i < 60; i++) {
      DecayResult r = DecayFit.fit(shaped(random, 3e-4, t -> Math.exp(-t * t / 1e-4)));
      assertEquals(Envelope.GAUSSIAN, r.envelope());
      assertFalse(r.warnings().isEmpty());
      c.add(r.t2Star(), 0.01);
      assertEquals(1, r.amplitude().value(), 6 * r.amplitude().u());
      assertEquals(0.4, r.phaseRadians().value(), 6 * r.phaseRadians().u());
      // FWHM of exp(-t^2/G^2): 2 sqrt(ln 2)/(pi G)
      assertEquals(
          2 * Math.sqrt(Math.log(2)) / (Math.PI * 0.01),
          r.linewidthHertz().value(),
          6 * r.linewidthHertz().u());
    }
    assertEquals(1, c.meanSquare(), 0.6, c.toString());
  }

  @Test
  void twoDecaysAreCalledTwo() throws NotDetermined {
    Random random = new Random(8);
    double truth = 0;
    for (double t = 0; 0.6 * Math.exp(-t / 0.02) + 0.4 * Math.exp(-t / 0.004) > 1 / Math.E; ) {
      t += 1e-7;
      truth = t;
    }
    Coverage c = new Coverage("1/e time of two decays");
    for (int i = 0; i < 60; i++) {
      DecayResult r =
          DecayFit.fit(
              shaped(random, 0, t -> 0.6 * Math.exp(-t / 0.02) + 0.4 * Math.exp(-t / 0.004)));
      assertEquals(Envelope.TWO_EXPONENTIALS, r.envelope());
      assertEquals(2, r.components().size());
      c.add(r.t2Star(), truth);
    }
    assertEquals(1, c.meanSquare(), 0.6, c.toString());
  }

  @Test
  void aStretchedDecayIsReadOffItsEnvelope() throws NotDetermined {
    DecayResult r =
        DecayFit.fit(shaped(new Random(9), 0, t -> Math.exp(-Math.pow(t / 0.008, 0.5))));
    assertTrue(r.envelope() != Envelope.EXPONENTIAL);
    assertFalse(r.warnings().isEmpty());
  }

  @Test
  void aDcOffsetIsFoundAndTakenOut() throws NotDetermined {
    Fid fid =
        Synthetic.sum(
            noisy(new Random(10), 4096, 0, 20, 1, 0.3, 0.05),
            Synthetic.decay(4096, DWELL, 0, 2, 0.5, 0, 1e12));
    DecayResult r = DecayFit.fit(fid);
    assertEquals(Envelope.EXPONENTIAL, r.envelope());
    assertEquals(0.05, r.t2Star().value(), 5 * r.t2Star().u());
    assertEquals(2 * Math.cos(0.5), r.dcRe(), 0.1);
    DecayResult asked = DecayFit.fit(fid, DecayFit.Options.usual().withConstant(true));
    assertEquals(r.t2Star().value(), asked.t2Star().value(), r.t2Star().u());
  }

  @Test
  void oneExponentialIsSeldomTakenForAnythingElse() throws NotDetermined {
    Random random = new Random(12);
    int other = 0;
    for (int i = 0; i < 500; i++) {
      DecayResult r = DecayFit.fit(noisy(random, 1024, 0, 30, 1, 321, 0.02));
      other += r.envelope() == Envelope.EXPONENTIAL ? 0 : 1;
    }
    assertTrue(other <= 4, other + " of 500, stated: one in a thousand");
  }

  @Test
  void modelResidualsAndShapeFitTogether() throws NotDetermined {
    Fid fid = noisy(new Random(13), 2048, 2e-3, 50, -2, 800, 0.04);
    DecayResult r = DecayFit.fit(fid);
    Fid left = r.residuals(fid);
    double square = 0;
    for (int k = 0; k < left.points(); k++) {
      square += left.re(k) * left.re(k) + left.im(k) * left.im(k);
    }
    assertEquals(1, Math.sqrt(square / (2 * left.points())), 0.05);
    Fid shape = r.shape(fid);
    assertEquals(Math.exp(-2e-3 / 0.04), shape.magnitude(0), 0.003);
  }

  /**
   * The magnitude's noise floor: what a fit of the magnitude would make of it. Kept as a reminder
   * why it is not the program's answer.
   */
  @Test
  void theShortcutsAreBiasedAndTheFitIsNot() throws NotDetermined {
    Random random = new Random(14);
    int n = 2048;
    double t2 = n * DWELL / 5;
    double complex = 0;
    double logarithm = 0;
    int draws = 60;
    for (int i = 0; i < draws; i++) {
      Fid fid = noisy(random, n, 0, 20, 1, 300, t2);
      complex += DecayFit.fit(fid).t2Star().value() / draws;
      double st = 0;
      double sy = 0;
      double stt = 0;
      double sty = 0;
      for (int k = 0; k < n; k++) {
        double t = fid.time(k);
        double y = Math.log(fid.magnitude(k));
        st += t;
        sy += y;
        stt += t * t;
        sty += t * y;
      }
      logarithm += -(n * stt - st * st) / (n * sty - st * sy) / draws;
    }
    assertEquals(1, complex / t2, 0.01);
    assertTrue(logarithm / t2 > 1.4, "log-linear: " + logarithm / t2);
  }
}
