package coilside.board.simulated;

import coilside.board.simulated.Scenario.Component;

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

  /** T1 of the sample's components averaged with their fractions, s. */
  public double t1Seconds() {
    double sum = 0;
    double all = 0;
    for (Component c : scenario.sample().components()) {
      sum += c.fraction() * c.t1Seconds();
      all += c.fraction();
    }
    return sum / all;
  }

  /** T2 of the sample's components averaged with their fractions, s. */
  public double t2Seconds() {
    double sum = 0;
    double all = 0;
    for (Component c : scenario.sample().components()) {
      sum += c.fraction() * c.t2Seconds();
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
    double re = 0;
    double im = 0;
    for (int j = 0; j < spread.hertz().length; j++) {
      double angle = 2 * Math.PI * spread.hertz()[j] * seconds;
      re += spread.weight()[j] * Math.cos(angle);
      im += spread.weight()[j] * Math.sin(angle);
    }
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
    return Math.hypot(re, im) * Math.hypot(sumRe, sumIm) / all;
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
