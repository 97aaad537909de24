package coilside.spin;

import static org.junit.jupiter.api.Assertions.assertEquals;

import coilside.quantity.Constant;
import coilside.quantity.Nucleus;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class CoilAndSampleTest {
  private static final double PROTON = Nucleus.HYDROGEN_1.larmorHertzPerTesla();

  /** Water at 25 degC: 997.05 kg/m^3, 6.6659e28 protons/m^3 (from memory, 5 digits). */
  @ParameterizedTest
  @CsvSource({
    "2e6,  1.60967e-7, 0.15135e-3, 393e-3",
    "10e6, 8.04837e-7, 0.75676e-3, 78.6e-3",
    "20e6, 1.60967e-6, 1.51352e-3, 39.3e-3"
  })
  void thermalMagnetisationOfWater(
      double larmor, double polarisation, double magnetisation, double damping) {
    assertEquals(polarisation, Sample.polarisation(larmor, 298.15), 1e-5 * polarisation);
    double m0 = Sample.magnetisation(6.6659e28, PROTON, larmor, 298.15);
    // The table uses the free proton's moment; 26 ppm below its last digit.
    assertEquals(magnetisation, m0, 1e-4 * magnetisation);
    assertEquals(damping, Coil.radiationDampingSeconds(1, 100, PROTON, m0), 2e-3 * damping);
    double susceptibility = m0 * Constant.MAGNETIC_CONSTANT.value() / (larmor / PROTON);
    assertEquals(4.0489e-9, susceptibility, 1e-3 * 4.0489e-9);
  }

  /** Johnson noise of 50 ohm. */
  @Test
  void thermalNoise() {
    assertEquals(0.89486e-9, Coil.noiseDensity(50, 290), 5e-15);
    assertEquals(0.90735e-9, Coil.noiseDensity(50, 298.15), 5e-15);
  }

  /** 2 Q/omega at Q = 100. */
  @ParameterizedTest
  @CsvSource({"2e6, 15.92e-6", "10e6, 3.183e-6", "20e6, 1.592e-6"})
  void ringDown(double tuned, double seconds) {
    assertEquals(seconds, Coil.ringDownSeconds(100, tuned), 4e-4 * seconds);
  }

  /**
   * BCMB/CHEM 8190 problem set 2, University of Georgia: 2.9e-5 T for a 200 us pulse; and 8 uH, 10
   * ohm at 103 MHz have Q 518.
   */
  @Test
  void pulseFields() {
    assertEquals(0.58718e-3, Coil.b1Tesla(10e-6, PROTON), 3e-8);
    assertEquals(29.359e-6, Coil.b1Tesla(200e-6, PROTON), 2e-9);
    assertEquals(0.31623e-3, Coil.b1Tesla(1, 1, 1e6, 1e-6), 5e-9);
  }
}
