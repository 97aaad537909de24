package coilside.shot;

import static org.junit.jupiter.api.Assertions.assertArrayEquals;
import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.shot.PhaseCycle.Phases;
import java.util.ArrayList;
import java.util.List;
import org.junit.jupiter.api.Test;

class ShotsTest {
  private static final Shots.Frame FRAME = new Shots.Frame(8.09e6, 30, 0.6);
  private static final Shots.Widths WIDTHS = Shots.Widths.of90(20e-6, 0.8);
  private static final Shots.Window WINDOW = new Shots.Window(100e-6, 1000, 5e-6);

  private static List<Double> pulseCentres(Shot shot) {
    List<Double> centres = new ArrayList<>();
    double t = 0;
    for (Step step : shot.flat()) {
      if (step instanceof Pulse) {
        centres.add(t + step.seconds() / 2);
      }
      t += step.seconds();
    }
    return centres;
  }

  @Test
  void singlePulse() {
    Shot shot = Shots.single(FRAME, 20e-6, 0.8, WINDOW, Phases.ZERO);
    assertArrayEquals(new double[] {110e-6}, ShotTimes.receiveStarts(shot), 1e-12);
    assertEquals(20e-6, ShotTimes.transmitSeconds(shot), 1e-15);
  }

  @Test
  void receiveOnlyStartsAtItsOwnZero() {
    Shot shot = Shots.receiveOnly(FRAME, 100, 1e-6, 0);
    assertTrue(shot.receiveOnly());
    assertArrayEquals(new double[] {0}, ShotTimes.receiveStarts(shot));
  }

  @Test
  void recoveryTimesRunFromCentreToCentre() {
    List<Double> c =
        pulseCentres(Shots.inversionRecovery(FRAME, WIDTHS, 0.05, WINDOW, Phases.ZERO));
    assertEquals(0.05, c.get(1) - c.get(0), 1e-12);
    c = pulseCentres(Shots.saturationRecovery(FRAME, WIDTHS, 4, 5e-3, 0.1, WINDOW, Phases.ZERO));
    assertEquals(5, c.size());
    assertEquals(5e-3, c.get(1) - c.get(0), 1e-12);
    assertEquals(7.5e-3, c.get(2) - c.get(1), 1e-12);
    assertEquals(0.1, c.get(4) - c.get(3), 1e-12);
  }

  @Test
  void echoesStandInTheMiddleOfTheirWindowsAndOneSpacingApart() {
    Shot shot = Shots.echoTrain(FRAME, WIDTHS, 2e-3, 8, 64, 5e-6, Phases.ZERO);
    assertEquals(8, ShotTimes.windows(shot));
    List<Double> c = pulseCentres(shot);
    assertEquals(1e-3, c.get(1) - c.get(0), 1e-12);
    for (int i = 2; i < c.size(); i++) {
      assertEquals(2e-3, c.get(i) - c.get(i - 1), 1e-12);
    }
    for (double start : ShotTimes.receiveStarts(shot)) {
      assertEquals(1e-3, start + 32 * 5e-6, 1e-12);
    }
    Pulse first = (Pulse) shot.flat().get(0);
    Pulse second = (Pulse) shot.flat().get(2);
    assertEquals(Math.PI / 2, second.phaseRadians() - first.phaseRadians(), 1e-12);
  }

  @Test
  void whatDoesNotFitIsRefused() {
    assertThrows(
        IllegalArgumentException.class,
        () -> Shots.echoTrain(FRAME, WIDTHS, 300e-6, 8, 64, 5e-6, Phases.ZERO));
    assertThrows(
        IllegalArgumentException.class,
        () -> Shots.inversionRecovery(FRAME, WIDTHS, 20e-6, WINDOW, Phases.ZERO));
  }

  /** The scheme: transmitter 0 1 2 3 quarter turns, receiver follows. */
  @Test
  void cyclopsRemovesOffsetAndImage() {
    double re = 0;
    double im = 0;
    double image = 0;
    double offset = 0;
    for (Phases p : PhaseCycle.CYCLOPS.steps()) {
      re += Math.cos(p.excite() - p.receive()) / 4;
      im += Math.sin(p.excite() - p.receive()) / 4;
      image += Math.cos(-p.excite() - p.receive()) / 4;
      offset += Math.cos(-p.receive()) / 4;
    }
    assertEquals(1, re, 1e-15);
    assertEquals(0, im, 1e-15);
    assertEquals(0, image, 1e-15);
    assertEquals(0, offset, 1e-15);
  }

  @Test
  void cyclesNest() {
    PhaseCycle both = PhaseCycle.FLIP_ALTERNATING.within(PhaseCycle.CYCLOPS);
    assertEquals(8, both.length());
    assertEquals(Math.PI * 1.5, both.at(3).flip(), 1e-12);
    assertEquals(both.at(0), both.at(8));
    assertEquals(PhaseCycle.CYCLOPS, PhaseCycle.named("CYCLOPS"));
  }
}
