package coilside.signal;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;

import java.util.Random;
import org.junit.jupiter.api.Test;

class DownConversionTest {
  @Test
  void amplitudePhaseAndTimeSurvive() {
    DownConversion d = new DownConversion(1e-6, 123_000, 20);
    double start = 4e-5;
    double[] samples = new double[d.samplesNeeded(200)];
    for (int k = 0; k < samples.length; k++) {
      double t = start + k * 1e-6;
      samples[k] = 0.3 * Math.cos(2 * Math.PI * 124_500 * t + 0.7);
    }
    Fid fid = d.convert(samples, start, 123_000);
    assertEquals(200, fid.points());
    assertEquals(start + d.delaySeconds(), fid.startSeconds(), 1e-15);
    for (int k = 0; k < 200; k += 20) {
      double angle = 0.7 + 2 * Math.PI * 1500 * fid.time(k);
      assertEquals(0.3 * Math.cos(angle), fid.re(k), 1e-4);
      assertEquals(0.3 * Math.sin(angle), fid.im(k), 1e-4);
    }
  }

  @Test
  void noiseIsThatOfTheStatedBandwidth() {
    DownConversion d = new DownConversion(1e-6, 200_000, 16);
    Random random = new Random(3);
    double[] samples = new double[d.samplesNeeded(8000)];
    for (int k = 0; k < samples.length; k++) {
      samples[k] = random.nextGaussian();
    }
    Fid fid = d.convert(samples, 0, 200_000);
    double square = 0;
    for (int k = 0; k < fid.points(); k++) {
      square += fid.re(k) * fid.re(k) + fid.im(k) * fid.im(k);
    }
    // One-sided density of the real samples: 1 V * sqrt(2 us).
    double sigma = Math.sqrt(square / (2.0 * fid.points()));
    double density = sigma / Math.sqrt(d.noiseBandwidthHertz());
    assertEquals(Math.sqrt(2e-6), density, 0.03 * density);
  }

  @Test
  void aLineOutsideTheBandIsGone() {
    DownConversion d = new DownConversion(1e-6, 123_000, 20);
    double[] samples = new double[d.samplesNeeded(64)];
    for (int k = 0; k < samples.length; k++) {
      samples[k] = Math.cos(2 * Math.PI * 160_000 * k * 1e-6);
    }
    Fid fid = d.convert(samples, 0, 123_000);
    for (int k = 0; k < fid.points(); k++) {
      assertEquals(0, fid.magnitude(k), 2e-4);
    }
  }

  @Test
  void refusesARecordShorterThanItsFilter() {
    DownConversion d = new DownConversion(1e-6, 1e5, 20);
    assertThrows(IllegalArgumentException.class, () -> d.convert(new double[50], 0, 1e5));
  }
}
