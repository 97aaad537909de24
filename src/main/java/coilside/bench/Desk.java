package coilside.bench;

import coilside.board.BoardIdentity;
import coilside.board.BoardLimits;
import java.util.List;
import java.util.function.Consumer;

/**
 * The bench as a user interface sees it: one piece of work at a time, done on a thread of its own,
 * told as events. All methods may be called from any thread and return at once.
 */
public interface Desk extends AutoCloseable {
  BoardIdentity board();

  BoardLimits limits();

  BenchSettings settings();

  /** The rungs whose findings would go stale with these settings. */
  List<Rung> wouldGoStale(BenchSettings changed);

  /** Takes these settings over from the next piece of work on; refused while busy. */
  void apply(BenchSettings changed);

  /** Every rung as it stands now. */
  List<RungStatus> ladder();

  /** All findings of a rung, oldest first; empty when the record cannot be read. */
  List<Finding> history(Rung rung);

  /** The picture last seen of this rung, in this program run or rebuilt from its capture. */
  java.util.Optional<Picture> picture(Rung rung);

  boolean armed();

  /** Lets pulses be sent; kept in the record with who said so. */
  void arm(String who);

  void disarm(String who);

  boolean busy();

  /** Who holds the bench, where this desk only watches: nothing can be begun or changed then. */
  default java.util.Optional<String> watching() {
    return java.util.Optional.empty();
  }

  /**
   * Starts a piece of work.
   *
   * @throws IllegalStateException when busy
   */
  void begin(Work work);

  /** Asks the work in hand to end: the board is stopped, what was finished is kept. */
  void stop();

  /** Calls the listener with every event from now on, on the bench's thread. */
  void listen(Consumer<Progress> listener);

  /** Stops, disarms, closes the board; waits for at most a few seconds. */
  @Override
  void close();
}
