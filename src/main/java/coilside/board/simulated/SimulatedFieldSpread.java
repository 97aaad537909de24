package coilside.board.simulated;

import coilside.board.simulated.Scenario.Shape;

/**
 * Isochromats that stand for a field distribution: offsets with weights that sum to 1.
 *
 * <p>Offsets lie on x(u) with u uniform, weights are density times spacing. For the Lorentzian x =
 * w sinh(b u), which is dense in the middle and still reaches 3000 half widths: what is cut off is
 * 2e-4 of the line, and the sum follows the exponential decay within 1e-4 while it lasts.
 * Equal-weight quantiles do worse, since their few isochromats in the wings beat visibly against
 * each other.
 */
record SimulatedFieldSpread(double[] hertz, double[] weight) {
  private static final double WING = 3000;
  private static final double SIGMAS = 5.5;
  private static final double LOWER_PART = 0.3;
  private static final double HALF_HEIGHT = Math.sqrt(2 * Math.log(2));

  static SimulatedFieldSpread of(Shape shape, double widthHertz, int count) {
    double[] hertz = new double[count];
    double[] weight = new double[count];
    double sum = 0;
    for (int j = 0; j < count; j++) {
      double u = (2 * j + 1.0) / count - 1;
      switch (shape) {
        case LORENTZIAN -> {
          double reach = Math.log(WING + Math.sqrt(WING * WING + 1));
          double x = Math.sinh(reach * u);
          hertz[j] = widthHertz / 2 * x;
          weight[j] = Math.cosh(reach * u) / (1 + x * x);
        }
        case GAUSSIAN -> {
          hertz[j] = widthHertz / (2 * HALF_HEIGHT) * SIGMAS * u;
          weight[j] = Math.exp(-SIGMAS * SIGMAS * u * u / 2);
        }
        case LOPSIDED -> {
          double part = u < 0 ? LOWER_PART : 1 - LOWER_PART;
          double largest = widthHertz * (1 - LOWER_PART) / HALF_HEIGHT;
          hertz[j] = largest * SIGMAS * u;
          double z = hertz[j] / (widthHertz * part / HALF_HEIGHT);
          weight[j] = widthHertz == 0 ? 1 : Math.exp(-z * z / 2);
        }
        default -> throw new IllegalStateException("shape " + shape);
      }
      sum += weight[j];
    }
    for (int j = 0; j < count; j++) {
      weight[j] /= sum;
    }
    return new SimulatedFieldSpread(hertz, weight);
  }

  /** Standard normal deviates in a low-discrepancy order: neighbours are far apart. */
  static double[] normalDeviates(int count) {
    int steps = 4000;
    double[] z = new double[steps + 1];
    double[] below = new double[steps + 1];
    for (int i = 0; i <= steps; i++) {
      z[i] = -4 + 8.0 * i / steps;
      double density = Math.exp(-z[i] * z[i] / 2);
      below[i] = i == 0 ? 0 : below[i - 1] + density;
    }
    double golden = (Math.sqrt(5) - 1) / 2;
    double[] out = new double[count];
    for (int j = 0; j < count; j++) {
      double at = (0.5 + j * golden) % 1 * below[steps];
      int i = java.util.Arrays.binarySearch(below, at);
      int k = Math.max(1, Math.min(steps, i < 0 ? -i - 1 : i));
      double part = (at - below[k - 1]) / (below[k] - below[k - 1]);
      out[j] = z[k - 1] + part * (z[k] - z[k - 1]);
    }
    return out;
  }
}
