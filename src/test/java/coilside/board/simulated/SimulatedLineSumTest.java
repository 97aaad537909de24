package coilside.board.simulated;

import static org.junit.jupiter.api.Assertions.assertEquals;

import java.util.Arrays;
import java.util.SplittableRandom;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class SimulatedLineSumTest {
  /** Validation: the fast sum against the sum term by term; bound of the gridding, H = 6. */
  @ParameterizedTest
  @ValueSource(ints = {1, 23, 24, 25, 100, 1000, 4096, 5000})
  void fastSumEqualsTheSumTermByTerm(int n) {
    SplittableRandom random = new SplittableRandom(1);
    int lines = 300;
    double[] a = new double[lines];
    double[] b = new double[lines];
    double[] x = new double[lines];
    double size = 0;
    for (int j = 0; j < lines; j++) {
      a[j] = random.nextGaussian();
      b[j] = random.nextGaussian();
      x[j] = Math.PI * (2 * random.nextDouble() - 1);
      size += Math.hypot(a[j], b[j]);
    }
    x[0] = -Math.PI;
    x[1] = Math.PI;
    x[2] = 0;
    double[] re = new double[n];
    double[] im = new double[n];
    double[] re2 = new double[n];
    double[] im2 = new double[n];
    SimulatedLineSum sum = new SimulatedLineSum();
    SimulatedLineSum.Plan plan = new SimulatedLineSum.Plan(x, n);
    sum.add(plan, a, b, 0, lines / 2, re, im, n);
    sum.add(plan, a, b, lines / 2, lines, re, im, n);
    SimulatedLineSum.direct(
        Arrays.stream(x).map(Math::cos).toArray(),
        Arrays.stream(x).map(Math::sin).toArray(),
        a,
        b,
        0,
        lines,
        re2,
        im2,
        n);
    for (int k = 0; k < n; k++) {
      assertEquals(re2[k], re[k], 1e-6 * size);
      assertEquals(im2[k], im[k], 1e-6 * size);
    }
  }
}
