package coilside.fit;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.fit.RecoveryFit.Kind;
import java.util.ArrayList;
import java.util.List;
import java.util.Random;
import org.junit.jupiter.api.Test;

/** Recoveries made from two T1 by the closed form written out here, not by the fit's own model. */
class TwoRecoveriesTest {
  private static final double LONG = 0.16;
  private static final double SHORT = 0.05;
  private static final double PART = 0.6;

  private static List<RecoveryPoint> points(Kind kind, double u, long seed) {
    Random random = new Random(seed);
    List<RecoveryPoint> points = new ArrayList<>();
    for (int i = 0; i < 20; i++) {
      double t = 0.005 * Math.pow(160, i / 19.0);
      double a = Math.exp(-t / LONG);
      double b = Math.exp(-t / SHORT);
      double s =
          kind == Kind.INVERSION
              ? PART * (1 - 1.95 * a) + (1 - PART) * (1 - 1.95 * b)
              : PART * (1 - 0.9 * a) + (1 - PART) * (1 - 0.9 * b);
      double rest = kind == Kind.INVERSION ? Double.POSITIVE_INFINITY : 0;
      points.add(new RecoveryPoint(t, s + u * random.nextGaussian(), u, rest));
    }
    return points;
  }

  /** 0.6 exp(-t/0.16 s) + 0.4 exp(-t/0.05 s) = 1/e. */
  private static double oneOverE() {
    double low = 0;
    double high = 1;
    for (int i = 0; i < 60; i++) {
      double t = (low + high) / 2;
      boolean above = PART * Math.exp(-t / LONG) + (1 - PART) * Math.exp(-t / SHORT) > Math.exp(-1);
      low = above ? t : low;
      high = above ? high : t;
    }
    return low;
  }

  @Test
  void exactPointsGiveBothT1Back() {
    for (Kind kind : Kind.values()) {
      double first = kind == Kind.INVERSION ? -0.9 : 0.1;
      TwoRecoveries t =
          TwoRecoveries.fit(points(kind, 1e-6, 1), kind, new double[] {1, first, Math.log(0.1)})
              .orElseThrow();
      assertEquals(LONG, t.longer().value(), 1e-3 * LONG);
      assertEquals(SHORT, t.shorter().value(), 1e-3 * SHORT);
      assertEquals(PART, t.longerFraction().value(), 1e-3);
      assertEquals(oneOverE(), t.oneOverE().value(), 1e-4 * oneOverE());
      assertEquals(kind == Kind.INVERSION ? 0.95 : 0.1, t.preparation().value(), 1e-3);
      assertEquals(1, t.amplitude().value(), 1e-4);
    }
  }

  /** The 1/e time's uncertainty covers: mean square of (value - truth)/u within 4 sigma of 1. */
  @Test
  void theOneOverETimeCovers() {
    int n = 200;
    double square = 0;
    for (int i = 0; i < n; i++) {
      TwoRecoveries t =
          TwoRecoveries.fit(
                  points(Kind.INVERSION, 1e-3, 100 + i),
                  Kind.INVERSION,
                  new double[] {1, -0.9, Math.log(0.1)})
              .orElseThrow();
      square += Math.pow((t.oneOverE().value() - oneOverE()) / t.oneOverE().u(), 2) / n;
    }
    assertEquals(1, square, 4 * Math.sqrt(2.0 / n));
  }

  @Test
  void tooFewPointsGiveNothing() {
    List<RecoveryPoint> seven = points(Kind.INVERSION, 1e-3, 1).subList(0, 7);
    assertTrue(
        TwoRecoveries.fit(seven, Kind.INVERSION, new double[] {1, -0.9, Math.log(0.1)}).isEmpty());
  }

  /** A plan never asks for a recovery time that cannot be played. */
  @Test
  void thePlanKeepsToTheShortestRecovery() {
    RecoveryPlan plan =
        new RecoveryPlan(RecoveryFit.Options.of(Kind.SATURATION, 1e-3, 60), 0.001, Double.NaN, 3);
    List<RecoveryPoint> points = new ArrayList<>();
    Random random = new Random(3);
    List<Double> asked = new ArrayList<>();
    for (double t : new double[] {20, 3, 20, 8}) {
      points.add(new RecoveryPoint(t, 1 + 1e-3 * random.nextGaussian(), 1e-3, 0));
    }
    for (int i = 0; i < 12; i++) {
      double t = plan.next(points, 0.03).recoverySeconds();
      assertTrue(t >= 0.03, "asked for " + t + " s");
      asked.add(t);
      double s = 1 - 0.97 * Math.exp(-t / 0.12);
      points.add(new RecoveryPoint(t, s + 1e-3 * random.nextGaussian(), 1e-3, 0));
    }
    assertTrue(asked.stream().distinct().count() > 2, asked.toString());
    assertTrue(plan.next(points, 0.03).result().orElseThrow().t1().relative() < 0.01);
  }
}
