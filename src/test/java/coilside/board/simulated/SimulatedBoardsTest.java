package coilside.board.simulated;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.Board;
import coilside.board.driver.Boards;
import coilside.board.profile.DeviceProfile;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.shot.Step;
import coilside.shot.Wait;
import coilside.signal.Fid;
import java.time.Clock;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

/**
 * Every shipped profile in front of one bench gives the same physics: the voltage, offset and phase
 * that the bench put in, whatever the board's filter, rate, byte order and mixer.
 */
@Timeout(value = 60, threadMode = Timeout.ThreadMode.SEPARATE_THREAD)
class SimulatedBoardsTest {
  private static final double CARRIER = 8.09e6;
  private static final double OFFSET = 3700;
  private static final double SIGNAL = 20e-6;
  private static final double T2 = 0.5;
  private static final double NOISE = 2e-9;
  private static final double DWELL = 20e-6;

  private static Scenario scenario(double noiseDensity) {
    return new Scenario(
        "wire test",
        "",
        new Scenario.Sample(SIGNAL, 0, List.of(new Scenario.Component(1, 1, T2, 0))),
        new Scenario.Magnet(
            CARRIER + OFFSET,
            25,
            0,
            Scenario.Shape.LORENTZIAN,
            0,
            50,
            0,
            new Scenario.TemperatureCourse(25, 0, 0, 600)),
        new Scenario.Coil(CARRIER + OFFSET, 20, 0, 0),
        new Scenario.Transmitter(10e-6, false),
        new Scenario.Receiver(noiseDensity, Double.POSITIVE_INFINITY, 0, 0, 0, 0, false),
        List.of());
  }

  private static Fid play(DeviceProfile profile, double noise, List<Step> steps) throws Exception {
    try (Board board =
        Boards.open(
            profile,
            SimulatedBoards.inProcess(profile, scenario(noise), 1, false),
            System::nanoTime,
            Clock.systemUTC(),
            true)) {
      return board.play(new Shot(CARRIER, 30, 5, steps)).fid();
    }
  }

  /** Amplitude (V) and phase (rad) at time zero of a line of known offset and decay. */
  private static double[] atTimeZero(Fid fid) {
    double re = 0;
    double im = 0;
    for (int k = 0; k < fid.points(); k++) {
      double t = fid.startSeconds() + k * fid.dwellSeconds();
      double a = 2 * Math.PI * OFFSET * t;
      double grown = Math.exp(t / T2) / fid.points();
      re += grown * (fid.re()[k] * Math.cos(a) + fid.im()[k] * Math.sin(a));
      im += grown * (fid.im()[k] * Math.cos(a) - fid.re()[k] * Math.sin(a));
    }
    return new double[] {Math.hypot(re, im), Math.atan2(im, re)};
  }

  @Test
  void allBoardsGiveTheVoltageAndPhaseThatTheBenchPutIn() throws Exception {
    double phase = Double.NaN;
    for (String name :
        new String[] {
          "radio-frame",
          "scpi-console",
          "plain-line-console",
          "direct-sampling",
          "pulse-and-receive"
        }) {
      DeviceProfile profile = FirmwareExchangeTest.profile(name);
      double amplitude = name.equals("pulse-and-receive") ? 1 : 0.5;
      Fid fid =
          play(
              profile,
              1e-12,
              List.of(
                  new Pulse(10e-6 / amplitude, 0, amplitude),
                  new Wait(200e-6),
                  new Receive(1024, DWELL, 0)));
      double[] zero = atTimeZero(fid);
      // Off resonance by 3.7 kHz the pulse is a little more than 90 degrees on a tilted axis: a
      // percent in amplitude, and its phase depends on the width.
      assertEquals(SIGNAL, zero[0], 0.02 * SIGNAL, name);
      if (amplitude == 0.5) {
        phase = Double.isNaN(phase) ? zero[1] : phase;
        assertEquals(phase, zero[1], 0.01, name);
      }
    }
  }

  /** One component of a complex sample has the standard deviation density / sqrt(dwell). */
  @ParameterizedTest
  @ValueSource(
      strings = {
        "radio-frame",
        "scpi-console",
        "plain-line-console",
        "direct-sampling",
        "pulse-and-receive"
      })
  void allBoardsGiveTheNoiseThatTheBenchPutIn(String name) throws Exception {
    DeviceProfile profile = FirmwareExchangeTest.profile(name);
    double gain = Math.pow(10, 30 / 20.0);
    double count = profile.samples().voltsPerCount() / gain;
    double density = Math.max(NOISE, 5 * count * Math.sqrt(DWELL));
    Fid fid = play(profile, density, List.of(new Receive(8192, DWELL, 0)));
    double sum = 0;
    for (int k = 0; k < fid.points(); k++) {
      sum += fid.re()[k] * fid.re()[k] + fid.im()[k] * fid.im()[k];
    }
    double found = Math.sqrt(sum / (2 * fid.points()) * fid.dwellSeconds());
    assertTrue(fid.points() > 8000);
    // Standard deviation of the estimate: 0.8 %; the board's filters take up to some percent.
    assertEquals(density, found, 0.06 * density, name);
  }
}
