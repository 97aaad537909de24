package coilside.board.simulated;

import coilside.board.profile.SampleFormat;
import coilside.board.profile.SampleFormat.RealSampling;
import java.util.Optional;

/**
 * The board's ADC and receive filter as the simulated bench has to know them.
 *
 * @param voltsPerCount voltage at the ADC for one count, V
 * @param lostSamples samples at the start of each window that the filter spoils
 * @param filterDelaySamples group delay of the filter, samples
 * @param real rate and intermediate frequency of a board with real samples
 */
public record SimulatedDigitiser(
    double voltsPerCount, int lostSamples, double filterDelaySamples, Optional<RealSampling> real) {
  public SimulatedDigitiser {
    if (!(voltsPerCount > 0)) {
      throw new IllegalArgumentException(voltsPerCount + " V a count must be above 0 V");
    }
  }

  /** What a profile says of its samples. */
  public static SimulatedDigitiser of(SampleFormat format) {
    return new SimulatedDigitiser(
        format.voltsPerCount(), format.lostSamples(), format.filterDelaySamples(), format.real());
  }

  /** Complex samples of the input itself, one count a volt: no delay, no loss. */
  public static SimulatedDigitiser ideal() {
    return new SimulatedDigitiser(1, 0, 0, Optional.empty());
  }
}
