package coilside.signal;

import java.time.Instant;
import java.util.List;
import java.util.OptionalDouble;

/**
 * What came back from one scan: its receive windows, and how the receiver and the clock stood.
 *
 * @param windows one FID a receive window, in the order they were taken, V at the receiver input
 * @param peakFraction largest |component| seen at the ADC over its full scale, 0..1
 * @param clippedSamples how many components stood at the ADC's rails
 * @param started when the scan was started, UTC
 * @param restSeconds rest before the first step as it really was, s
 * @param temperatureCelsius the board's or magnet's temperature where it is reported, degree
 *     Celsius
 * @param retries how many times a damaged or missing answer made this scan be played again
 */
public record Scan(
    List<Fid> windows,
    double peakFraction,
    int clippedSamples,
    Instant started,
    double restSeconds,
    OptionalDouble temperatureCelsius,
    int retries) {
  public Scan {
    windows = List.copyOf(windows);
    if (windows.isEmpty()) {
      throw new IllegalArgumentException("a scan has at least one receive window");
    }
  }

  /** The first (usually the only) receive window. */
  public Fid fid() {
    return windows.get(0);
  }
}
