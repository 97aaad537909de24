package coilside.spin;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;

import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class BlochPulseTest {
  /**
   * Validation: Bloch/Torrey equations solved in 30-digit arithmetic, nutation 5 kHz, start (0, 0,
   * 1). The source's rotations run the other way: My has the opposite sign here.
   */
  @ParameterizedTest
  @CsvSource({
    "0,    0.1, 2e-3, 50e-6,  0, 0.987676703152, 0.00806649938774",
    "0,    0.1, 2e-3, 100e-6, 0, 0.000721733775153, -0.974811614064",
    "0,    0.1, 2e-3, 200e-6, 0, -0.000165746574013, 0.950277431267",
    "0,    0.1, 2e-3, 1e-3,   0, -0.000668684766737, 0.774911275441",
    "2000, 0.1, 2e-3, 50e-6,  0.37998068111, 0.910857912757, 0.0414290635101",
    "2000, 0.1, 2e-3, 100e-6, 0.655542143866, -0.212028785089, -0.682999800759",
    "2000, 0.1, 2e-3, 1e-3,   0.421036797818, 0.462728194599, -0.389279309542",
    "5000, 1,   0.5,  50e-6,  0.802799742628, 0.56262916096, 0.197184213034",
    "5000, 1,   0.5,  1e-3,   0.0495576159422, 0.304825727023, 0.949947610335"
  })
  void torreysValuesToNineDigits(
      double offset, double t1, double t2, double seconds, double x, double y, double z) {
    Magnetisation m =
        new BlochPulse(seconds, 5e3, 0, offset, t1, t2).apply(Magnetisation.EQUILIBRIUM);
    assertEquals(x, m.x(), 1e-9 * Math.max(Math.abs(x), 1e-3));
    assertEquals(-y, m.y(), 1e-9 * Math.max(Math.abs(y), 1e-3));
    assertEquals(z, m.z(), 1e-9 * Math.max(Math.abs(z), 1e-3));
  }

  /** Two ways to the same: matrix exponential against Rodrigues' formula and free precession. */
  @Test
  void agreesWithTheTurnAndWithFreePrecession() {
    SplittableRandom random = new SplittableRandom(1);
    for (int i = 0; i < 200; i++) {
      Magnetisation m =
          new Magnetisation(
              random.nextDouble(-1, 1), random.nextDouble(-1, 1), random.nextDouble(-1, 1));
      double seconds = random.nextDouble(1e-6, 1e-3);
      double nutation = random.nextDouble(0, 2e4);
      double phase = random.nextDouble(-7, 7);
      double offset = random.nextDouble(-2e4, 2e4);
      double never = Double.POSITIVE_INFINITY;
      near(
          m.pulsed(seconds, nutation, phase, offset),
          new BlochPulse(seconds, nutation, phase, offset, never, never).apply(m));
      near(
          m.free(seconds, offset, 0.12, 0.03),
          new BlochPulse(seconds, 0, phase, offset, 0.12, 0.03).apply(m));
    }
  }

  private static void near(Magnetisation expected, Magnetisation seen) {
    assertEquals(expected.x(), seen.x(), 1e-11);
    assertEquals(expected.y(), seen.y(), 1e-11);
    assertEquals(expected.z(), seen.z(), 1e-11);
  }

  /** The signal package's sign: an offset above the carrier turns the signal forward. */
  @Test
  void offsetsTurnForward() {
    Magnetisation m = new Magnetisation(1, 0, 0).free(1e-3, 100, Double.POSITIVE_INFINITY, 0.5);
    assertEquals(2 * Math.PI * 0.1, m.phase(), 1e-12);
    assertEquals(Math.exp(-2e-3), m.transverse(), 1e-12);
    Magnetisation pulsed = Magnetisation.EQUILIBRIUM.pulsed(50e-6, 5e3, 0.3, 0);
    assertEquals(0.3 - Math.PI / 2, pulsed.phase(), 1e-12);
  }

  @Test
  void refusesWhatMakesNoSense() {
    assertThrows(IllegalArgumentException.class, () -> new BlochPulse(-1, 0, 0, 0, 1, 1));
    assertThrows(IllegalArgumentException.class, () -> new BlochPulse(1, 0, 0, 0, 0, 1));
    assertThrows(IllegalArgumentException.class, () -> new BlochPulse(1, Double.NaN, 0, 0, 1, 1));
  }
}
