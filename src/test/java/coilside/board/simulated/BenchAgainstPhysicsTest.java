package coilside.board.simulated;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.simulated.FirmwareReceiver.Counts;
import coilside.board.simulated.Scenario.Coil;
import coilside.board.simulated.Scenario.Component;
import coilside.board.simulated.Scenario.Magnet;
import coilside.board.simulated.Scenario.Receiver;
import coilside.board.simulated.Scenario.Sample;
import coilside.board.simulated.Scenario.Shape;
import coilside.board.simulated.Scenario.TemperatureCourse;
import coilside.board.simulated.Scenario.Transmitter;
import coilside.shot.PhaseCycle.Phases;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.shot.ShotTimes;
import coilside.shot.Shots;
import coilside.shot.Wait;
import coilside.spin.BlochPulse;
import coilside.spin.EchoTrain;
import coilside.spin.Magnetisation;
import coilside.spin.SteadyState;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/**
 * Validation of the simulated bench from outside: closed forms of decays, nutation and recovery,
 * and the spin package, which shares no code with it.
 */
class BenchAgainstPhysicsTest {
  private static final double LARMOR = 8.09e6;
  private static final double VOLTS = 50e-6;
  private static final double T90 = 20e-6;

  private record Spread(Shape shape, double width, double b1) {
    static final Spread NONE = new Spread(Shape.GAUSSIAN, 0, 0);
  }

  private static SimulatedBench bench(Spread spread, double t1, double t2, double t90) {
    return bench(spread, t1, t2, t90, VOLTS, 0, 1e-6);
  }

  /** A coil without ringing or tuning of its own: Q so low that its response is flat. */
  private static SimulatedBench bench(
      Spread spread, double t1, double t2, double t90, double volts, double noise, double quality) {
    return new SimulatedBench(
        new Scenario(
            "test",
            "",
            new Sample(volts, 0, List.of(new Component(1, t1, t2, 0))),
            new Magnet(
                LARMOR,
                25,
                0,
                spread.shape(),
                spread.width(),
                0,
                0,
                new TemperatureCourse(25, 0, 0, 1)),
            new Coil(LARMOR, quality, quality > 1 ? 1e-3 : 0, spread.b1()),
            new Transmitter(t90, false),
            new Receiver(noise, Double.POSITIVE_INFINITY, 0, 0, 0, 0, false),
            List.of()),
        SimulatedDigitiser.ideal(),
        7);
  }

  private static Shot single(double carrier, double rest, double width, int points, double dwell) {
    return Shots.single(
        new Shots.Frame(carrier, 0, rest),
        width,
        1,
        new Shots.Window(dwell, points, dwell),
        Phases.ZERO);
  }

  @ParameterizedTest
  @CsvSource({"LORENTZIAN, 50", "LORENTZIAN, 400", "GAUSSIAN, 50", "GAUSSIAN, 0"})
  void decaysFollowTheirClosedForms(Shape shape, double width) {
    double t2 = 0.11;
    double offset = 230;
    SimulatedBench bench = bench(new Spread(shape, width, 0), 0.12, t2, 1e-6);
    Shot shot = single(LARMOR - offset, 0, 1e-6, 16384, 5e-6);
    Counts c = bench.play(shot).get(0);
    double start = ShotTimes.receiveStarts(shot)[0];
    double worst = 0;
    double at = 0;
    for (int k = 0; k < c.i().length; k += 7) {
      double t = start + k * 5e-6;
      double envelope =
          Math.exp(-t / t2)
              * (shape == Shape.LORENTZIAN
                  ? Math.exp(-Math.PI * width * t)
                  : Math.exp(-Math.pow(Math.PI * width * t, 2) / (4 * Math.log(2))));
      // A pulse of phase 0 leaves -i; offsets turn forward.
      double phase = -Math.PI / 2 + 2 * Math.PI * offset * t;
      double off =
          Math.hypot(
              c.i()[k] / VOLTS - envelope * Math.cos(phase),
              c.q()[k] / VOLTS - envelope * Math.sin(phase));
      // Beyond about fifty T2* the isochromats in the wings are too far apart to cancel.
      double limit = t < 0.03 ? 3e-3 : 5e-3;
      if (off / limit > worst) {
        worst = off / limit;
        at = t;
      }
    }
    assertTrue(worst < 1, "departs by " + worst + " of what is allowed, at " + at + " s");
  }

  @ParameterizedTest
  @CsvSource({"5e-6, 0", "20e-6, 0", "33e-6, 3000", "50e-6, -4000", "80e-6, 2000", "160e-6, 900"})
  void pulsesTurnAboutTheEffectiveField(double width, double offset) {
    SimulatedBench bench = bench(Spread.NONE, 1e3, 1e3, T90);
    Counts c = bench.play(single(LARMOR - offset, 0, width, 32, 5e-6)).get(0);
    Magnetisation m =
        Magnetisation.EQUILIBRIUM
            .pulsed(width, 1 / (4 * T90), 0, offset)
            .free(5e-6, offset, 1e3, 1e3);
    assertEquals(m.x(), c.i()[0] / VOLTS, 6e-6);
    assertEquals(m.y(), c.q()[0] / VOLTS, 6e-6);
  }

  /** With a normal spread s of B1 the mean of sin(a b) is sin(a) exp(-(a s)^2/2). */
  @ParameterizedTest
  @CsvSource({"0.02, 80e-6", "0.05, 60e-6", "0.05, 100e-6", "0.08, 20e-6"})
  void b1SpreadDampsTheNutation(double spread, double width) {
    for (Shape shape : List.of(Shape.LORENTZIAN, Shape.GAUSSIAN)) {
      SimulatedBench bench = bench(new Spread(shape, 5, spread), 1e3, 1e3, T90);
      Counts c = bench.play(single(LARMOR, 0, width, 32, 5e-6)).get(0);
      double a = Math.PI / 2 * width / T90;
      double expected = -Math.sin(a) * Math.exp(-Math.pow(a * spread, 2) / 2);
      assertEquals(expected, c.q()[0] / VOLTS, 2e-3);
    }
  }

  @ParameterizedTest
  @CsvSource({"100e-6, 0.11, 5e-4", "200e-6, 0.026, 4e-3"})
  void relaxesDuringPulses(double width, double t2, double tolerance) {
    SimulatedBench bench = bench(Spread.NONE, 0.13, t2, T90);
    Counts c = bench.play(single(LARMOR, 0, width, 32, 5e-6)).get(0);
    Magnetisation m =
        new BlochPulse(width, 1 / (4 * T90), 0, 0, 0.13, t2)
            .apply(Magnetisation.EQUILIBRIUM)
            .free(5e-6, 0, 0.13, t2);
    assertEquals(m.y(), c.q()[0] / VOLTS, tolerance);
  }

  @Test
  void trainsApproachTheirSteadyState() {
    double flip = Math.toRadians(70);
    double width = flip / (Math.PI / 2) * T90;
    SimulatedBench bench = bench(Spread.NONE, 0.12, 1e-3, T90);
    Shot shot = single(LARMOR, 0.05, width, 32, 5e-6);
    double played = shot.seconds();
    for (int k = 0; k < 12; k++) {
      Counts c = bench.play(shot).get(0);
      double z = SteadyState.approach(1, k, flip, played, 0.12);
      double start = ShotTimes.receiveStarts(shot)[0];
      assertEquals(-Math.sin(flip) * z * Math.exp(-start / 1e-3), c.q()[0] / VOLTS, 2e-3);
    }
  }

  @ParameterizedTest
  @CsvSource({"1e-3", "30e-3", "83.2e-3", "300e-3"})
  void inversionRecoversWithT1(double recovery) {
    SimulatedBench bench = bench(new Spread(Shape.GAUSSIAN, 300, 0), 0.12, 0.02, 1e-6);
    Shot shot =
        Shots.inversionRecovery(
            new Shots.Frame(LARMOR, 0, 0),
            Shots.Widths.of90(1e-6, 1),
            recovery,
            new Shots.Window(5e-6, 32, 5e-6),
            Phases.ZERO);
    double seen = -bench.play(shot).get(0).q()[0] / VOLTS;
    assertEquals(1 - 2 * Math.exp(-recovery / 0.12), seen, 2e-3);
  }

  /** Refocusing pulses of 160 degrees, against counted coherence orders. */
  @ParameterizedTest
  @CsvSource({"180", "160"})
  void echoTrainsFollowTheirOrders(double degrees) {
    double t1 = 0.12;
    double t2 = 0.08;
    SimulatedBench bench = bench(new Spread(Shape.GAUSSIAN, 1000, 0), t1, t2, 0.2e-6);
    Shot shot =
        Shots.echoTrain(
            new Shots.Frame(LARMOR, 0, 0),
            new Shots.Widths(0.2e-6, 0.4e-6 * degrees / 180, 1),
            8e-3,
            20,
            64,
            2e-6,
            Phases.ZERO);
    List<Counts> windows = bench.play(shot);
    double[] expected =
        EchoTrain.amplitudes(
            Math.PI / 2, Math.toRadians(degrees), EchoTrain.Phases.QUARTER_TURN, 8e-3, t1, t2, 20);
    for (int k = 0; k < expected.length; k++) {
      Counts c = windows.get(k);
      assertEquals(expected[k], -c.q()[32] / VOLTS, 3e-3, "echo " + k);
      assertEquals(0, c.i()[32] / VOLTS, 3e-3, "echo " + k);
    }
  }

  /** One real channel, one sample: density/sqrt(dwell), white, equal in both channels. */
  @Test
  void noiseHasItsDensity() {
    SimulatedBench bench = bench(Spread.NONE, 1, 1, T90, 0, 1e-9, 1e-6);
    Counts c = bench.play(Shots.receiveOnly(new Shots.Frame(LARMOR, 0, 0), 65536, 4e-6, 0)).get(0);
    double sigma = 1e-9 / Math.sqrt(4e-6);
    double i = 0;
    double q = 0;
    double iq = 0;
    double lag = 0;
    for (int k = 1; k < c.i().length; k++) {
      i += c.i()[k] * c.i()[k];
      q += c.q()[k] * c.q()[k];
      iq += c.i()[k] * c.q()[k];
      lag += c.i()[k] * c.i()[k - 1];
    }
    double n = c.i().length;
    assertEquals(1, Math.sqrt(i / n) / sigma, 0.014);
    assertEquals(1, Math.sqrt(q / n) / sigma, 0.014);
    assertEquals(0, iq / n / sigma / sigma, 0.02);
    assertEquals(0, lag / n / sigma / sigma, 0.02);
  }

  /** 2 Q/omega: at Q = 100 and 8.09 MHz, 3.935 us. */
  @Test
  void theCoilRingsWithItsTimeConstant() {
    SimulatedBench bench = bench(Spread.NONE, 1, 1, T90, 0, 1e-12, 100);
    Counts c = bench.play(single(LARMOR, 0, T90, 32, 1e-6)).get(0);
    double tau = 2 * 100 / (2 * Math.PI * LARMOR);
    double first = Math.hypot(c.i()[0], c.q()[0]);
    double later = Math.hypot(c.i()[8], c.q()[8]);
    assertEquals(tau, 8e-6 / Math.log(first / later), 1e-3 * tau);
  }

  @Test
  void phasesOfPulseAndReceiverAddUp() {
    for (double transmit : new double[] {0, 1, 2.5}) {
      for (double receive : new double[] {0, 0.7, -2}) {
        SimulatedBench bench = bench(Spread.NONE, 1, 1, T90);
        Shot shot =
            new Shot(
                LARMOR,
                6,
                0.1,
                List.of(
                    new Pulse(T90, transmit, 1), new Wait(10e-6), new Receive(32, 5e-6, receive)));
        Counts c = bench.play(shot).get(0);
        double phase = Math.atan2(c.q()[0], c.i()[0]);
        double expected = transmit - receive - Math.PI / 2;
        assertEquals(0, Math.IEEEremainder(phase - expected, 2 * Math.PI), 1e-6);
        assertEquals(VOLTS * Math.pow(10, 0.3), Math.hypot(c.q()[0], c.i()[0]), 1e-3 * VOLTS);
      }
    }
  }

  /** With c = 0.2 half the amplitude turns 0.5 (1 + 0.2 . 0.75) = 0.575 as fast as the whole. */
  @Test
  void theAmplifierCompresses() {
    assertEquals(0.575, new Transmitter(T90, 0.2, false).drive(0.5), 1e-15);
    assertEquals(1, new Transmitter(T90, 0.2, false).drive(1), 1e-15);
    SimulatedBench bench =
        new SimulatedBench(
            new Scenario(
                "test",
                "",
                new Sample(VOLTS, 0, List.of(new Component(1, 1e3, 1e3, 0))),
                new Magnet(
                    LARMOR, 25, 0, Shape.GAUSSIAN, 0, 0, 0, new TemperatureCourse(25, 0, 0, 1)),
                new Coil(LARMOR, 1e-6, 0, 0),
                new Transmitter(T90, 0.2, false),
                new Receiver(0, Double.POSITIVE_INFINITY, 0, 0, 0, 0, false),
                List.of()),
            SimulatedDigitiser.ideal(),
            7);
    Shot half =
        new Shot(
            LARMOR,
            0,
            0,
            List.of(new Pulse(T90, 0, 0.5), new Wait(5e-6), new Receive(32, 5e-6, 0)));
    double seen = -bench.play(half).get(0).q()[0] / VOLTS;
    assertEquals(Math.sin(0.575 * Math.PI / 2), seen, 1e-5);
    assertEquals(T90 / 0.575, bench.truth().pulse90Seconds(0.5), 1e-12);
  }

  @Test
  void oneSeedOneResult() {
    Shot shot = single(LARMOR - 100, 0.1, T90, 256, 5e-6);
    SimulatedBench one =
        bench(new Spread(Shape.LORENTZIAN, 50, 0.02), 0.1, 0.1, T90, VOLTS, 1e-9, 50);
    SimulatedBench two =
        bench(new Spread(Shape.LORENTZIAN, 50, 0.02), 0.1, 0.1, T90, VOLTS, 1e-9, 50);
    for (int k = 0; k < 3; k++) {
      Counts a = one.play(shot).get(0);
      Counts b = two.play(shot).get(0);
      org.junit.jupiter.api.Assertions.assertArrayEquals(a.i(), b.i());
      org.junit.jupiter.api.Assertions.assertArrayEquals(a.q(), b.q());
    }
  }
}
