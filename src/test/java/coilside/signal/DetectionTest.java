package coilside.signal;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertTrue;

import java.util.List;
import java.util.Random;
import org.junit.jupiter.api.Test;

class DetectionTest {
  @Test
  void noiseIsTakenForASignalNoMoreOftenThanStated() {
    Random random = new Random(21);
    int alarms = 0;
    for (int i = 0; i < 1000; i++) {
      alarms += Detection.of(Synthetic.noise(random, 256, 1e-4, 1), 1, 0.05).found() ? 1 : 0;
    }
    assertTrue(alarms <= 71, alarms + " false alarms in 1000 at a stated 0.05");
    assertTrue(alarms >= 8, "so few false alarms mean a needless loss: " + alarms);
  }

  @Test
  void aWeakDecayIsFoundWhereItIs() {
    Random random = new Random(22);
    int found = 0;
    for (int i = 0; i < 50; i++) {
      // Matched SNR = sqrt(T2*/(2 dwell)) A/sigma = 14.1 * 0.7 = 9.9
      Fid fid =
          Synthetic.sum(
              Synthetic.decay(2048, 1e-4, 1e-3, 0.7, 2, -1800, 0.04),
              Synthetic.noise(random, 2048, 1e-4, 1));
      Detection d = Detection.of(fid, 1, 1e-3);
      if (d.found() && Math.abs(d.offsetHertz() + 1800) < 20) {
        found++;
        assertEquals(9.9, d.statisticSigma(), 4.5);
      }
    }
    assertTrue(found >= 49, found + " of 50 found");
  }

  @Test
  void excludedOffsetsDoNotCount() {
    Fid fid =
        Synthetic.sum(
            Synthetic.decay(2048, 1e-4, 0, 5, 2, 900, 1e9),
            Synthetic.noise(new Random(23), 2048, 1e-4, 1));
    assertTrue(Detection.of(fid, 1, 1e-3).found());
    Detection d = Detection.of(fid, 1, List.of(new Detection.Excluded(900, 3000)), 1, 1e-3);
    assertFalse(d.found(), "statistic " + d.statisticSigma());
  }

  @Test
  void moreSearchesRaiseTheThreshold() {
    Fid fid = Synthetic.noise(new Random(1), 256, 1e-4, 1);
    assertTrue(
        Detection.of(fid, 1, List.of(), 100, 1e-3).thresholdSigma()
            > Detection.of(fid, 1, 1e-3).thresholdSigma() + 0.5);
  }

  @Test
  void tailsOfTheNormalDistribution() {
    // Handbook values, from memory: 0.158655, 0.0227501, 1.349898e-3, 2.866516e-7.
    assertEquals(0.158655, Tail.normal(1), 1e-6);
    assertEquals(0.0227501, Tail.normal(2), 1e-7);
    assertEquals(1.349898e-3, Tail.normal(3), 1e-9);
    assertEquals(2.866516e-7, Tail.normal(5), 1e-13);
    assertEquals(Math.exp(-3), Tail.meanOfExponentials(1, 3), 1e-12);
    assertEquals(0.05, Tail.meanOfExponentials(7, Tail.thresholdOfMean(7, 0.05)), 1e-9);
  }
}
