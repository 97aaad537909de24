package coilside.board.simulated;

import coilside.board.simulated.Scenario.Component;
import java.util.function.ToDoubleFunction;

/** What the simulated bench really is at this moment: for tests, never for the measuring side. */
public final class SimulatedTruth {
  private static final int FINE_ISOCHROMATS = 32768;

  private final Scenario scenario;
  private final SimulatedMagnet magnet;
  private final SimulatedSpins spins;

  SimulatedTruth(Scenario scenario, SimulatedMagnet magnet, SimulatedSpins spins) {
    this.scenario = scenario;
    this.magnet = magnet;
    this.spins = spins;
  }

  /** The magnet's Larmor frequency now, mains modulation left out, Hz. */
  public double larmorHertz() {
    return magnet.larmorHertz();
  }

  /** The 90-degree pulse where B1 is average, carrier on the Larmor frequency, s. */
  public double pulse90Seconds(double amplitude) {
    double response = SimulatedCoilResponse.at(scenario.coil(), larmorHertz()).magnitude();
    return scenario.transmitter().pulse90Seconds()
        / (scenario.transmitter().drive(amplitude) * response);
  }

  /** The time in which the sample recovers from saturation to 1 - 1/e, s: T1 of one component. */
  public double t1Seconds() {
    return oneOverE(Component::t1Seconds);
  }

  /** The time in which the echoes of the sample fall to 1/e, s: T2 of one component. */
  public double t2Seconds() {
    return oneOverE(Component::t2Seconds);
  }

  private double oneOverE(ToDoubleFunction<Component> time) {
    double low = 0;
    double high = scenario.sample().components().stream().mapToDouble(time).max().orElseThrow();
    for (int i = 0; i < 60; i++) {
      double middle = (low + high) / 2;
      double left = 0;
      double all = 0;
      for (Component c : scenario.sample().components()) {
        left += c.fraction() * Math.exp(-middle / time.applyAsDouble(c));
        all += c.fraction();
      }
      if (left / all > Math.exp(-1)) {
        low = middle;
      } else {
        high = middle;
      }
    }
    return (low + high) / 2;
  }

  /** Middle of the sample's line above the magnet's Larmor frequency, Hz. */
  public double lineHertz() {
    double sum = 0;
    double all = 0;
    for (Component c : scenario.sample().components()) {
      sum += c.fraction() * c.shiftHertz();
      all += c.fraction();
    }
    return sum / all;
  }

  /**
   * The time in which the envelope of an FID falls to 1/e of its start, s: of the field's
   * distribution itself, not of the isochromats that stand for it.
   */
  public double t2StarSeconds() {
    SimulatedFieldSpread fine =
        SimulatedFieldSpread.of(
            scenario.magnet().shape(), scenario.magnet().widthHertz(), FINE_ISOCHROMATS);
    double low = 0;
    double high = t2Seconds();
    for (int i = 0; i < 40; i++) {
      double middle = (low + high) / 2;
      if (envelope(fine, middle) > Math.exp(-1)) {
        low = middle;
      } else {
        high = middle;
      }
    }
    return (low + high) / 2;
  }

  private double envelope(SimulatedFieldSpread spread, double seconds) {
    double width = scenario.magnet().widthHertz();
    double re = 0;
    double im = 0;
    if (scenario.magnet().shape() == Scenario.Shape.LORENTZIAN) {
      // The wings that the isochromats leave out belong to the start of the envelope.
      return Math.exp(-Math.PI * width * seconds) * components(seconds);
    }
    for (int j = 0; j < spread.hertz().length; j++) {
      double angle = 2 * Math.PI * spread.hertz()[j] * seconds;
      re += spread.weight()[j] * Math.cos(angle);
      im += spread.weight()[j] * Math.sin(angle);
    }
    return Math.hypot(re, im) * components(seconds);
  }

  private double components(double seconds) {
    double all = 0;
    double sumRe = 0;
    double sumIm = 0;
    for (Component c : scenario.sample().components()) {
      double left = c.fraction() * Math.exp(-seconds / c.t2Seconds());
      double angle = 2 * Math.PI * c.shiftHertz() * seconds;
      sumRe += left * Math.cos(angle);
      sumIm += left * Math.sin(angle);
      all += c.fraction();
    }
    return Math.hypot(sumRe, sumIm) / all;
  }

  /** Amplitude right after a perfect 90-degree pulse on recovered spins at the input, V. */
  public double signalVolts() {
    return scenario.sample().signalVolts()
        * SimulatedCoilResponse.at(scenario.coil(), larmorHertz()).magnitude();
  }

  /** Noise of one channel, V/sqrt(Hz). */
  public double noiseDensity() {
    return scenario.receiver().noiseDensity();
  }

  /** The longitudinal magnetisation now, 1 when recovered. */
  public double longitudinal() {
    return spins.longitudinal();
  }
}
