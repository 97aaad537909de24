package coilside.bench;

import coilside.shot.Shot;
import coilside.signal.Scan;
import java.time.Instant;
import java.util.List;
import java.util.Optional;

/**
 * What happens at the bench, as immutable events: a closed set. Delivered on the bench's own
 * thread; a receiver must hand on quickly and never block.
 */
public sealed interface Progress {
  /** A rung is being measured from now on. */
  record RungStarted(Rung rung, Instant when) implements Progress {}

  /**
   * A shot was handed to the board.
   *
   * @param scan number of this scan within the step, from 0
   * @param scans how many are planned in this step; 0 when open
   */
  record ShotStarted(Shot shot, int scan, int scans, Instant when) implements Progress {}

  /** Its samples are there. */
  record ScanArrived(Shot shot, Scan scan, int number) implements Progress {}

  /** The picture of a rung has changed: data so far, fit so far, where it measures next. */
  record PictureChanged(Picture picture) implements Progress {}

  /** Part of the work is done. Fraction 0..1, NaN when unknown; seconds left, NaN when unknown. */
  record Step(String what, double fraction, double secondsLeft) implements Progress {}

  /** A finding was made and kept. */
  record RungEnded(Finding finding) implements Progress {}

  /** The states of all rungs as they are now. */
  record LadderChanged(List<RungStatus> ladder) implements Progress {}

  /** A log row was kept. */
  record LogRowKept(LogRow row) implements Progress {}

  /** Something to tell the operator. */
  record Message(boolean warning, String text) implements Progress {}

  /** The work asked for has ended: done, refused or failed with a reason. */
  record WorkEnded(boolean done, Optional<String> reason) implements Progress {}
}
