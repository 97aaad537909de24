package coilside.board.simulated;

import static coilside.board.simulated.SimulatedScenarios.DWELL;
import static coilside.board.simulated.SimulatedScenarios.LARMOR;
import static coilside.board.simulated.SimulatedScenarios.PULSE_90;
import static coilside.board.simulated.SimulatedScenarios.T1;
import static coilside.board.simulated.SimulatedScenarios.T2;
import static coilside.board.simulated.SimulatedScenarios.T2_STAR;
import static coilside.board.simulated.SimulatedScenarios.VOLTS;
import static coilside.board.simulated.SimulatedScenarios.bench;
import static coilside.board.simulated.SimulatedScenarios.largest;
import static coilside.board.simulated.SimulatedScenarios.pause;
import static coilside.board.simulated.SimulatedScenarios.plain;
import static coilside.board.simulated.SimulatedScenarios.pulse;
import static coilside.board.simulated.SimulatedScenarios.receive;
import static coilside.board.simulated.SimulatedScenarios.shot;
import static coilside.board.simulated.SimulatedScenarios.size;
import static coilside.board.simulated.SimulatedScenarios.with;
import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.simulated.FirmwareReceiver.Counts;
import coilside.board.simulated.Scenario.Component;
import coilside.board.simulated.Scenario.Magnet;
import coilside.board.simulated.Scenario.Sample;
import coilside.board.simulated.Scenario.Shape;
import coilside.shot.Receive;
import coilside.shot.Repeat;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

/**
 * Validation of the simulated spins against the closed solutions of the Bloch equations. A handful
 * of parts in a thousand are allowed for pulses of finite length and the finite number of
 * isochromats.
 */
class SimulatedBenchTest {
  private static final double LONG = 5;

  /** s(t) = A exp(i(p + 2 pi f t)) exp(-t/T2*), f above zero for a carrier below resonance. */
  @ParameterizedTest
  @ValueSource(doubles = {0, 1234.5, -3000})
  void anFidIsADecayingLineAtTheOffset(double offset) {
    Counts fid =
        bench(plain()).play(shot(0, LARMOR - offset, pulse(PULSE_90, 0), receive(8192))).get(0);
    double flip = Math.PI / 2;
    for (int k = 0; k < 8192; k += 37) {
      double t = k * DWELL + PULSE_90 / 2;
      double a = VOLTS * Math.exp(-t / T2_STAR);
      assertEquals(a, size(fid, k), 0.006 * VOLTS, "at " + t + " s");
      // A pulse along x turns z towards -y. Off resonance a 90-degree pulse of width w acts, to
      // first
      // order, as one without width 2 w/pi before its end (expand the rotation in offset/B1).
      double since = k * DWELL + 2 / Math.PI * PULSE_90;
      double angle = -flip + 2 * Math.PI * offset * since;
      if (k < 2000) {
        assertEquals(a * Math.cos(angle), fid.i()[k], 0.012 * VOLTS, "I at " + t + " s");
        assertEquals(a * Math.sin(angle), fid.q()[k], 0.012 * VOLTS, "Q at " + t + " s");
      }
    }
  }

  @ParameterizedTest
  @CsvSource({"90, 1", "180, 0", "270, -1", "360, 0", "30, 0.5", "45, 0.70711"})
  void theSignalGoesWithTheSineOfTheFlipAngle(double degrees, double expected) {
    // A narrow line, so that offsets within it do not matter to a long pulse.
    Scenario s = with(plain(), magnet(Shape.LORENTZIAN, 0.5, 0, 0));
    Counts fid =
        bench(s).play(shot(0, LARMOR, pulse(PULSE_90 * degrees / 90, 0), receive(4))).get(0);
    assertEquals(-expected * VOLTS, fid.q()[0], 2e-3 * VOLTS);
    assertEquals(0, fid.i()[0], 2e-3 * VOLTS);
  }

  /** Rabi: flip about the tilted effective field; transverse part of z after time t. */
  @ParameterizedTest
  @CsvSource({"5000, 20e-6", "12500, 40e-6", "-20000, 30e-6", "30000, 55e-6"})
  void offResonancePulsesFollowRabisFormula(double offset, double width) {
    Scenario s = with(plain(), magnet(Shape.LORENTZIAN, 0.5, 0, 0));
    s = with(s, new Scenario.Coil(LARMOR, 1e-3, 0, 0));
    Counts fid = bench(s).play(shot(0, LARMOR - offset, pulse(width, 0), receive(2))).get(0);
    double w1 = 2 * Math.PI / (4 * PULSE_90);
    double d = 2 * Math.PI * offset;
    double e = Math.hypot(w1, d);
    double mz = (d * d + w1 * w1 * Math.cos(e * width)) / (e * e);
    assertEquals(VOLTS * Math.sqrt(1 - mz * mz), size(fid, 0), 2e-3 * VOLTS);
  }

  @ParameterizedTest
  @ValueSource(doubles = {0.005, 0.03, 0.0832, 0.2, 0.6})
  void inversionRecoveryFollowsT1(double delay) {
    Counts fid =
        bench(with(plain(), magnet(Shape.LORENTZIAN, 5, 0, 0)))
            .play(
                shot(
                    LONG,
                    LARMOR,
                    pulse(2 * PULSE_90, 0),
                    pause(delay),
                    pulse(PULSE_90, 0),
                    receive(2)))
            .get(0);
    assertEquals(-VOLTS * (1 - 2 * Math.exp(-delay / T1)), fid.q()[0], 5e-3 * VOLTS);
  }

  /** Steady state of 90-degree pulses, transverse magnetisation gone between: 1 - exp(-TR/T1). */
  @Test
  void magnetisationLivesOnBetweenShots() {
    Sample sample = new Sample(VOLTS, 0, List.of(new Component(1, T1, 0.01, 0)));
    SimulatedBench bench = bench(with(plain(), sample));
    double last = 0;
    for (int i = 0; i < 6; i++) {
      last = size(bench.play(shot(0.1, LARMOR, pulse(PULSE_90, 0), receive(1))).get(0), 0);
    }
    double repetition = 0.1 + PULSE_90 + DWELL;
    double start = Math.exp(-PULSE_90 / 2 / T2_STAR);
    assertEquals(VOLTS * start * (1 - Math.exp(-repetition / T1)), last, 5e-3 * VOLTS);
    bench.idle(2);
    last = size(bench.play(shot(0, LARMOR, pulse(PULSE_90, 0), receive(1))).get(0), 0);
    assertEquals(VOLTS * start, last, 5e-3 * VOLTS);
  }

  /** Echoes of a train with 90-degree phase between its pulses fall with T2, not with T2*. */
  @Test
  void echoesFallWithT2() {
    double spacing = 4e-3;
    int points = 64;
    double window = points * DWELL;
    double gap = (spacing - 2 * PULSE_90 - window) / 2;
    int echoes = 40;
    List<Counts> out =
        bench(plain())
            .play(
                shot(
                    LONG,
                    LARMOR,
                    pulse(PULSE_90, 0),
                    pause(spacing / 2 - PULSE_90 * 1.5),
                    new Repeat(
                        echoes,
                        List.of(
                            pulse(2 * PULSE_90, Math.PI / 2),
                            pause(gap),
                            new Receive(points, DWELL, 0),
                            pause(gap)))));
    assertEquals(echoes, out.size());
    for (int k = 0; k < echoes; k++) {
      double expected = VOLTS * Math.exp(-(k + 1) * spacing / T2);
      assertEquals(expected, size(out.get(k), points / 2), 0.02 * expected, "echo " + k);
    }
    double t = 2 * spacing - window / 2;
    double off = VOLTS * Math.exp(-t / T2 - window / 2 * Math.PI * SimulatedScenarios.WIDTH);
    assertEquals(off, size(out.get(1), 0), 0.02 * off, "beside the echo");
  }

  /** A Hahn echo across two shots: the frame goes on while the carrier stays or comes back. */
  @ParameterizedTest
  @ValueSource(doubles = {0, 777, -12345})
  void transverseMagnetisationIsCarriedAcrossShotsAndCarriers(double away) {
    Scenario s = with(plain(), magnet(Shape.LORENTZIAN, 5, 0, 0));
    SimulatedBench straight = bench(s);
    SimulatedBench moved = bench(s);
    straight.play(shot(0, LARMOR, pulse(PULSE_90, 0), receive(4)));
    moved.play(shot(0, LARMOR, pulse(PULSE_90, 0), receive(4)));
    straight.play(shot(1e-3, LARMOR, receive(4)));
    moved.play(shot(1e-3, LARMOR + away, receive(4)));
    Counts a = straight.play(shot(1e-3, LARMOR, receive(4))).get(0);
    Counts b = moved.play(shot(1e-3, LARMOR, receive(4))).get(0);
    assertTrue(size(a, 0) > 0.9 * VOLTS);
    for (int k = 0; k < 4; k++) {
      assertEquals(a.i()[k], b.i()[k], 1e-6 * VOLTS);
      assertEquals(a.q()[k], b.q()[k], 1e-6 * VOLTS);
    }
  }

  @Test
  void anFidIsTheSameInOneWindowOrMany() {
    Counts whole =
        bench(plain()).play(shot(0, LARMOR - 500, pulse(PULSE_90, 0), receive(40000))).get(0);
    List<Counts> parts =
        bench(plain())
            .play(
                shot(
                    0,
                    LARMOR - 500,
                    pulse(PULSE_90, 0),
                    receive(10),
                    receive(990),
                    receive(19000),
                    receive(20000)));
    int at = 0;
    for (Counts part : parts) {
      for (int k = 0; k < part.i().length; k++, at++) {
        assertEquals(whole.i()[at], part.i()[k], 3e-6 * VOLTS, "sample " + at);
        assertEquals(whole.q()[at], part.q()[k], 3e-6 * VOLTS, "sample " + at);
      }
    }
  }

  /** The transform of a normal distribution of width w (FWHM): exp(-(pi w t)^2/(4 ln 2)). */
  @Test
  void aGaussianFieldGivesAGaussianFid() {
    Scenario s = with(plain(), magnet(Shape.GAUSSIAN, 80, 0, 0));
    Counts fid = bench(s).play(shot(0, LARMOR, pulse(PULSE_90, 0), receive(6000))).get(0);
    for (int k = 0; k < 6000; k += 50) {
      double t = k * DWELL + PULSE_90 / 2;
      double x = Math.PI * 80 * t;
      double expected = VOLTS * Math.exp(-t / T2 - x * x / (4 * Math.log(2)));
      assertEquals(expected, size(fid, k), 3e-3 * VOLTS, "at " + t + " s");
    }
  }

  @Test
  void twoComponentsBeatAtTheirShift() {
    Sample sample =
        new Sample(VOLTS, 0, List.of(new Component(3, T1, T2, 0), new Component(1, T1, T2, 200)));
    Scenario s = with(with(plain(), sample), magnet(Shape.LORENTZIAN, 1, 0, 0));
    Counts fid = bench(s).play(shot(0, LARMOR, pulse(PULSE_90, 0), receive(2000))).get(0);
    double early = Math.exp(-2.5e-3 * (1 / T2 + Math.PI));
    assertEquals(0.5 * early * VOLTS, size(fid, 500), 5e-3 * VOLTS);
  }

  @Test
  void theFieldFollowsTheTemperature() {
    Magnet magnet =
        new Magnet(
            LARMOR,
            25,
            -400e-6,
            Shape.LORENTZIAN,
            5,
            50,
            0,
            new Scenario.TemperatureCourse(26, 1.0 / 3600, 0, 1));
    SimulatedBench bench = bench(with(plain(), magnet));
    assertEquals(LARMOR * (1 - 400e-6), bench.truth().larmorHertz(), 1e-6);
    bench.idle(1800);
    assertEquals(26.5, bench.temperatureCelsius(), 1e-9);
    double now = bench.truth().larmorHertz();
    assertEquals(LARMOR * (1 - 600e-6), now, 1e-5);
    Counts fid = bench.play(shot(0, now - 1000, pulse(PULSE_90, 0), receive(1001))).get(0);
    double turned = Math.atan2(fid.q()[1], fid.i()[1]) - Math.atan2(fid.q()[0], fid.i()[0]);
    assertEquals(2 * Math.PI * 1000 * DWELL, turned, 1e-3);
  }

  /** Phase swings by swing/mains turns divided by 2 pi, amplitude in radians: swing/mains. */
  @Test
  void theMainsModulateThePhase() {
    Scenario s = with(plain(), magnet(Shape.LORENTZIAN, 1, 50, 20));
    Counts fid = bench(s).play(shot(0, LARMOR, pulse(PULSE_90, 0), receive(4000))).get(0);
    double from = Math.atan2(fid.q()[0], fid.i()[0]);
    double half = Math.atan2(fid.q()[2000], fid.i()[2000]);
    double whole = Math.atan2(fid.q()[3999], fid.i()[3999]);
    assertEquals(2 * 20.0 / 50, half - from, 5e-3);
    assertEquals(0, whole - from, 5e-3);
  }

  @Test
  void theTruthIsWhatTheScenarioSays() {
    SimulatedTruth truth = bench(plain()).truth();
    assertEquals(LARMOR, truth.larmorHertz(), 1e-6);
    assertEquals(2 * PULSE_90, truth.pulse90Seconds(0.5), 1e-12);
    assertEquals(T1, truth.t1Seconds(), 1e-12);
    assertEquals(T2, truth.t2Seconds(), 1e-12);
    assertEquals(T2_STAR, truth.t2StarSeconds(), 3e-3 * T2_STAR);
    assertEquals(1, truth.longitudinal(), 1e-9);
  }

  @Test
  void withoutATransmitterNothingComes() {
    Scenario s = with(plain(), new Scenario.Transmitter(PULSE_90, true));
    Counts fid = bench(s).play(shot(0, LARMOR, pulse(PULSE_90, 0), receive(100))).get(0);
    assertEquals(0, largest(fid), 0);
  }

  private static Magnet magnet(Shape shape, double width, double mains, double swing) {
    return new Magnet(
        LARMOR, 25, 0, shape, width, mains, swing, new Scenario.TemperatureCourse(25, 0, 0, 1));
  }
}
