package coilside.board.wire;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import java.util.Random;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

/** Real samples become complex ones: amplitude, sign, time and noise are kept. */
class DownConversionTest {
  private static final double RATE = 2e6;

  /** A line at an offset within the flat middle half comes out with amplitude, phase and time. */
  @ParameterizedTest
  @CsvSource({"500e3, 20", "500e3, 5", "8.09e6, 20", "7.6e6, 20", "9.23e6, 16"})
  void keepsAmplitudeSignAndTime(double intermediate, int decimation) {
    double dwell = decimation / RATE;
    double offset = 0.2 / dwell;
    int points = 64;
    double[] raw = new double[points * decimation];
    double phase = 0.7;
    for (int n = 0; n < raw.length; n++) {
      double t = n / RATE;
      raw[n] = 3 * Math.cos(phase + 2 * Math.PI * (intermediate + offset) * t);
    }
    DownConversion conversion = new DownConversion(RATE, intermediate, decimation);
    int out = DownConversion.pointsOut(points);
    double[] re = new double[out];
    double[] im = new double[out];
    assertEquals(out, conversion.convert(raw, raw.length, re, im));
    for (int k = 0; k < out; k++) {
      double t = conversion.firstSample() / RATE + k * dwell;
      // The filter is cut off at 4 points either side: a percent or so of ripple is left.
      assertEquals(3 * Math.cos(phase + 2 * Math.PI * offset * t), re[k], 0.06);
      assertEquals(3 * Math.sin(phase + 2 * Math.PI * offset * t), im[k], 0.06);
    }
  }

  /** On resonance the gain is exactly one, but for what is left of the mirror image. */
  @Test
  void onResonanceGainIsOne() {
    double[] raw = new double[64 * 20];
    for (int n = 0; n < raw.length; n++) {
      raw[n] = Math.cos(2 * Math.PI * 500e3 * n / RATE);
    }
    double[] re = new double[57];
    double[] im = new double[57];
    new DownConversion(RATE, 500e3, 20).convert(raw, raw.length, re, im);
    for (int k = 0; k < 57; k++) {
      assertEquals(1, re[k], 2e-3);
      assertEquals(0, im[k], 2e-3);
    }
  }

  @ParameterizedTest
  @ValueSource(ints = {4, 5, 10, 20, 100})
  void noiseBandwidthIsTheSpectrumsWidth(int decimation) {
    double width = RATE / decimation;
    double bandwidth = new DownConversion(RATE, 500e3, decimation).noiseBandwidthHertz(RATE);
    assertEquals(width, bandwidth, 0.015 * width);
  }

  /** White noise of one-sided density S comes out white with total power S / dwell per sideband. */
  @Test
  void whiteNoiseStaysWhite() {
    Random random = new Random(11);
    int decimation = 10;
    int points = 40_000;
    double[] raw = new double[points * decimation];
    for (int n = 0; n < raw.length; n++) {
      raw[n] = random.nextGaussian();
    }
    int out = DownConversion.pointsOut(points);
    double[] re = new double[out];
    double[] im = new double[out];
    new DownConversion(RATE, 500e3, decimation).convert(raw, raw.length, re, im);
    double power = 0;
    double neighbour = 0;
    for (int k = 0; k + 1 < out; k++) {
      power += re[k] * re[k] + im[k] * im[k];
      neighbour += re[k] * re[k + 1] + im[k] * im[k + 1];
    }
    // Variance 1 over RATE/2: one-sided density 2/RATE. Mixing with 2 exp(-i..) gives 4 times half
    // of it on each side, 4/RATE in total density; times 1/dwell = RATE/decimation.
    double expected = 4.0 / decimation;
    assertEquals(expected, power / out, 0.03 * expected);
    assertTrue(Math.abs(neighbour / power) < 0.03, "neighbours " + neighbour / power);
  }
}
