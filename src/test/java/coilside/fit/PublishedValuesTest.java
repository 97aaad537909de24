package coilside.fit;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import java.util.ArrayList;
import java.util.List;
import org.junit.jupiter.api.Test;

/** Numbers that others have published, each with its source. */
class PublishedValuesTest {
  /** NIST SP 1065 (Riley 2008), tables 30 and 31: nine frequencies. */
  @Test
  void nineFrequenciesOfSp1065() {
    double[] y = {892, 809, 823, 798, 671, 644, 883, 903, 677};
    double[][] want = {
      {91.22945, 91.22945, 91.22945, 52.67135, 70.80607},
      {115.8082, 85.95287, 74.78849, 86.35831, 85.61487}
    };
    for (int m = 1; m <= 2; m++) {
      double[] w = want[m - 1];
      assertEquals(w[0], AllanDeviation.plain(y, m), 6e-5);
      assertEquals(w[1], AllanDeviation.overlapping(y, m), 6e-6);
      assertEquals(w[2], AllanDeviation.modified(y, m), 6e-6);
      assertEquals(w[3], AllanDeviation.time(y, m, 1), 6e-6);
      assertEquals(w[4], AllanDeviation.hadamard(y, m), 6e-6);
    }
  }

  /** NIST SP 1065: the 1000-point set from the generator n' = 16807 n mod 2147483647. */
  @Test
  void thousandFrequenciesOfSp1065() {
    double[] y = new double[1000];
    long n = 1234567890L;
    for (int i = 0; i < y.length; i++) {
      y[i] = n / 2147483647.0;
      n = 16807 * n % 2147483647L;
    }
    int[] m = {1, 10, 100};
    double[] plain = {2.922319e-1, 9.965736e-2, 3.897804e-2};
    double[] overlapping = {2.922319e-1, 9.159953e-2, 3.241343e-2};
    double[] modified = {2.922319e-1, 6.172376e-2, 2.170921e-2};
    double[] time = {1.687202e-1, 3.563623e-1, 1.253382};
    double[] hadamard = {2.943883e-1, 9.581083e-2, 3.237638e-2};
    for (int i = 0; i < 3; i++) {
      assertEquals(plain[i], AllanDeviation.plain(y, m[i]), 1e-6 * plain[i]);
      assertEquals(overlapping[i], AllanDeviation.overlapping(y, m[i]), 1e-6 * overlapping[i]);
      assertEquals(modified[i], AllanDeviation.modified(y, m[i]), 1e-6 * modified[i]);
      assertEquals(time[i], AllanDeviation.time(y, m[i], 1), 1e-6 * time[i]);
      assertEquals(hadamard[i], AllanDeviation.hadamard(y, m[i]), 1e-6 * hadamard[i]);
    }
    assertThrows(IllegalArgumentException.class, () -> AllanDeviation.hadamard(y, 400));
  }

  /**
   * Ernst angles (Ernst and Anderson 1966; the angles by arithmetic), the textbook answer of 20
   * degrees for 0.3 s with T1 5 s (Univ. Georgia BCMB/CHEM 8190, problem set 2), and the best
   * repetition time of a 90-degree train.
   */
  @Test
  void ernstAngles() {
    double[][] table = {
      {3, 87.146}, {2, 82.222}, {1, 68.415}, {0.5, 52.661}, {0.2, 35.042}, {0.1, 25.199}
    };
    for (double[] row : table) {
      assertEquals(row[1], Math.toDegrees(RepetitionAdvice.ernstAngle(row[0], 1)), 6e-4);
    }
    assertEquals(19.65, Math.toDegrees(RepetitionAdvice.ernstAngle(0.3, 5)), 0.006);
    assertEquals(0.993262, RepetitionAdvice.signal(5, 1, Math.PI / 2), 5e-7);
    assertEquals(1.2564, RepetitionAdvice.ninety(0.1, 1, 10, 100).repetitionSeconds(), 5e-5);
    for (double tr : new double[] {1.2, 1.3}) {
      assertTrue(
          RepetitionAdvice.at(tr, Math.PI / 2, 1, 10, 100).gainOverFullRecovery()
              < RepetitionAdvice.ninety(0.1, 1, 10, 100).gainOverFullRecovery());
    }
  }

  /** S/N after 4 against 100 minutes: factor 5 (Univ. Georgia BCMB/CHEM 8190, problem set 2). */
  @Test
  void timeGoesWithTheSquareOfTheSnr() {
    double one = RepetitionAdvice.at(1, Math.PI / 2, 0.2, 10, 100).seconds();
    double five = RepetitionAdvice.at(1, Math.PI / 2, 0.2, 10, 500).seconds();
    assertEquals(25, five / one, 0.2);
  }

  private static List<RecoveryPoint> magnitudes(double[] data, int negative) {
    List<RecoveryPoint> points = new ArrayList<>();
    for (int i = 0; i < data.length; i += 2) {
      points.add(
          new RecoveryPoint(
              data[i], (i / 2 < negative ? -1 : 1) * data[i + 1], 1, Double.POSITIVE_INFINITY));
    }
    return points;
  }

  /**
   * Deuterated ethanol, inversion recovery at 300 K and 192 K, from an open exercise; areas without
   * sign, the first five turned round. Its answer is not printed: the values held against are those
   * of an independent fit with a free inversion, and the null at 0.07564 s.
   */
  @Test
  void inversionRecoveryOfAnOpenExercise() throws NotDetermined {
    double[] warm = {
      0.00303, 85.3, 0.01210, 70.0, 0.02723, 49.3, 0.04841, 30.1, 0.07564, 0.5, 0.10892, 24.1,
      0.14825, 46.7, 0.19363, 64.2, 0.24507, 77.3, 0.36609, 92.6, 0.43567, 96.6, 0.51131, 98.7
    };
    double[] cold = {
      0.00015, 95.6, 0.00061, 86.5, 0.00138, 59.2, 0.00245, 36.3, 0.00383, 12.1, 0.00551, 15.6,
      0.00750, 33.9, 0.00980, 53.8, 0.01240, 67.0, 0.01852, 84.0, 0.02204, 87.7, 0.02587, 90.7
    };
    RecoveryFit.Options options = RecoveryFit.Options.of(RecoveryFit.Kind.INVERSION, 1e-3, 5);
    RecoveryFit.Result r = RecoveryFit.fit(magnitudes(warm, 5), options);
    assertEquals(0.12088, r.t1().value(), 0.0003);
    assertEquals(0.878, r.preparation().value(), 0.003);
    // The exercise names no uncertainty of its areas: the scatter tells it.
    assertEquals(0.0024, r.t1().u() * Math.sqrt(r.reducedChiSquare()), 0.0002);
    RecoveryFit.Result c = RecoveryFit.fit(magnitudes(cold, 5), options);
    assertEquals(6.145e-3, c.t1().value(), 2e-5);
    assertEquals(1.086, c.preparation().value(), 0.004);
    // Here the scatter is so large that it has been taken into the uncertainty already.
    assertEquals(0.146e-3, c.t1().u(), 0.005e-3);
  }

  /** NIST StRD BoxBOD and Misra1a as what they are here, saturation recoveries. */
  @Test
  void certifiedSaturationRecovery() throws NotDetermined {
    double[] x = {1, 2, 3, 5, 7, 10};
    double[] y = {109, 149, 149, 191, 213, 224};
    LeastSquares.Solution s =
        LeastSquares.solve(
            (p, values, jacobian) -> {
              for (int i = 0; i < x.length; i++) {
                double[] b =
                    RecoveryFit.basis(
                        new RecoveryPoint(x[i], 0, 1, 0), p[1], RecoveryFit.Kind.SATURATION);
                values[i] = p[0] * b[0];
                jacobian[i][0] = b[0];
                jacobian[i][1] = p[0] * b[2] / p[1];
              }
            },
            y,
            null,
            new double[] {200, 2});
    assertEquals(213.80940889, s.parameters()[0], 2e-5);
    assertEquals(1 / 0.54723748542, s.parameters()[1], 2e-6);
    assertEquals(12.354515176, s.uFromScatter(0), 1e-4);
  }

  /** Nulls 0.5, 0.6, 0.8 s give T1 0.721, 0.866, 1.154 s (Keeler, exercise 9.5; Atkins P12C.8). */
  @Test
  void nullsOfInversionRecovery() throws NotDetermined {
    for (double[] row : new double[][] {{0.5, 0.721}, {0.6, 0.866}, {0.8, 1.154}}) {
      double t1 = row[0] / Math.log(2);
      List<RecoveryPoint> points = new ArrayList<>();
      for (double x : new double[] {0.01, 0.5, 1, 2, 4, 8}) {
        points.add(new RecoveryPoint(x * t1, 1 - 2 * Math.exp(-x), 1e-3, Double.POSITIVE_INFINITY));
      }
      RecoveryFit.Result r =
          RecoveryFit.fit(points, RecoveryFit.Options.of(RecoveryFit.Kind.INVERSION, 0.01, 10));
      assertEquals(row[1], r.t1().value(), 5e-4);
      assertEquals(1, r.preparation().value(), 1e-6);
      assertEquals(0, r.curve(new double[] {row[0]})[0], 1e-6);
    }
  }
}
