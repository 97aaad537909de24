package coilside.board;

import coilside.signal.Scan;
import java.util.OptionalDouble;

/**
 * The transmitting side of a board, as drivers implement it. It only takes shots that passed the
 * guard, since only the guard can make a {@link ClearedShot}; programs use a {@link Board}.
 */
public interface ShotPlayer extends AutoCloseable {
  BoardIdentity identity();

  /** Plays a cleared shot once and waits for its samples. */
  Scan play(ClearedShot shot) throws BoardException;

  OptionalDouble temperature() throws BoardException;

  /** Stops the board; a blocked {@link #play} ends with {@link BoardException.Stopped}. */
  void stop();

  @Override
  void close();
}
