package coilside.board;

import coilside.shot.Shot;
import coilside.signal.Scan;
import java.util.OptionalDouble;

/**
 * A board that plays shots and answers with samples, behind the guard.
 *
 * <p>Used from one thread at a time; {@link #stop()} and {@link #close()} may be called from any
 * thread and make a blocked {@link #play} end with {@link BoardException.Stopped}.
 */
public interface Board extends AutoCloseable {
  /** Who answered at the other end. */
  BoardIdentity identity();

  /** The board's limits narrowed by the operator's. */
  BoardLimits limits();

  /** True when pulses may be sent. A simulated board is always armed. */
  boolean armed();

  /** Lets pulses be sent from now on; the caller records who did it. */
  void arm();

  /** Forbids pulses from now on. */
  void disarm();

  /**
   * Plays a shot once and waits for its samples. The guard looks at it first.
   *
   * @throws BoardException over a limit, not armed, link lost, board silent, damaged answer that
   *     bounded retries did not mend, board refuses, stopped
   */
  Scan play(Shot shot) throws BoardException;

  /** The board's temperature, degree Celsius, empty where it does not report one. */
  OptionalDouble temperature() throws BoardException;

  /** Tells the board to stop whatever it is doing and switch the transmitter off. */
  void stop();

  /** Stops the board and lets the link go. Never throws; may be called twice. */
  @Override
  void close();
}
