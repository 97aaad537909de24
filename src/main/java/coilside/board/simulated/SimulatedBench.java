package coilside.board.simulated;

import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.shot.Step;
import java.util.ArrayList;
import java.util.List;
import java.util.SplittableRandom;

/**
 * The simulated bench: spins in a magnet, coil, transmitter and receiver up to the ADC's input, in
 * virtual time. Magnetisation lives on between shots; time passes by shots and {@link #idle} only.
 *
 * <p>Signals keep the conventions of the signal package. Shots of one seed played in one order give
 * the same counts every time. One thread at a time.
 */
public final class SimulatedBench implements FirmwareReceiver {
  private final Scenario scenario;
  private final SimulatedMagnet magnet;
  private final SimulatedSpins spins;
  private final SimulatedReceiver receiver;
  private double carrierHertz;
  private double ringRe;
  private double ringIm;

  /**
   * @param scenario what the bench is like
   * @param digitiser the board's ADC and receive filter
   * @param seed of the noise
   */
  public SimulatedBench(Scenario scenario, SimulatedDigitiser digitiser, long seed) {
    this.scenario = scenario;
    this.magnet = new SimulatedMagnet(scenario.magnet());
    this.spins = new SimulatedSpins(scenario);
    this.receiver =
        new SimulatedReceiver(scenario, digitiser, magnet, spins, new SplittableRandom(seed));
    this.carrierHertz = magnet.larmorHertz();
  }

  @Override
  public List<Counts> play(Shot shot) {
    if (shot.carrierHertz() != carrierHertz) {
      // The ringing is long over when a synthesiser has moved.
      ringRe = 0;
      ringIm = 0;
      magnet.retune(carrierHertz, shot.carrierHertz());
      carrierHertz = shot.carrierHertz();
    }
    pass(shot.restSeconds());
    List<Counts> windows = new ArrayList<>();
    for (Step step : shot.flat()) {
      if (step instanceof Pulse pulse) {
        pulse(pulse);
      } else {
        if (step instanceof Receive receive) {
          windows.add(receiver.window(receive, carrierHertz, shot.gainDecibels(), ringRe, ringIm));
        }
        pass(step.seconds());
      }
    }
    return windows;
  }

  /** Lets time pass in which nothing is played, s. */
  @Override
  public void idle(double seconds) {
    if (!(seconds >= 0) || !Double.isFinite(seconds)) {
      throw new IllegalArgumentException(seconds + " s cannot pass");
    }
    pass(seconds);
  }

  @Override
  public double temperatureCelsius() {
    return magnet.celsius();
  }

  /** Time since the bench was switched on, s. */
  public double nowSeconds() {
    return magnet.seconds();
  }

  /** What only tests may know; the architecture test keeps the measuring side from it. */
  public SimulatedTruth truth() {
    return new SimulatedTruth(scenario, magnet, spins);
  }

  private void pass(double seconds) {
    spins.free(seconds);
    magnet.advance(carrierHertz, seconds);
    ringOn(seconds);
  }

  private void ringOn(double seconds) {
    double left = Math.exp(-seconds / scenario.coil().ringSeconds());
    double turns = (scenario.coil().tunedHertz() - carrierHertz) * seconds;
    double angle = 2 * Math.PI * (turns - Math.rint(turns));
    double c = left * Math.cos(angle);
    double s = left * Math.sin(angle);
    double re = ringRe * c - ringIm * s;
    ringIm = ringRe * s + ringIm * c;
    ringRe = re;
  }

  private void pulse(Pulse pulse) {
    double seconds = pulse.seconds();
    SimulatedCoilResponse coil = SimulatedCoilResponse.at(scenario.coil(), carrierHertz);
    double drive = scenario.transmitter().drive(pulse.amplitude());
    double rabi = drive * coil.magnitude() / (4 * scenario.transmitter().pulse90Seconds());
    double offset = magnet.offsetHertz(carrierHertz, seconds) + magnet.mainsHertz();
    double phase = pulse.phaseRadians() + coil.phaseRadians();
    double middle = 2 * Math.PI * (magnet.turns() + offset * seconds / 2);
    if (rabi > 0) {
      spins.pulse(seconds, rabi, phase - middle, offset);
    } else {
      spins.free(seconds);
    }
    magnet.advance(carrierHertz, seconds);
    ringOn(seconds);
    double built =
        drive
            * coil.magnitude()
            * scenario.coil().ringVolts()
            * (1 - Math.exp(-seconds / scenario.coil().ringSeconds()));
    ringRe += built * Math.cos(phase);
    ringIm += built * Math.sin(phase);
  }
}
