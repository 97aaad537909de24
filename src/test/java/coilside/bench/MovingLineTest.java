package coilside.bench;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertSame;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.quantity.Measured;
import coilside.quantity.Unit;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.signal.Fid;
import coilside.signal.Scan;
import java.time.Instant;
import java.util.ArrayList;
import java.util.List;
import java.util.OptionalDouble;
import java.util.Random;
import org.junit.jupiter.api.Test;

/** {@link Wander} and {@link LineTrack} on FIDs of known offsets, and {@link Quiet} on lines. */
class MovingLineTest {
  private static final int POINTS = 1024;
  private static final double DWELL = 20e-6;
  private static final double T2_STAR = 5e-3;
  private static final double NOISE = 0.01;

  private static Fid fid(double amplitude, double hertz, Random random) {
    double[] re = new double[POINTS];
    double[] im = new double[POINTS];
    for (int k = 0; k < POINTS; k++) {
      double t = k * DWELL;
      double s = amplitude * Math.exp(-t / T2_STAR);
      re[k] = s * Math.cos(2 * Math.PI * hertz * t) + NOISE * random.nextGaussian();
      im[k] = s * Math.sin(2 * Math.PI * hertz * t) + NOISE * random.nextGaussian();
    }
    return new Fid(re, im, DWELL, 0, 8e6);
  }

  private static Shot shot(boolean pulsed) {
    Receive receive = new Receive(POINTS, DWELL, 0);
    return new Shot(
        8e6, 20, 1, pulsed ? List.of(new Pulse(20e-6, 0, 1), receive) : List.of(receive));
  }

  private static Scan scan(Fid fid) {
    return new Scan(List.of(fid), 0.5, 0, Instant.EPOCH, 1, OptionalDouble.empty(), 0);
  }

  private static Wander wander(double[] hertz) {
    Random random = new Random(4);
    List<Shot> shots = new ArrayList<>();
    List<Scan> scans = new ArrayList<>();
    shots.add(shot(false));
    scans.add(scan(fid(0, 0, random)));
    for (double f : hertz) {
      shots.add(shot(true));
      scans.add(scan(fid(1, f, random)));
    }
    return Wander.of(shots, scans);
  }

  @Test
  void aLineThatStandsStillDoesNotWander() {
    Wander w = wander(new double[] {100, 100, 100, 100, 100, 100});
    assertEquals(6, w.scans());
    assertFalse(w.moves(), w.toString());
    Measured larmor = Measured.of(8e6, 0.1, Unit.HERTZ);
    assertSame(larmor, w.widen(larmor));
    assertTrue(w.warning().isEmpty());
  }

  /** Reference: the standard deviation of -10, 0 and 10 Hz twice is sqrt(80) Hz. */
  @Test
  void aLineThatMovesWidensTheMean() {
    Wander w = wander(new double[] {90, 100, 110, 90, 100, 110});
    assertTrue(w.moves());
    assertEquals(Math.sqrt(80), w.deviation(), 0.3);
    assertEquals(Math.sqrt(80 / 6.0), w.widen(Measured.of(8e6, 0.1, Unit.HERTZ)).u(), 0.15);
    assertTrue(w.warning().orElseThrow().contains("mains"));
  }

  @Test
  void twoScansAreTooFewToTell() {
    assertFalse(wander(new double[] {90, 110}).moves());
  }

  @Test
  void weakScansTakeTheirOffsetFromTheirNeighboursInTime() {
    Random random = new Random(7);
    double[] hertz = {100, 110, 120, 130, 140};
    double[] amplitude = {1, 1, 0, 1, 1};
    double[] seconds = {0, 1, 2, 3, 4};
    List<Fid> fids = new ArrayList<>();
    for (int j = 0; j < hertz.length; j++) {
      fids.add(fid(amplitude[j], hertz[j], random));
    }
    LineTrack track = LineTrack.of(fids, seconds);
    assertTrue(track.moved());
    for (int j = 0; j < hertz.length; j++) {
      assertEquals(hertz[j], track.offsets()[j], 2);
    }
    assertTrue(track.cause().orElseThrow().contains("the line moves from scan to scan"));
    LineTrack steady = LineTrack.of(track.steadied(fids), seconds);
    assertFalse(steady.moved(), "turned back, the line stands still");
  }

  @Test
  void aLineThatStandsStillIsLeftAsItCame() {
    Random random = new Random(8);
    List<Fid> fids = new ArrayList<>();
    for (int j = 0; j < 5; j++) {
      fids.add(fid(1, 100, random));
    }
    LineTrack track = LineTrack.of(fids, new double[] {0, 1, 2, 3, 4});
    assertFalse(track.moved());
    assertTrue(track.cause().isEmpty());
    assertSame(fids, track.steadied(fids));
  }

  @Test
  void quietTakesOffsetAndInterferenceOffAndLeavesTheSignal() {
    Fid pure = fid(1, 100, new Random(9));
    double[] re = pure.re();
    double[] im = pure.im();
    double line = 9000.0;
    for (int k = 0; k < POINTS; k++) {
      double angle = 2 * Math.PI * line * k * DWELL + 0.7;
      re[k] += 0.3 + 0.5 * Math.cos(angle);
      im[k] += -0.2 + 0.5 * Math.sin(angle);
    }
    Fid disturbed = new Fid(re, im, DWELL, 0, 8e6);
    Fid stripped = new Quiet(NOISE, 0.3, -0.2, 1e-4, List.of(line)).strip(disturbed);
    Fid alone = fid(1, 100, new Random(9));
    double worst = 0;
    for (int k = 0; k < POINTS; k++) {
      worst =
          Math.max(worst, Math.hypot(stripped.re(k) - alone.re(k), stripped.im(k) - alone.im(k)));
    }
    // What the signal itself has at the line's frequency goes too: T2*/(record 2 pi 8900 Hz T2*).
    assertTrue(worst < 0.01, "left or lost: " + worst);
  }

  /** A line within a few widths of the record from the carrier may be signal: it stays. */
  @Test
  void quietLeavesLinesNearTheCarrier() {
    Fid pure = fid(1, 100, new Random(10));
    Fid stripped = new Quiet(NOISE, 0, 0, 1e-4, List.of(100.0)).strip(pure);
    for (int k = 0; k < POINTS; k += 100) {
      assertEquals(pure.re(k), stripped.re(k), 0);
    }
  }

  @Test
  void quietReadsNoiseAndOffsetFromTheReceiveOnlyScan() throws Exception {
    Random random = new Random(11);
    Fid noise = fid(0, 0, random);
    double[] re = noise.re();
    double[] im = noise.im();
    for (int k = 0; k < POINTS; k++) {
      re[k] += 0.05;
      im[k] -= 0.03;
    }
    Quiet q =
        Quiet.of(
            List.of(shot(true), shot(false)),
            List.of(scan(fid(1, 100, random)), scan(new Fid(re, im, DWELL, 0, 8e6))));
    assertEquals(NOISE, q.sigma(), 0.05 * NOISE);
    assertEquals(NOISE / Math.sqrt(POINTS), q.uOffset(), 0.1 * NOISE / Math.sqrt(POINTS));
    assertEquals(0.05, q.offsetRe(), 4 * q.uOffset());
    assertEquals(-0.03, q.offsetIm(), 4 * q.uOffset());
  }
}
