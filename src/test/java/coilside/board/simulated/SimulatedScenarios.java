package coilside.board.simulated;

import coilside.board.simulated.FirmwareReceiver.Counts;
import coilside.board.simulated.Scenario.Coil;
import coilside.board.simulated.Scenario.Component;
import coilside.board.simulated.Scenario.Interference;
import coilside.board.simulated.Scenario.Magnet;
import coilside.board.simulated.Scenario.Receiver;
import coilside.board.simulated.Scenario.Sample;
import coilside.board.simulated.Scenario.Shape;
import coilside.board.simulated.Scenario.TemperatureCourse;
import coilside.board.simulated.Scenario.Transmitter;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.shot.Step;
import coilside.shot.Wait;
import java.util.List;

/** Plain benches and what the tests of the simulated physics ask of their signals. */
final class SimulatedScenarios {
  static final double LARMOR = 8.0895e6;
  static final double T1 = 0.12;
  static final double T2 = 0.11;
  static final double WIDTH = 50;
  static final double T2_STAR = 1 / (1 / T2 + Math.PI * WIDTH);
  static final double VOLTS = 50e-6;
  static final double PULSE_90 = 20e-6;
  static final double DWELL = 5e-6;

  private SimulatedScenarios() {}

  /** A bench without noise, B1 spread and ringing, its coil in tune and of low Q. */
  static Scenario plain() {
    return new Scenario(
        "plain",
        "",
        new Sample(VOLTS, 0, List.of(new Component(1, T1, T2, 0))),
        new Magnet(
            LARMOR,
            25,
            -400e-6,
            Shape.LORENTZIAN,
            WIDTH,
            50,
            0,
            new TemperatureCourse(25, 0, 0, 1)),
        new Coil(LARMOR, 1, 0, 0),
        new Transmitter(PULSE_90, false),
        new Receiver(0, Double.POSITIVE_INFINITY, 0, 0, 0, 0, false),
        List.of());
  }

  static Scenario with(Scenario s, Sample sample) {
    return new Scenario(
        s.name(),
        "",
        sample,
        s.magnet(),
        s.coil(),
        s.transmitter(),
        s.receiver(),
        s.interference());
  }

  static Scenario with(Scenario s, Magnet magnet) {
    return new Scenario(
        s.name(),
        "",
        s.sample(),
        magnet,
        s.coil(),
        s.transmitter(),
        s.receiver(),
        s.interference());
  }

  static Scenario with(Scenario s, Coil coil) {
    return new Scenario(
        s.name(),
        "",
        s.sample(),
        s.magnet(),
        coil,
        s.transmitter(),
        s.receiver(),
        s.interference());
  }

  static Scenario with(Scenario s, Transmitter transmitter) {
    return new Scenario(
        s.name(),
        "",
        s.sample(),
        s.magnet(),
        s.coil(),
        transmitter,
        s.receiver(),
        s.interference());
  }

  static Scenario with(Scenario s, Receiver receiver) {
    return new Scenario(
        s.name(),
        "",
        s.sample(),
        s.magnet(),
        s.coil(),
        s.transmitter(),
        receiver,
        s.interference());
  }

  static Scenario with(Scenario s, Interference... lines) {
    return new Scenario(
        s.name(),
        "",
        s.sample(),
        s.magnet(),
        s.coil(),
        s.transmitter(),
        s.receiver(),
        List.of(lines));
  }

  static SimulatedBench bench(Scenario scenario) {
    return new SimulatedBench(scenario, SimulatedDigitiser.ideal(), 1);
  }

  static Shot shot(double rest, double carrier, Step... steps) {
    return new Shot(carrier, 0, rest, List.of(steps));
  }

  static Pulse pulse(double seconds, double phase) {
    return new Pulse(seconds, phase, 1);
  }

  static Wait pause(double seconds) {
    return new Wait(seconds);
  }

  static Receive receive(int points) {
    return new Receive(points, DWELL, 0);
  }

  static double size(Counts counts, int k) {
    return Math.hypot(counts.i()[k], counts.q()[k]);
  }

  static double largest(Counts counts) {
    double out = 0;
    for (int k = 0; k < counts.i().length; k++) {
      out = Math.max(out, size(counts, k));
    }
    return out;
  }
}
