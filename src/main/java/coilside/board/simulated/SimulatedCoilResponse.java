package coilside.board.simulated;

import coilside.board.simulated.Scenario.Coil;

/** The coil's response at one frequency, 1 in tune. */
record SimulatedCoilResponse(double re, double im) {
  static SimulatedCoilResponse at(Coil coil, double hertz) {
    double x = 2 * coil.quality() * (hertz - coil.tunedHertz()) / coil.tunedHertz();
    double d = 1 + x * x;
    return new SimulatedCoilResponse(1 / d, -x / d);
  }

  double magnitude() {
    return Math.hypot(re, im);
  }

  double phaseRadians() {
    return Math.atan2(im, re);
  }
}
