package coilside.fit;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.quantity.Measured;

/**
 * Counts how often a truth lies within one and 1.96 standard uncertainties, and the error itself.
 */
final class Coverage {
  private final String name;
  private int draws;
  private int one;
  private int two;
  private double squares;
  private double errors;
  private double errorSquares;
  private double worst;

  Coverage(String name) {
    this.name = name;
  }

  void add(Measured m, double truth) {
    add(m.value(), m.u(), truth);
  }

  void add(double value, double u, double truth) {
    double error = value - truth;
    draws++;
    one += Math.abs(error) < u ? 1 : 0;
    two += Math.abs(error) < 1.959964 * u ? 1 : 0;
    squares += error * error / (u * u);
    double relative = truth == 0 ? error : error / truth;
    errors += relative;
    errorSquares += relative * relative;
    worst = Math.max(worst, Math.abs(relative));
  }

  int draws() {
    return draws;
  }

  double oneSigma() {
    return one / (double) draws;
  }

  double meanSquare() {
    return squares / draws;
  }

  double bias() {
    return errors / draws;
  }

  double worst() {
    return worst;
  }

  /** Mean square relative error. */
  double variance() {
    return errorSquares / draws;
  }

  /**
   * Holds the targets: 1-sigma coverage within .66-.70, 95 % coverage within .94-.96. Fewer than
   * 8000 draws cannot tell so finely: then within 3.3 standard deviations of the count itself.
   */
  void check() {
    double ninetyFive = two / (double) draws;
    if (draws >= 8000) {
      assertTrue(oneSigma() >= 0.66 && oneSigma() <= 0.70, this + ": 1-sigma coverage");
      assertTrue(ninetyFive >= 0.94 && ninetyFive <= 0.96, this + ": 95 % coverage");
    } else {
      double slack = 3.3 / Math.sqrt(draws);
      assertEquals(0.683, oneSigma(), 0.466 * slack, this + ": 1-sigma coverage");
      assertEquals(0.95, ninetyFive, 0.218 * slack, this + ": 95 % coverage");
    }
  }

  @Override
  public String toString() {
    return String.format(
        java.util.Locale.ROOT,
        "%s: %d draws, 1-sigma %.3f, 95 %% %.3f, mean square %.3f, bias %.5f, worst %.4f",
        name,
        draws,
        oneSigma(),
        two / (double) draws,
        meanSquare(),
        bias(),
        worst);
  }
}
