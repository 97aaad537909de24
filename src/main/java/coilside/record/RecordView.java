package coilside.record;

import coilside.bench.Finding;
import coilside.bench.KeepException;
import coilside.bench.LogRow;
import coilside.bench.Rung;
import java.nio.file.Path;
import java.sql.PreparedStatement;
import java.sql.ResultSet;
import java.time.Instant;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.concurrent.locks.ReentrantLock;
import java.util.function.Consumer;

/**
 * The reading half of a bench record: findings, log rows, events, settings, and what is new since
 * last time. Thread-safe. Got from {@link BenchRecord#view()} by the program that writes, or from
 * {@link BenchRecord#watch} by any other, which may look while the first one writes.
 *
 * <p>"New since": every kept thing has a number that only grows ({@link Kept#number()}); ask for
 * what comes after the largest one seen, starting from 0.
 */
public final class RecordView implements AutoCloseable {
  private static final int PAGE = 1000;

  private final Path folder;
  private final Database database;
  private final ReentrantLock lock;
  private final FindingTable findings;
  private final LogTable log;

  RecordView(Path folder, Database database, ReentrantLock lock) {
    this.folder = folder;
    this.database = database;
    this.lock = lock;
    this.findings = new FindingTable(database);
    this.log = new LogTable(database);
  }

  /**
   * Something kept, with the number that tells it from all kept before it.
   *
   * @param number grows from one kept thing to the next of the same kind
   */
  public record Kept<T>(long number, T what) {}

  /**
   * One run of {@code log}.
   *
   * @param run its identity
   * @param firstDue when its first row was due, UTC
   * @param lastStarted when its last row was started, UTC
   * @param rows how many rows, gaps included
   * @param gaps how many of them hold no values
   */
  public record LogRun(String run, Instant firstDue, Instant lastStarted, long rows, long gaps) {}

  /**
   * Something that happened at the bench.
   *
   * @param at UTC
   * @param kind "armed", "disarmed", "caution accepted", "settings", "log started" and so on
   * @param text who and what
   */
  public record Event(Instant at, String kind, String text) {}

  /** The captures folder. */
  public Path folder() {
    return folder;
  }

  /** All findings of a rung, oldest first. */
  public List<Finding> findings(Rung rung) throws KeepException {
    return locked(() -> findings.ofRung(rung)).stream().map(Kept::what).toList();
  }

  /** The newest finding of a rung. */
  public Optional<Finding> newest(Rung rung) throws KeepException {
    return locked(() -> findings.newest(rung));
  }

  /** The finding with this id. */
  public Optional<Finding> finding(String id) throws KeepException {
    return locked(() -> findings.ofId(id));
  }

  /** At most {@code limit} findings kept after the one with this number, oldest first. */
  public List<Kept<Finding>> findingsAfter(long number, int limit) throws KeepException {
    return locked(() -> findings.after(number, limit));
  }

  /** At most {@code limit} log rows of any run kept after this number, oldest first. */
  public List<Kept<LogRow>> rowsAfter(long number, int limit) throws KeepException {
    return locked(() -> log.after(number, limit));
  }

  /** At most {@code limit} log rows of one run kept after this number, oldest first. */
  public List<Kept<LogRow>> rowsAfter(String run, long number, int limit) throws KeepException {
    return locked(() -> log.ofRun(run, number, limit));
  }

  /** Hands every row of a run to the receiver, oldest first, without holding them all in memory. */
  public void rows(String run, Consumer<LogRow> receiver) throws KeepException {
    long number = 0;
    while (true) {
      List<Kept<LogRow>> page = rowsAfter(run, number, PAGE);
      if (page.isEmpty()) {
        return;
      }
      for (Kept<LogRow> row : page) {
        receiver.accept(row.what());
        number = row.number();
      }
    }
  }

  /** The number of the finding kept last; 0 without any. */
  public long lastFinding() throws KeepException {
    return lastNumber("SELECT max(seq) FROM finding");
  }

  /** The number of the log row kept last; 0 without any. */
  public long lastRow() throws KeepException {
    return lastNumber("SELECT max(seq) FROM log_row");
  }

  private long lastNumber(String sql) throws KeepException {
    return locked(
        () -> {
          try (ResultSet r = database.statement(sql).executeQuery()) {
            return r.next() ? r.getLong(1) : 0;
          }
        });
  }

  /** The runs of {@code log}, in the order they were begun. */
  public List<LogRun> runs() throws KeepException {
    return locked(log::runs);
  }

  /** At most {@code limit} events kept after this number, oldest first. */
  public List<Kept<Event>> eventsAfter(long number, int limit) throws KeepException {
    return locked(
        () -> {
          PreparedStatement s =
              database.statement(
                  "SELECT seq, at_utc, kind, text FROM event WHERE seq > ? ORDER BY seq LIMIT ?");
          s.setLong(1, number);
          s.setInt(2, limit);
          List<Kept<Event>> out = new ArrayList<>();
          try (ResultSet r = s.executeQuery()) {
            while (r.next()) {
              Event event =
                  new Event(Instant.parse(r.getString(2)), r.getString(3), r.getString(4));
              out.add(new Kept<>(r.getLong(1), event));
            }
          }
          return out;
        });
  }

  /** A small setting that outlives the program. */
  public Optional<String> setting(String name) throws KeepException {
    return locked(
        () -> {
          PreparedStatement s = database.statement("SELECT value FROM setting WHERE name = ?");
          s.setString(1, name);
          try (ResultSet r = s.executeQuery()) {
            return r.next() ? Optional.of(r.getString(1)) : Optional.empty();
          }
        });
  }

  private <T> T locked(Database.Action<T> action) throws KeepException {
    lock.lock();
    try {
      return database.read(action);
    } finally {
      lock.unlock();
    }
  }

  @Override
  public void close() {
    lock.lock();
    try {
      database.close();
    } finally {
      lock.unlock();
    }
  }
}
