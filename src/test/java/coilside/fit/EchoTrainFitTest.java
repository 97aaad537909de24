package coilside.fit;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import java.util.Random;
import java.util.function.DoubleUnaryOperator;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;

class EchoTrainFitTest {
  private static EchoTrainFit.Echoes echoes(
      Random random, int n, double spacing, double alternation, double u, DoubleUnaryOperator d) {
    double[] t = new double[n];
    double[] re = new double[n];
    double[] im = new double[n];
    for (int i = 0; i < n; i++) {
      t[i] = (i + 1) * spacing;
      double s = d.applyAsDouble(t[i]) * (1 + (i % 2 == 0 ? alternation : -alternation));
      re[i] = s * Math.cos(2.2) + u * random.nextGaussian();
      im[i] = s * Math.sin(2.2) + u * random.nextGaussian();
    }
    return EchoTrainFit.Echoes.of(t, re, im, u);
  }

  private static Coverage coverage(int draws, double alternation, long seed) throws NotDetermined {
    Random random = new Random(seed);
    Coverage c = new Coverage("T2");
    for (int i = 0; i < draws; i++) {
      double t2 = 0.03 * Math.pow(10, random.nextDouble());
      c.add(
          EchoTrainFit.fit(echoes(random, 100, t2 / 25, alternation, 0.05, t -> Math.exp(-t / t2)))
              .t2(),
          t2);
    }
    return c;
  }

  @Test
  void uncertaintiesCover() throws NotDetermined {
    coverage(500, 0, 1).check();
    coverage(500, 0.05, 2).check();
  }

  @Test
  @Tag("validation")
  void uncertaintiesCoverInFull() throws NotDetermined {
    coverage(10_000, 0, 3).check();
    coverage(10_000, 0.05, 4).check();
  }

  /** Echoes long after the signal is gone do not bend the decay, as their magnitude would. */
  @Test
  void lateEchoesDoNotBias() throws NotDetermined {
    Random random = new Random(5);
    Coverage c = new Coverage("T2 with a long tail of noise");
    for (int i = 0; i < 300; i++) {
      c.add(
          EchoTrainFit.fit(echoes(random, 200, 0.005, 0, 0.1, t -> Math.exp(-t / 0.05))).t2(),
          0.05);
    }
    assertEquals(0, c.bias(), 0.025);
    c.check();
  }

  @Test
  void oddAndEvenEchoesAreToldApart() throws NotDetermined {
    EchoTrainFit.Result r =
        EchoTrainFit.fit(echoes(new Random(6), 60, 0.005, 0.08, 0.01, t -> Math.exp(-t / 0.1)));
    assertEquals(0.08, r.alternation().value(), 4 * r.alternation().u());
    assertTrue(r.warnings().stream().anyMatch(w -> w.contains("180 degrees")));
    assertEquals(0.1, r.t2().value(), 4 * r.t2().u());
  }

  @Test
  void twoDecaysAreCalledTwo() throws NotDetermined {
    EchoTrainFit.Result r =
        EchoTrainFit.fit(
            echoes(
                new Random(7),
                300,
                0.002,
                0,
                0.005,
                t -> 0.6 * Math.exp(-t / 0.1) + 0.4 * Math.exp(-t / 0.02)));
    assertTrue(r.secondT2().isPresent());
    assertEquals(0.1, r.firstT2(), 0.005);
    assertEquals(0.02, r.secondT2().getAsDouble(), 0.002);
    assertEquals(0.4, r.secondFraction(), 0.03);
    assertFalse(r.warnings().isEmpty());
    assertEquals(0.6 * Math.exp(-1) + 0.4 * Math.exp(-5), r.curve(new double[] {0.1})[0], 0.004);
  }

  @Test
  void noiseAndShortTrainsAreRefused() {
    Random random = new Random(8);
    NotDetermined e =
        assertThrows(
            NotDetermined.class, () -> EchoTrainFit.fit(echoes(random, 60, 0.005, 0, 1, t -> 0)));
    assertEquals(NotDetermined.Reason.NO_SIGNAL, e.reason());
    e =
        assertThrows(
            NotDetermined.class,
            () -> EchoTrainFit.fit(echoes(random, 10, 0.001, 0, 0.02, t -> Math.exp(-t))));
    assertEquals(NotDetermined.Reason.TOO_SHORT, e.reason());
  }
}
