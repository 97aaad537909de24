package coilside.fit;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertNotNull;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.signal.Fid;
import coilside.signal.Synthetic;
import java.util.Random;
import org.junit.jupiter.api.Test;

class RingDownFitTest {
  private static final double DWELL = 1e-6;
  private static final double OPEN = 5e-6;
  private static final double SIGMA = 1e-4;

  private static Fid record(Random random, double tau, double ring, double signal) {
    Fid fid =
        Synthetic.sum(
            Synthetic.decay(4000, DWELL, OPEN, ring, 1, 3e4, tau),
            Synthetic.noise(random, 4000, DWELL, SIGMA));
    return Synthetic.sum(fid, Synthetic.decay(4000, DWELL, OPEN, signal, 0.3, 2000, 2e-3));
  }

  /** Ring-down tau = 2Q/omega: Q = 100 at 2, 10, 20 MHz gives 15.92, 3.183, 1.592 us. */
  @Test
  void theDelayIsWhereTheRingHasSunkIntoTheNoise() throws NotDetermined {
    Random random = new Random(1);
    for (double tau : new double[] {15.92e-6, 8e-6}) {
      Coverage c = new Coverage("ring-down time");
      for (int i = 0; i < 60; i++) {
        RingDownFit.Result r = RingDownFit.fit(record(random, tau, 0.02, 1e-3), SIGMA, 0, 0.5);
        assertTrue(r.visible());
        c.add(r.timeConstant(), tau);
        double clear = tau * Math.log(0.02 / (0.5 * SIGMA));
        assertEquals(clear, r.clearSeconds().value(), 0.1 * clear);
        assertTrue(r.receiveDelaySeconds() > r.clearSeconds().value());
        assertNotNull(r.signal());
      }
      assertEquals(1, c.meanSquare(), 0.6, c.toString());
      assertEquals(0, c.bias(), 0.01, c.toString());
    }
  }

  @Test
  void aSignalAloneIsNotARing() throws NotDetermined {
    RingDownFit.Result r = RingDownFit.fit(record(new Random(2), 1e-5, 0, 2e-3), SIGMA, 0, 0.5);
    assertFalse(r.visible());
    assertEquals(OPEN, r.receiveDelaySeconds(), 1e-9);
    assertFalse(r.timeConstant().hasUncertainty());
  }

  @Test
  void aRingWithoutSignalIsMeasuredToo() throws NotDetermined {
    RingDownFit.Result r = RingDownFit.fit(record(new Random(3), 1e-5, 0.05, 0), SIGMA, 0, 0.5);
    assertTrue(r.visible());
    assertEquals(1e-5, r.timeConstant().value(), 5 * r.timeConstant().u());
  }

  @Test
  void aRingShorterThanTheDwellTimeIsAnUpperLimit() throws NotDetermined {
    RingDownFit.Result r = RingDownFit.fit(record(new Random(4), 4e-7, 5000, 0), SIGMA, 0, 0.5);
    assertTrue(r.visible());
    assertTrue(r.receiveDelaySeconds() < OPEN + 1e-5, "delay " + r.receiveDelaySeconds());
  }

  @Test
  void recordsAreTakenApart() {
    Fid a = Synthetic.decay(64, DWELL, 0, 1, 0, 1e4, 1e-3);
    Fid minus = Synthetic.decay(64, DWELL, 0, -1, 0, 1e4, 1e-3);
    Fid dc = Synthetic.decay(64, DWELL, 0, 0.3, 1, 0, 1e9);
    RingDownFit.Parts parts = RingDownFit.separate(Synthetic.sum(a, dc), Synthetic.sum(minus, dc));
    for (int k = 0; k < 64; k++) {
      assertEquals(a.re(k), parts.following().re(k), 1e-15);
      assertEquals(dc.im(k), parts.staying().im(k), 1e-15);
    }
  }
}
