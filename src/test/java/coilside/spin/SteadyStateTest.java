package coilside.spin;

import static org.junit.jupiter.api.Assertions.assertEquals;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class SteadyStateTest {
  /** Validation: Ernst angles to 1e-3 degree, 30-digit arithmetic. */
  @ParameterizedTest
  @CsvSource({"3, 87.146", "2, 82.222", "1, 68.415", "0.5, 52.661", "0.2, 35.042", "0.1, 25.199"})
  void ernstAngles(double repetition, double degrees) {
    assertEquals(degrees, Math.toDegrees(SteadyState.ernstAngle(repetition, 1)), 5e-4);
  }

  /**
   * BCMB/CHEM 8190 problem set 2, University of Georgia: 0.3 s at T1 5 s gives about 20 degrees.
   */
  @Test
  void aPublishedExercise() {
    assertEquals(19.65, Math.toDegrees(SteadyState.ernstAngle(0.3, 5)), 5e-3);
  }

  @Test
  void ninetyDegreesAtFiveT1() {
    assertEquals(0.993262, SteadyState.signal(Math.PI / 2, 5, 1), 5e-7);
  }

  /** The best SNR per square root of time with 90-degree pulses lies at 1.2564 T1. */
  @Test
  void bestRepetitionTimeForNinetyDegrees() {
    double best = 0;
    double at = 0;
    for (double tr = 1.0; tr < 1.6; tr += 1e-4) {
      double snr = SteadyState.signal(Math.PI / 2, tr, 1) / Math.sqrt(tr);
      if (snr > best) {
        best = snr;
        at = tr;
      }
    }
    assertEquals(1.2564, at, 2e-4);
  }

  /** Independent: pulse after pulse by the Bloch equations with T2 short. */
  @Test
  void theTrainPlayedOut() {
    Magnetisation m = Magnetisation.EQUILIBRIUM;
    double flip = Math.toRadians(70);
    for (int k = 0; k < 200; k++) {
      assertEquals(SteadyState.approach(1, k, flip, 0.05, 0.12), m.z(), 1e-12);
      m = m.pulsed(flip / (2 * Math.PI) / 1e4, 1e4, 0, 0).free(0.05, 0, 0.12, 1e-3);
    }
    assertEquals(SteadyState.longitudinal(flip, 0.05, 0.12), m.z(), 1e-12);
  }
}
