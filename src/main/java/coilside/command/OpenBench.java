package coilside.command;

import coilside.bench.Bench;
import coilside.bench.BenchDesk;
import coilside.bench.BenchSettings;
import coilside.bench.KeepException;
import coilside.bench.Progress;
import coilside.bench.Waiter;
import coilside.board.Board;
import coilside.board.BoardException;
import coilside.record.BenchRecord;
import coilside.record.RecordView;
import java.time.Clock;
import java.time.Instant;
import java.util.List;
import java.util.concurrent.CopyOnWriteArrayList;
import java.util.function.Consumer;

/** A bench opened for a command: board, record and ladder, closed together. */
final class OpenBench implements AutoCloseable {
  private final Board board;
  private final BenchRecord record;
  private final Bench bench;
  private final Clock clock;

  private final List<Consumer<Progress>> listeners;

  private OpenBench(
      Board board,
      BenchRecord record,
      Bench bench,
      Clock clock,
      List<Consumer<Progress>> listeners) {
    this.listeners = listeners;
    this.board = board;
    this.record = record;
    this.bench = bench;
    this.clock = clock;
  }

  /** Opens record and board as the options say; nothing is left open when it fails. */
  static OpenBench open(CommonOptions options, Output output) throws BoardException, KeepException {
    Clock clock = Clock.systemUTC();
    Parts parts = Parts.open(options, clock);
    List<Consumer<Progress>> listeners = new CopyOnWriteArrayList<>();
    listeners.add(new ProgressLine(output));
    try {
      Bench bench =
          new Bench(
              parts.board(),
              parts.record(),
              parts.settings(),
              clock,
              Waiter.steady(),
              event -> listeners.forEach(listener -> listener.accept(event)));
      return new OpenBench(parts.board(), parts.record(), bench, clock, listeners);
    } catch (KeepException | RuntimeException e) {
      parts.close();
      throw e;
    }
  }

  /** Board, record and settings, before a bench or a desk stands on them. */
  record Parts(Board board, BenchRecord record, BenchSettings settings) {
    static Parts open(CommonOptions options, Clock clock) throws BoardException, KeepException {
      OpenBoard.Prepared prepared = OpenBoard.prepare(options);
      BenchRecord record = BenchRecord.open(options.captures, clock);
      try {
        BenchSettings settings = Settings.of(options, prepared.profile(), record);
        return new Parts(prepared.open(), record, settings);
      } catch (BoardException | KeepException | RuntimeException e) {
        record.close();
        throw e;
      }
    }

    BenchDesk desk(Clock clock) throws KeepException {
      return new BenchDesk(board, record, settings, clock, Waiter.steady());
    }

    void close() {
      board.close();
      record.close();
    }
  }

  Bench bench() {
    return bench;
  }

  /** The record as it is being written. */
  RecordView view() {
    return record.view();
  }

  Instant now() {
    return clock.instant();
  }

  /** The operator gave a command that transmits: that is the arming, and the record keeps it. */
  void armForThisRun(String command) throws KeepException {
    if (!board.armed()) {
      record.note(
          clock.instant(),
          "armed",
          "by the command '" + command + "', user " + System.getProperty("user.name"));
      board.arm();
    }
  }

  /** Tells a listener every event from now on, on the bench's thread. */
  void listen(Consumer<Progress> listener) {
    listeners.add(listener);
  }

  void stop() {
    bench.stop();
  }

  @Override
  public void close() {
    board.close();
    record.close();
  }
}
