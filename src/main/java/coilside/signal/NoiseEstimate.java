package coilside.signal;

import coilside.quantity.Measured;
import coilside.quantity.Unit;
import java.util.List;

/**
 * The receiver's noise as found in records taken with the transmitter off.
 *
 * <p>Interference lines are found first and kept out. Without lines sigma comes from all samples,
 * with u = sigma/(2 sqrt(M)), M the number of complex samples; with lines, from the bins of the
 * windowed spectrum that they leave free.
 *
 * @param sigma standard deviation of one real channel, one sample, V
 * @param density one-sided voltage noise density at the receiver input, V/Hz^0.5: sigma
 *     sqrt(dwell). A receiver filter narrower or wider than 1/dwell changes it: see {@code
 *     bandwidthHertz}
 * @param offsetRe DC offset of the real channel, V
 * @param offsetIm DC offset of the imaginary channel, V
 * @param lines interference lines, by falling amplitude
 * @param samples complex samples looked at
 * @param bandwidthHertz noise bandwidth taken for the density, Hz
 */
public record NoiseEstimate(
    Measured sigma,
    Measured density,
    Measured offsetRe,
    Measured offsetIm,
    List<InterferenceLines.Line> lines,
    int samples,
    double bandwidthHertz) {
  /** Chance that a record of pure noise shows a line. */
  public static final double FALSE_ALARM_PROBABILITY = 1e-3;

  private static final int FEWEST_SAMPLES = 16;

  public NoiseEstimate {
    lines = List.copyOf(lines);
  }

  /** From one record, the receiver's noise bandwidth being 1/dwell. */
  public static NoiseEstimate of(Fid record) {
    return of(List.of(record), 1 / record.dwellSeconds());
  }

  /** From several records, the receiver's noise bandwidth being 1/dwell. */
  public static NoiseEstimate of(List<Fid> records) {
    return of(records, 1 / records.get(0).dwellSeconds());
  }

  /**
   * From several records of the same kind.
   *
   * @param bandwidthHertz two-sided noise bandwidth of the complex samples, Hz
   * @throws IllegalArgumentException when there are fewer than 16 samples a record or a sample is
   *     not finite
   */
  public static NoiseEstimate of(List<Fid> records, double bandwidthHertz) {
    int n = records.get(0).points();
    if (n < FEWEST_SAMPLES) {
      throw new IllegalArgumentException(
          "a noise record of " + n + " samples is too short: at least " + FEWEST_SAMPLES);
    }
    if (!(bandwidthHertz > 0)) {
      throw new IllegalArgumentException(
          "a noise bandwidth of " + bandwidthHertz + " Hz must be above 0 Hz");
    }
    double sumRe = 0;
    double sumIm = 0;
    double squares = 0;
    long count = (long) n * records.size();
    for (Fid fid : records) {
      for (int k = 0; k < n; k++) {
        sumRe += fid.re(k);
        sumIm += fid.im(k);
      }
    }
    if (!Double.isFinite(sumRe + sumIm)) {
      throw new IllegalArgumentException("the record holds samples that are not finite numbers");
    }
    double meanRe = sumRe / count;
    double meanIm = sumIm / count;
    for (Fid fid : records) {
      for (int k = 0; k < n; k++) {
        double r = fid.re(k) - meanRe;
        double i = fid.im(k) - meanIm;
        squares += r * r + i * i;
      }
    }
    if (squares == 0) {
      throw new IllegalArgumentException(
          "all " + count + " samples are the same: the receiver is not sampling");
    }
    InterferenceLines.Search search =
        new InterferenceLines.Search(records, FALSE_ALARM_PROBABILITY);
    double sigma;
    double u;
    double uOffset;
    if (search.lines.isEmpty()) {
      sigma = Math.sqrt(squares / (2 * (count - 1.0)));
      u = sigma / (2 * Math.sqrt(count - 1.0));
      uOffset = sigma / Math.sqrt(count);
    } else {
      double fourth = 0;
      double weightedRe = 0;
      double weightedIm = 0;
      for (int k = 0; k < n; k++) {
        double w = search.window[k];
        fourth += w * w * w * w;
        for (Fid fid : records) {
          weightedRe += w * fid.re(k);
          weightedIm += w * fid.im(k);
        }
      }
      sigma = Math.sqrt(search.noisePower / (2 * search.sumOfSquares));
      double independent =
          count
              * (double) search.freeBins
              / search.totalBins
              * search.sumOfSquares
              * search.sumOfSquares
              / (n * fourth);
      u = sigma / (2 * Math.sqrt(independent));
      uOffset = sigma * Math.sqrt(search.sumOfSquares / records.size()) / search.sumOfWeights;
      meanRe = weightedRe / (search.sumOfWeights * records.size());
      meanIm = weightedIm / (search.sumOfWeights * records.size());
    }
    double perRootHertz = 1 / Math.sqrt(bandwidthHertz);
    return new NoiseEstimate(
        Measured.of(sigma, u, Unit.VOLT),
        Measured.of(sigma * perRootHertz, u * perRootHertz, Unit.VOLT_PER_ROOT_HERTZ),
        Measured.of(meanRe, uOffset, Unit.VOLT),
        Measured.of(meanIm, uOffset, Unit.VOLT),
        search.lines,
        (int) Math.min(Integer.MAX_VALUE, count),
        bandwidthHertz);
  }

  /** Size of the DC offset, sqrt(re^2 + im^2), with its uncertainty. */
  public Measured offset() {
    double size = Math.hypot(offsetRe.value(), offsetIm.value());
    return Measured.of(size, offsetRe.u(), Unit.VOLT);
  }
}
