package coilside.board.simulated;

import coilside.board.simulated.Scenario.Component;

/** What the simulated bench really is at this moment: for tests, never for the measuring side. */
public final class SimulatedTruth {
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

  /** The time in which the envelope of an FID falls to 1/e of its start, s. */
  public double t2StarSeconds() {
    double low = 0;
    double high = t2Seconds();
    for (int i = 0; i < 60; i++) {
      double middle = (low + high) / 2;
      if (spins.envelope(middle) > Math.exp(-1)) {
        low = middle;
      } else {
        high = middle;
      }
    }
    return (low + high) / 2;
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
