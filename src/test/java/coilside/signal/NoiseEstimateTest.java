package coilside.signal;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import java.util.List;
import java.util.Random;
import org.junit.jupiter.api.Test;

class NoiseEstimateTest {
  private static final double SIGMA = 2e-6;

  private static Fid with(Random random, int n, double... offsetAndAmplitude) {
    Fid fid = Synthetic.noise(random, n, 1e-5, SIGMA);
    for (int i = 0; i < offsetAndAmplitude.length; i += 2) {
      fid =
          Synthetic.sum(
              fid,
              Synthetic.decay(
                  n, 1e-5, 0, offsetAndAmplitude[i + 1], 0.4 + i, offsetAndAmplitude[i], 1e12));
    }
    return fid;
  }

  @Test
  void uncertaintiesCoverWithAndWithoutLines() {
    Random random = new Random(11);
    for (int kind = 0; kind < 2; kind++) {
      int inside = 0;
      int draws = 300;
      double squares = 0;
      for (int i = 0; i < draws; i++) {
        Fid fid = kind == 0 ? with(random, 1024) : with(random, 1024, 12345.6, 50 * SIGMA);
        NoiseEstimate e = NoiseEstimate.of(fid);
        double z = (e.sigma().value() - SIGMA) / e.sigma().u();
        squares += z * z / draws;
        inside += Math.abs(z) < 1 ? 1 : 0;
      }
      // 300 draws: standard deviation of the fraction 0.027
      assertEquals(0.683, inside / (double) draws, 0.09, "kind " + kind);
      assertEquals(1, squares, 0.3, "kind " + kind);
    }
  }

  @Test
  void densityIsThatOfTheReceiverInput() {
    NoiseEstimate e = NoiseEstimate.of(with(new Random(1), 65536));
    // sigma sqrt(dwell): the complex envelope has twice the power of the real input voltage.
    assertEquals(SIGMA * Math.sqrt(1e-5), e.density().value(), 5 * e.density().u());
    assertEquals(1 / (2 * Math.sqrt(65536)), e.density().relative(), 1e-4);
  }

  @Test
  void linesAreFoundWithFrequencyAndAmplitude() {
    NoiseEstimate e =
        NoiseEstimate.of(with(new Random(2), 8192, 12345.6, 40 * SIGMA, -7000, 0.5 * SIGMA));
    assertEquals(2, e.lines().size());
    InterferenceLines.Line strong = e.lines().get(0);
    assertEquals(12345.6, strong.offsetHertz().value(), 0.6);
    assertEquals(40 * SIGMA, strong.amplitude().value(), 0.8 * SIGMA);
    InterferenceLines.Line weak = e.lines().get(1);
    assertEquals(-7000, weak.offsetHertz().value(), 4);
    assertEquals(0.5 * SIGMA, weak.amplitude().value(), 5 * weak.amplitude().u());
    assertEquals(SIGMA, e.sigma().value(), 4 * e.sigma().u());
  }

  @Test
  void pureNoiseSeldomShowsALine() {
    Random random = new Random(5);
    int alarms = 0;
    for (int i = 0; i < 400; i++) {
      alarms += InterferenceLines.find(with(random, 512), 0.02).isEmpty() ? 0 : 1;
    }
    // Stated: 0.02 of 400 = 8; neighbouring bins share noise, so rather fewer.
    assertTrue(alarms <= 17, alarms + " of 400 records of noise showed a line");
    assertTrue(alarms >= 1, "the threshold is far too high");
  }

  @Test
  void severalRecordsFindAWeakerLine() {
    Random random = new Random(6);
    List<Fid> records =
        java.util.stream.IntStream.range(0, 16)
            .mapToObj(i -> with(random, 1024, 9000, 0.18 * SIGMA))
            .toList();
    List<InterferenceLines.Line> lines = InterferenceLines.find(records, 1e-3);
    assertEquals(1, lines.size());
    assertEquals(9000, lines.get(0).offsetHertz().value(), 60);
    assertTrue(InterferenceLines.find(records.get(0), 1e-3).isEmpty());
  }

  @Test
  void dcOffsetIsMeasuredWithItsUncertainty() {
    Fid noise = with(new Random(8), 4096, 0, 0.3 * SIGMA);
    NoiseEstimate e = NoiseEstimate.of(noise);
    assertEquals(0.3 * SIGMA * Math.cos(0.4), e.offsetRe().value(), 4 * e.offsetRe().u());
    assertEquals(0.3 * SIGMA * Math.sin(0.4), e.offsetIm().value(), 4 * e.offsetIm().u());
    assertTrue(e.lines().isEmpty(), "a DC offset is not an interference line");
  }

  @Test
  void aLineIsTakenOffAndTheDecayLeft() {
    Random random = new Random(9);
    List<InterferenceLines.Line> lines =
        InterferenceLines.find(with(random, 4096, 12345.6, 20 * SIGMA), 1e-3);
    Fid decay = Synthetic.decay(4096, 1e-5, 0, 30 * SIGMA, 1, -3000, 5e-3);
    Fid signal = Synthetic.sum(with(random, 4096, 12347, 20 * SIGMA), decay);
    Fid clean = InterferenceLines.removed(signal, lines);
    double left = 0;
    for (int k = 0; k < clean.points(); k++) {
      left += Math.pow(clean.re(k) - decay.re(k), 2) + Math.pow(clean.im(k) - decay.im(k), 2);
    }
    assertEquals(SIGMA, Math.sqrt(left / (2 * clean.points())), 0.05 * SIGMA);
  }

  @Test
  void refusesADeadReceiver() {
    Fid dead = new Fid(new double[64], new double[64], 1e-5, 0, 1);
    IllegalArgumentException e =
        assertThrows(IllegalArgumentException.class, () -> NoiseEstimate.of(dead));
    assertTrue(e.getMessage().contains("not sampling"));
  }
}
