package coilside.fit;

import static org.junit.jupiter.api.Assertions.assertEquals;

import org.junit.jupiter.api.Test;

class DecayBoundTest {
  /**
   * What a short record costs. The table was worked with finite dwell times, which lowers it by a
   * quarter of a percent against the closed form.
   */
  @Test
  void factorsForShortRecords() {
    double[][] table = {{0.5, 4.455}, {1, 2.042}, {1.5, 1.442}, {2, 1.207}, {3, 1.047}, {5, 1.000}};
    for (double[] row : table) {
      assertEquals(row[1], DecayBound.recordFactor(row[0]), 3e-3 * row[1]);
    }
    assertEquals(DecayBound.recordFactor(0.0101), DecayBound.recordFactor(0.0099), 60);
  }

  /**
   * Yao and Pandit, IEEE Trans. Signal Process. 43, 878-885 (1995), full decay: sd(omega) = sqrt(8
   * R^3 sigma^2 dt)/A. A = 1, T2 = 20 ms, dt = 10 us, sigma = 0.05: sd(f) = 0.02516 Hz, by the
   * exact matrix 0.025158 Hz.
   */
  @Test
  void frequencyBoundOfAFullDecay() {
    DecayBound b = DecayBound.exact(20, 0.02, 1e-5, 40_000);
    assertEquals(0.025158, b.offsetHertz(), 1e-6);
    assertEquals(Math.sqrt(4 * 50 * 1e-5) / 20, b.phaseRadians(), 1e-5);
    assertEquals(b.phaseRadians(), b.amplitude(), 1e-15);
    assertEquals(2 * Math.PI * b.offsetHertz() * 0.02, b.t2Star(), 1e-9);
  }

  /** Undamped: var omega = 12 sigma^2/(A^2 N (N^2 - 1)); Rife and Boorstyn 1974. */
  @Test
  void frequencyBoundWithoutDecay() {
    DecayBound b = DecayBound.exact(10, 1e9, 1, 1000);
    assertEquals(1.09545e-5, 2 * Math.PI * b.offsetHertz(), 2e-9);
  }

  @Test
  void closedFormAgreesWithTheSums() {
    for (double record : new double[] {0.5, 1, 2, 5}) {
      double exact = DecayBound.exact(10, 1, 1e-4, (int) (record * 1e4)).t2Star();
      assertEquals(exact, DecayBound.relativeT2Star(10, 1, 1e-4, record), 1e-3 * exact);
    }
  }

  @Test
  void scansGoWithTheSquare() {
    double one = DecayBound.relativeT2Star(2, 0.05, 1e-4, 0.25);
    assertEquals(
        (long) Math.ceil(one * one / 4e-4), DecayBound.scansFor(0.02, 2, 0.05, 1e-4, 0.25));
    assertEquals(1, DecayBound.scansFor(0.5, 100, 0.05, 1e-4, 0.25));
  }
}
