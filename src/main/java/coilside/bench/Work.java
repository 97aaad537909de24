package coilside.bench;

import java.time.Duration;
import java.time.Instant;
import java.util.List;
import java.util.Optional;

/** Something the bench can be asked to do: a closed set. */
public sealed interface Work {
  /** Climb what is not fresh, bottom up. */
  record Ready() implements Work {}

  /** Measure one rung, with what it rests on where that is not fresh. */
  record Measure(Rung rung) implements Work {}

  /**
   * Play and keep an averaged FID as the ladder stands.
   *
   * @param scans scans to average
   * @param points samples; 0 for what the ladder advises
   * @param dwellSeconds dwell time; 0 for what the ladder advises
   * @param phaseCycle name of the phase cycle ("none", "cyclops"); empty for the usual one
   */
  record TakeFid(int scans, int points, double dwellSeconds, String phaseCycle) implements Work {}

  /**
   * Run over and over for tuning and shimming, keeping nothing, until stopped. Each scan gives a
   * {@link Progress.ScanArrived} and a {@link Progress.PictureChanged}.
   *
   * @param memoryScans how many scans the running average remembers, 1 for none
   * @param transmit false for the noise picture with the transmitter off
   */
  record Live(int memoryScans, boolean transmit) implements Work {}

  /**
   * Repeat an acquisition at fixed times.
   *
   * @param every time from one start to the next
   * @param count how many; 0 for no end
   * @param until when to end
   * @param scans scans averaged a row
   * @param follow whether the carrier follows the resonance
   * @param keepCaptures whether each row's samples are kept, not only its values
   * @param rules bounds on the values
   */
  record Log(
      Duration every,
      long count,
      Optional<Instant> until,
      int scans,
      boolean follow,
      boolean keepCaptures,
      List<LogRule> rules)
      implements Work {
    public Log {
      if (every.isNegative() || every.isZero() || count < 0 || scans < 1) {
        throw new IllegalArgumentException(
            "a log of " + scans + " scans every " + every + ", " + count + " times");
      }
      rules = List.copyOf(rules);
    }

    /** A log that keeps everything and has no rules. */
    public Log(Duration every, long count, Optional<Instant> until, int scans, boolean follow) {
      this(every, count, until, scans, follow, true, List.of());
    }
  }
}
