package coilside.fit;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.fit.RecoveryFit.Kind;
import java.util.ArrayList;
import java.util.Collections;
import java.util.List;
import java.util.Random;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;

class RecoveryFitTest {
  private static double truth(Kind kind, double t1, double quality, double recovery, double rest) {
    double e = Math.exp(-recovery / t1);
    if (kind == Kind.SATURATION) {
      return 1 - e + quality * e;
    }
    double before = Double.isInfinite(rest) ? 1 : 1 - Math.exp(-rest / t1);
    return 1 - e - quality * before * e;
  }

  private static Coverage coverage(Kind kind, int draws, long seed, double rest)
      throws NotDetermined {
    Random random = new Random(seed);
    Coverage c = new Coverage("T1 by " + kind + ", rest " + rest + " T1");
    for (int i = 0; i < draws; i++) {
      double t1 = 0.05 * Math.pow(40, random.nextDouble());
      double quality = kind == Kind.INVERSION ? 0.85 + 0.15 * random.nextDouble() : 0.1;
      List<RecoveryPoint> points = new ArrayList<>();
      for (double x : new double[] {0.02, 0.1, 0.25, 0.5, 0.8, 1.2, 1.6, 2.2, 3, 5}) {
        double s = truth(kind, t1, quality, x * t1, rest * t1);
        points.add(new RecoveryPoint(x * t1, s + 0.02 * random.nextGaussian(), 0.02, rest * t1));
      }
      c.add(RecoveryFit.fit(points, RecoveryFit.Options.of(kind, 0.01, 10)).t1(), t1);
    }
    return c;
  }

  @Test
  void uncertaintiesCover() throws NotDetermined {
    coverage(Kind.INVERSION, 500, 1, Double.POSITIVE_INFINITY).check();
    coverage(Kind.SATURATION, 500, 2, 0).check();
  }

  /** A rest of one T1 only, before an inversion that is not perfect, biases nothing. */
  @Test
  void anIncompleteRestIsInTheModel() throws NotDetermined {
    Coverage c = coverage(Kind.INVERSION, 500, 3, 1);
    c.check();
    assertEquals(0, c.bias(), 0.006);
  }

  @Test
  @Tag("validation")
  void uncertaintiesCoverInFull() throws NotDetermined {
    coverage(Kind.INVERSION, 10_000, 4, 3).check();
    coverage(Kind.SATURATION, 10_000, 5, 0).check();
  }

  private static void planned(Kind kind, int runs, double u, int most, long seed) {
    Random random = new Random(seed);
    Coverage c = new Coverage("planned T1 by " + kind);
    List<Integer> scans = new ArrayList<>();
    for (int i = 0; i < runs; i++) {
      double t1 = 0.02 * Math.pow(100, random.nextDouble());
      double quality = kind == Kind.INVERSION ? 0.9 : 0.05;
      RecoveryPlan plan =
          new RecoveryPlan(RecoveryFit.Options.of(kind, 0.005, 8), 0.05, Double.NaN, 3);
      List<RecoveryPoint> points = new ArrayList<>();
      RecoveryPlan.Advice a = plan.next(points);
      while (!a.enough() && points.size() < 100) {
        double rest = points.isEmpty() ? Double.POSITIVE_INFINITY : a.restSeconds();
        double s = truth(kind, t1, quality, a.recoverySeconds(), rest);
        points.add(new RecoveryPoint(a.recoverySeconds(), s + u * random.nextGaussian(), u, rest));
        a = plan.next(points);
      }
      assertTrue(a.enough(), "T1 " + t1 + " s not reached in 100 scans");
      scans.add(points.size());
      c.add(a.result().orElseThrow().t1(), t1);
    }
    Collections.sort(scans);
    assertTrue(scans.get(runs / 2) <= most, c + ", scans median " + scans.get(runs / 2));
    assertTrue(c.worst() < 0.05 * 5, c.toString());
    assertEquals(1, c.meanSquare(), 0.1 + 4.5 / Math.sqrt(runs), c.toString());
  }

  @Test
  void plansReachTheTargetFromNothing() {
    planned(Kind.INVERSION, 40, 1 / 30.0, 10, 11);
    planned(Kind.SATURATION, 40, 1 / 30.0, 30, 12);
  }

  @Test
  @Tag("validation")
  void plansReachTheTargetInFull() {
    planned(Kind.INVERSION, 600, 1 / 30.0, 10, 13);
    planned(Kind.SATURATION, 600, 1 / 30.0, 30, 14);
    planned(Kind.INVERSION, 400, 1 / 10.0, 48, 15);
  }

  @Test
  void timesTooShortAreRefused() {
    List<RecoveryPoint> points = new ArrayList<>();
    for (int i = 1; i <= 8; i++) {
      double t = 0.01 * i;
      points.add(
          new RecoveryPoint(t, truth(Kind.SATURATION, 3, 0, t, 0) + 0.01 * (i % 2), 0.01, 0));
    }
    NotDetermined e =
        assertThrows(
            NotDetermined.class,
            () -> RecoveryFit.fit(points, RecoveryFit.Options.of(Kind.SATURATION, 0.01, 10)));
    assertTrue(
        e.reason() == NotDetermined.Reason.TOO_SHORT
            || e.reason() == NotDetermined.Reason.NO_SIGNAL,
        e.reason() + ": " + e.getMessage());
  }

  @Test
  void aPoorInversionIsReported() throws NotDetermined {
    List<RecoveryPoint> points = new ArrayList<>();
    for (double t : new double[] {0.01, 0.1, 0.3, 0.6, 1, 2, 4}) {
      points.add(
          new RecoveryPoint(
              t, truth(Kind.INVERSION, 0.5, 0.3, t, 1e9), 0.001, Double.POSITIVE_INFINITY));
    }
    RecoveryFit.Result r =
        RecoveryFit.fit(points, RecoveryFit.Options.of(Kind.INVERSION, 0.01, 10));
    assertEquals(0.3, r.preparation().value(), 1e-6);
    assertTrue(r.warnings().get(0).contains("180-degree"), r.warnings().toString());
  }

  @Test
  void badPointsAreRefused() {
    List<RecoveryPoint> points =
        Collections.nCopies(6, new RecoveryPoint(0.1, 1, 0, Double.POSITIVE_INFINITY));
    NotDetermined e =
        assertThrows(
            NotDetermined.class,
            () -> RecoveryFit.fit(points, RecoveryFit.Options.of(Kind.INVERSION, 0.01, 10)));
    assertEquals(NotDetermined.Reason.BAD_INPUT, e.reason());
  }
}
