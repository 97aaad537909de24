package coilside.board.simulated;

import static coilside.board.simulated.SimulatedScenarios.DWELL;
import static coilside.board.simulated.SimulatedScenarios.LARMOR;
import static coilside.board.simulated.SimulatedScenarios.PULSE_90;
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
import static org.junit.jupiter.api.Assertions.assertArrayEquals;
import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.profile.SampleFormat.RealSampling;
import coilside.board.simulated.FirmwareReceiver.Counts;
import coilside.board.simulated.Scenario.Coil;
import coilside.board.simulated.Scenario.Interference;
import coilside.board.simulated.Scenario.Receiver;
import coilside.board.wire.DownConversion;
import coilside.shot.Receive;
import coilside.shot.Shot;
import java.util.Arrays;
import java.util.List;
import java.util.Optional;
import java.util.OptionalDouble;
import org.junit.jupiter.api.Test;

class SimulatedReceiverTest {
  private static final double DENSITY = 1e-9;
  private static final Receiver NOISY =
      new Receiver(DENSITY, Double.POSITIVE_INFINITY, 0, 0, 0, 0, false);

  @Test
  void aSeedGivesTheSameSamplesAndAnotherSeedOthers() {
    Scenario s = ScenarioReader.named("bad-day");
    assertArrayEquals(sequence(s, 7), sequence(s, 7));
    assertFalse(Arrays.equals(sequence(s, 7), sequence(s, 8)));
  }

  private static double[] sequence(Scenario s, long seed) {
    SimulatedBench bench = new SimulatedBench(s, SimulatedDigitiser.ideal(), seed);
    bench.play(shot(0.1, LARMOR, pulse(PULSE_90, 0), pause(1e-4), receive(500)));
    bench.idle(3);
    return bench.play(shot(0.1, LARMOR, pulse(PULSE_90, 0), pause(1e-4), receive(500))).get(0).i();
  }

  /** Standard deviation of one component is density/sqrt(dwell); 3 sigma of its estimate. */
  @Test
  void noiseHasTheDensityItShouldHave() {
    Counts noise = bench(with(plain(), NOISY)).play(shot(0, LARMOR, receive(20000))).get(0);
    double sigma = DENSITY / Math.sqrt(DWELL);
    assertEquals(sigma, deviation(noise.i()), 3 * sigma / Math.sqrt(40000));
    assertEquals(sigma, deviation(noise.q()), 3 * sigma / Math.sqrt(40000));
  }

  @Test
  void gainMultipliesSignalAndNoiseButNotTheOffsetOfTheAdc() {
    Receiver r = new Receiver(DENSITY, Double.POSITIVE_INFINITY, 0.25, -0.125, 0, 0, false);
    SimulatedBench bench = new SimulatedBench(with(plain(), r), digitiser(1e-3, 0, 0), 1);
    Counts c = bench.play(new Shot(LARMOR, 40, 0, List.of(receive(20000)))).get(0);
    double sigma = 100 * DENSITY / Math.sqrt(DWELL) / 1e-3;
    assertEquals(250, mean(c.i()), 4 * sigma / Math.sqrt(20000));
    assertEquals(-125, mean(c.q()), 4 * sigma / Math.sqrt(20000));
    assertEquals(sigma, deviation(c.i()), 3 * sigma / Math.sqrt(40000));
  }

  @Test
  void whatLiesFarOutsideTheBandIsHeldOffAndNotFoldedBack() {
    double rate = 1 / DWELL;
    for (double f : new double[] {0.51, 0.75, 1.0, 1.02, 3.1, -0.6, -1}) {
      assertEquals(0, line(f * rate), 0, f + " of the sampling rate");
      Counts fid =
          bench(plain()).play(shot(0, LARMOR + f * rate, pulse(1e-6, 0), receive(64))).get(0);
      // A hard pulse of 1 us excites far out; only the far wing of the line may reach the band.
      assertTrue(largest(fid) < 2e-3 * VOLTS, f + " of the sampling rate: " + largest(fid));
    }
    assertEquals(1e-6, line(0.39 * rate), 1e-12);
    double edge = line(0.45 * rate);
    assertTrue(edge > 0.2e-6 && edge < 0.8e-6, "edge " + edge);
  }

  private static double line(double offset) {
    Scenario s = with(plain(), new Interference(LARMOR + offset, 1e-6));
    return largest(bench(s).play(shot(0, LARMOR, receive(64))).get(0));
  }

  /** A line from outside keeps its own phase through shots and carriers. */
  @Test
  void anInterferenceLineIsSteadyAndStaysWhereItIsWhenTheCarrierMoves() {
    SimulatedBench bench = bench(with(plain(), new Interference(LARMOR + 3000, 1e-6)));
    Counts a = bench.play(shot(0, LARMOR, receive(200))).get(0);
    assertEquals(2 * Math.PI * 3000 * DWELL, step(a), 1e-6);
    Counts b = bench.play(shot(1.1, LARMOR + 5000, receive(200))).get(0);
    assertEquals(-2 * Math.PI * 2000 * DWELL, step(b), 1e-6);
  }

  private static double step(Counts c) {
    double re = c.i()[1] * c.i()[0] + c.q()[1] * c.q()[0];
    double im = c.q()[1] * c.i()[0] - c.i()[1] * c.q()[0];
    return Math.atan2(im, re);
  }

  @Test
  void theCoilRingsAfterAPulseAtItsOwnFrequency() {
    Coil coil = new Coil(LARMOR + 2000, Math.PI * (LARMOR + 2000) * 10e-6, 5e-3, 0);
    Scenario s = with(plain(), coil);
    Counts c = bench(s).play(shot(0, LARMOR, pulse(200e-6, 0), receive(10))).get(0);
    Counts spins =
        bench(with(plain(), new Coil(coil.tunedHertz(), coil.quality(), 0, 0)))
            .play(shot(0, LARMOR, pulse(200e-6, 0), receive(10)))
            .get(0);
    double[] re = new double[10];
    double[] im = new double[10];
    for (int k = 0; k < 10; k++) {
      re[k] = c.i()[k] - spins.i()[k];
      im[k] = c.q()[k] - spins.q()[k];
    }
    double response = SimulatedCoilResponse.at(coil, LARMOR).magnitude();
    assertEquals(5e-3 * response, Math.hypot(re[0], im[0]), 1e-8);
    assertEquals(Math.exp(-0.5), Math.hypot(re[1], im[1]) / Math.hypot(re[0], im[0]), 1e-6);
    Counts ring = new Counts(re, im);
    assertEquals(2 * Math.PI * 2000 * DWELL, step(ring), 1e-6);
  }

  /** A series circuit's half-power points are f0/Q apart. */
  @Test
  void theCoilsResponseFallsByHalfThePowerAtItsBandEdges() {
    Coil coil = new Coil(8e6, 200, 0, 0);
    assertEquals(1, SimulatedCoilResponse.at(coil, 8e6).magnitude(), 1e-12);
    assertEquals(Math.sqrt(0.5), SimulatedCoilResponse.at(coil, 8e6 + 20e3).magnitude(), 1e-9);
    assertEquals(Math.sqrt(0.5), SimulatedCoilResponse.at(coil, 8e6 - 20e3).magnitude(), 1e-9);
  }

  @Test
  void theReceivePhaseTurnsTheSignalBack() {
    Counts a = bench(plain()).play(shot(0, LARMOR, pulse(PULSE_90, 0), receive(10))).get(0);
    Counts b =
        bench(plain())
            .play(shot(0, LARMOR, pulse(PULSE_90, 0.7), new Receive(10, DWELL, 0.7)))
            .get(0);
    assertArrayEquals(a.i(), b.i(), 1e-9 * VOLTS);
    assertArrayEquals(a.q(), b.q(), 1e-9 * VOLTS);
  }

  /** Image of a line: (g exp(i e) - 1)/2 of it to first order, g and e the channels' errors. */
  @Test
  void channelErrorsGiveAnImageAndSwappedChannelsMirrorTheSpectrum() {
    Interference line = new Interference(LARMOR + 10e3, 1e-6);
    Receiver r = new Receiver(0, Double.POSITIVE_INFINITY, 0, 0, 0.02, 0.03, false);
    Counts c = bench(with(with(plain(), line), r)).play(shot(0, LARMOR, receive(200))).get(0);
    assertEquals(1e-6 * Math.hypot(0.02, 0.03) / 2, tone(c, -10e3), 0.02e-6 * 0.02);
    Receiver swapped = new Receiver(0, Double.POSITIVE_INFINITY, 0, 0, 0, 0, true);
    c = bench(with(with(plain(), line), swapped)).play(shot(0, LARMOR, receive(200))).get(0);
    assertEquals(1e-6, tone(c, -10e3), 1e-12);
    assertEquals(0, tone(c, 10e3), 1e-12);
  }

  private static double tone(Counts c, double hertz) {
    double re = 0;
    double im = 0;
    int n = c.i().length;
    for (int k = 0; k < n; k++) {
      double a = -2 * Math.PI * hertz * DWELL * k;
      re += c.i()[k] * Math.cos(a) - c.q()[k] * Math.sin(a);
      im += c.i()[k] * Math.sin(a) + c.q()[k] * Math.cos(a);
    }
    return Math.hypot(re, im) / n;
  }

  @Test
  void theAmplifierStopsAtItsRails() {
    Receiver r = new Receiver(0, 1e-3, 0, 0, 0, 0, false);
    SimulatedBench bench = bench(with(plain(), r));
    Counts c = bench.play(new Shot(LARMOR, 60, 0, List.of(pulse(PULSE_90, 0), receive(10)))).get(0);
    assertEquals(-1e-3, c.q()[0], 0);
  }

  @Test
  void aFilterDelayShowsTheInputLater() {
    Shot shot = shot(0, LARMOR - 700, pulse(PULSE_90, 0), pause(50e-6), receive(20));
    Counts prompt = bench(plain()).play(shot).get(0);
    Counts late = new SimulatedBench(plain(), digitiser(1, 4, 3), 1).play(shot).get(0);
    for (int k = 4; k < 20; k++) {
      assertEquals(prompt.i()[k - 3], late.i()[k], 1e-6 * VOLTS);
      assertEquals(prompt.q()[k - 3], late.q()[k], 1e-6 * VOLTS);
    }
    assertTrue(size(late, 0) < 0.01 * VOLTS);
  }

  /** Real samples, mixed down by the host's own converter, are the complex samples. */
  @Test
  void realSamplesMixDownToTheSameSignalAndNoise() {
    double rate = 2e6;
    SimulatedDigitiser real =
        new SimulatedDigitiser(
            1, 0, 0, Optional.of(new RealSampling(rate, OptionalDouble.of(5e5))));
    Shot shot = shot(0, LARMOR - 900, pulse(PULSE_90, 0), new Receive(20000, 1 / rate, 0));
    Counts counts = new SimulatedBench(plain(), real, 1).play(shot).get(0);
    assertEquals(0, counts.q().length);
    DownConversion down = new DownConversion(rate, 5e5, 10);
    double[] re = new double[1900];
    double[] im = new double[1900];
    down.convert(counts.i(), 20000, re, im);
    Counts whole =
        bench(plain())
            .play(
                shot(
                    0,
                    LARMOR - 900,
                    pulse(PULSE_90, 0),
                    pause(down.firstSample() / rate),
                    receive(1900)))
            .get(0);
    for (int k = 0; k < 1900; k += 10) {
      assertEquals(whole.i()[k], re[k], 5e-3 * VOLTS);
      assertEquals(whole.q()[k], im[k], 5e-3 * VOLTS);
    }
    Scenario quiet = with(plain(), NOISY);
    counts =
        new SimulatedBench(quiet, real, 1)
            .play(shot(0, LARMOR, new Receive(200000, 1 / rate, 0)))
            .get(0);
    re = new double[19990];
    im = new double[19990];
    int n = down.convert(counts.i(), 200000, re, im);
    double sigma = DENSITY / Math.sqrt(DWELL);
    assertEquals(sigma, deviation(Arrays.copyOf(re, n)), 0.025 * sigma);
    assertEquals(sigma, deviation(Arrays.copyOf(im, n)), 0.025 * sigma);
  }

  private static SimulatedDigitiser digitiser(double volts, int lost, double delay) {
    return new SimulatedDigitiser(volts, lost, delay, Optional.empty());
  }

  private static double mean(double[] x) {
    return Arrays.stream(x).average().orElseThrow();
  }

  private static double deviation(double[] x) {
    double m = mean(x);
    return Math.sqrt(Arrays.stream(x).map(v -> (v - m) * (v - m)).sum() / (x.length - 1));
  }
}
