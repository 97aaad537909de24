package coilside.board.simulated;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.simulated.FirmwareReceiver.Counts;
import coilside.shot.PhaseCycle.Phases;
import coilside.shot.Shot;
import coilside.shot.Shots;
import coilside.signal.Fid;
import coilside.signal.Fourier;
import coilside.signal.Spectrum;
import java.nio.file.Path;
import java.util.List;
import org.junit.jupiter.api.Test;

/** Each fault shows in the samples as it would on a bench, and nowhere but there. */
class FaultScenariosTest {
  private static final double DWELL = 5e-6;
  private static final int POINTS = 4096;
  private static final double CARRIER = 8.0895e6;
  private static final double GAIN = 40;

  private static SimulatedBench bench(String fault) {
    ScenarioReading reading =
        ScenarioReader.read(Path.of("src/test/resources/scenarios/faults", fault + ".toml"));
    assertEquals(List.of(), reading.problems());
    return new SimulatedBench(reading.scenario().orElseThrow(), SimulatedDigitiser.ideal(), 3);
  }

  private static Shot pulse(double carrier, double rest, double width, double delay) {
    return Shots.single(
        new Shots.Frame(carrier, GAIN, rest),
        width,
        1,
        new Shots.Window(delay, POINTS, DWELL),
        Phases.ZERO);
  }

  private static Spectrum spectrum(Counts c) {
    double scale = Math.pow(10, -GAIN / 20);
    double[] re = new double[c.i().length];
    double[] im = new double[c.i().length];
    for (int k = 0; k < re.length; k++) {
      re[k] = scale * c.i()[k];
      im[k] = scale * c.q()[k];
    }
    return Fourier.spectrum(new Fid(re, im, DWELL, 0, CARRIER));
  }

  /** The highest bin: offset, Hz, and magnitude over that of noise alone (rms). */
  private static double[] peak(Counts c) {
    Spectrum s = spectrum(c);
    int top = 0;
    for (int k = 0; k < s.points(); k++) {
      if (s.magnitude(k) > s.magnitude(top)) {
        top = k;
      }
    }
    double noise = 1e-9 / Math.sqrt(DWELL) * Math.sqrt(2.0 * POINTS);
    return new double[] {(top - POINTS / 2) / (POINTS * DWELL), s.magnitude(top) / noise};
  }

  @Test
  void aSampleForgotten() {
    SimulatedBench bench = bench("no-sample");
    assertTrue(peak(bench.play(pulse(CARRIER, 1, 20e-6, 300e-6)).get(0))[1] < 5);
    assertTrue(peak(bench.play(pulse(CARRIER, 1, 20e-6, 10e-6)).get(0))[1] > 5, "the coil rings");
  }

  @Test
  void aCoilOffTuneTurnsWeakly() {
    SimulatedBench bench = bench("coil-off-tune");
    double nominal = peak(bench.play(pulse(CARRIER, 1, 20e-6, 300e-6)).get(0))[1];
    double longer = peak(bench.play(pulse(CARRIER, 1, 82e-6, 300e-6)).get(0))[1];
    assertEquals(Math.sin(Math.PI / 8), nominal / longer, 0.05);
  }

  @Test
  void swappedChannelsMirrorTheSpectrum() {
    double offset =
        peak(bench("swapped-channels").play(pulse(CARRIER - 3e3, 1, 20e-6, 300e-6)).get(0))[0];
    assertEquals(-3e3, offset, 60);
    offset = peak(bench("long-t1").play(pulse(CARRIER - 3e3, 1, 20e-6, 300e-6)).get(0))[0];
    assertEquals(3e3, offset, 60);
  }

  @Test
  void theReceiverClips() {
    SimulatedBench bench = bench("clipping-receiver");
    double largest = 0;
    Shot shot = pulse(CARRIER, 1, 20e-6, 300e-6).withGain(60);
    for (double v : bench.play(shot).get(0).q()) {
      largest = Math.max(largest, Math.abs(v));
    }
    assertEquals(20e-3, largest);
  }

  @Test
  void theMainsMoveTheLineFromScanToScan() {
    SimulatedBench bench = bench("mains-modulated-magnet");
    double low = Double.POSITIVE_INFINITY;
    double high = Double.NEGATIVE_INFINITY;
    for (int k = 0; k < 8; k++) {
      Counts c = bench.play(pulse(CARRIER, 0.6025, 20e-6, 300e-6)).get(0);
      double turn = Math.atan2(c.q()[400], c.i()[400]) - Math.atan2(c.q()[0], c.i()[0]);
      double hertz = Math.IEEEremainder(turn, 2 * Math.PI) / (2 * Math.PI) / (400 * DWELL);
      low = Math.min(low, hertz);
      high = Math.max(high, hertz);
    }
    assertTrue(high - low > 25 && high - low < 75, low + " to " + high + " Hz");
  }

  @Test
  void aFarResonanceIsThereForThoseWhoLookThere() {
    SimulatedBench bench = bench("far-resonance");
    assertTrue(peak(bench.play(pulse(CARRIER, 1, 20e-6, 300e-6)).get(0))[1] < 5);
  }

  @Test
  void aDeadTransmitterNeitherRingsNorTurns() {
    SimulatedBench bench = bench("dead-transmitter");
    assertTrue(peak(bench.play(pulse(CARRIER, 1, 20e-6, 10e-6)).get(0))[1] < 5);
  }

  @Test
  void aLongT1SaturatesUnderQuickRepetition() {
    SimulatedBench bench = bench("long-t1");
    double first = peak(bench.play(pulse(CARRIER, 0, 20e-6, 300e-6)).get(0))[1];
    bench.play(pulse(CARRIER, 0.5, 20e-6, 300e-6));
    double later = peak(bench.play(pulse(CARRIER, 0.5, 20e-6, 300e-6)).get(0))[1];
    assertEquals(1 - Math.exp(-0.52 / 3), later / first, 0.03);
  }
}
