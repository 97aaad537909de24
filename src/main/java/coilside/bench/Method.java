package coilside.bench;

import coilside.board.BoardException;

/**
 * How one rung is measured. {@link #acquire} plays what it needs and may look at the samples to
 * choose what to play next; {@link #read} takes the values from the capture alone, so that a kept
 * capture gives the same numbers again.
 */
interface Method {
  Rung rung();

  /** Plays shots through the acquisition and leaves scans and settings in it. */
  void acquire(Acquisition acquisition) throws BoardException, NotMeasurable;

  /** The values in the capture: a pure function of it. */
  Reading read(Capture capture) throws NotMeasurable;
}
