package coilside.board.simulated;

import coilside.board.simulated.Scenario.Magnet;

/** The Larmor frequency against time, and the phase it has run up against a carrier. */
final class SimulatedMagnet {
  private final Magnet magnet;
  private double seconds;
  private double turns;

  SimulatedMagnet(Magnet magnet) {
    this.magnet = magnet;
  }

  /** Time since the bench was switched on, s. */
  double seconds() {
    return seconds;
  }

  double celsius() {
    return magnet.temperature().celsiusAt(seconds);
  }

  /** The Larmor frequency now without the mains' part, Hz. */
  double larmorHertz() {
    return larmorAt(seconds);
  }

  private double larmorAt(double t) {
    double kelvin = magnet.temperature().celsiusAt(t) - magnet.referenceCelsius();
    return magnet.larmorHertz() * (1 + magnet.temperatureCoefficient() * kelvin);
  }

  /** How far the mains push the Larmor frequency now, Hz. */
  double mainsHertz() {
    return magnet.mainsSwingHertz() * Math.sin(2 * Math.PI * magnet.mainsHertz() * seconds);
  }

  boolean modulated() {
    return magnet.mainsSwingHertz() != 0 && magnet.mainsHertz() > 0;
  }

  /** Turns that the mains' part runs up from now to {@code later} seconds from now. */
  double mainsTurns(double later) {
    if (!modulated()) {
      return 0;
    }
    double w = 2 * Math.PI * magnet.mainsHertz();
    return magnet.mainsSwingHertz() / w * (Math.cos(w * seconds) - Math.cos(w * (seconds + later)));
  }

  /** Phase of the magnet's frame against the carrier's now, turns. */
  double turns() {
    return turns;
  }

  /** Larmor frequency above the carrier, mean over the next so many seconds, mains left out, Hz. */
  double offsetHertz(double carrierHertz, double over) {
    return larmorAt(seconds + over / 2) - carrierHertz;
  }

  /** A change of carrier: both carriers have phase zero at time zero, as if they had always run. */
  void retune(double fromHertz, double toHertz) {
    turns += (fromHertz - toHertz) * seconds;
    turns -= Math.rint(turns);
  }

  /** Lets time pass at a carrier. */
  void advance(double carrierHertz, double by) {
    double run = offsetHertz(carrierHertz, by) * by + mainsTurns(by);
    turns += run;
    turns -= Math.rint(turns);
    seconds += by;
  }
}
