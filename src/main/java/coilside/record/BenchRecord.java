package coilside.record;

import coilside.bench.Capture;
import coilside.bench.Finding;
import coilside.bench.KeepException;
import coilside.bench.Keeper;
import coilside.bench.LogRow;
import coilside.bench.Rung;
import java.nio.file.Path;
import java.sql.PreparedStatement;
import java.time.Clock;
import java.time.Instant;
import java.util.List;
import java.util.Optional;
import java.util.concurrent.locks.ReentrantLock;

/**
 * The bench record: one SQLite file beside the captures that holds findings, log rows, events and
 * settings. What a method kept is on the disk when it returns. Thread-safe.
 *
 * <p>One program writes a record at a time ({@link #open}); any number may {@link #watch} it.
 */
public final class BenchRecord implements Keeper, AutoCloseable {
  /** The record's file in the captures folder. */
  public static final String FILE_NAME = "bench-record.sqlite";

  private final CapturesFolder captures;
  private final RecordLock holder;
  private final Database database;
  private final ReentrantLock lock = new ReentrantLock();
  private final FindingTable findings;
  private final LogTable log;
  private final RecordView view;

  private BenchRecord(CapturesFolder captures, RecordLock holder, Database database) {
    this.captures = captures;
    this.holder = holder;
    this.database = database;
    this.findings = new FindingTable(database);
    this.log = new LogTable(database);
    this.view = new RecordView(captures.path(), database, lock);
  }

  /**
   * Opens the record in this folder for writing; makes both where they are missing, and clears what
   * a killed run left half done.
   *
   * @throws KeepException when the folder cannot be written, the record is held by another program,
   *     damaged or of a newer version; the message says what to do
   */
  public static BenchRecord open(Path folder) throws KeepException {
    return open(folder, Clock.systemUTC());
  }

  /** As {@link #open(Path)}, with the clock that says since when the record is held. */
  public static BenchRecord open(Path folder, Clock clock) throws KeepException {
    return open(CapturesFolder.open(folder), clock);
  }

  static BenchRecord open(CapturesFolder captures, Clock clock) throws KeepException {
    RecordLock holder = RecordLock.take(captures.path(), clock.instant());
    try {
      captures.clearLeftovers();
      Path file = captures.path().resolve(FILE_NAME);
      return new BenchRecord(captures, holder, Database.forWriting(file));
    } catch (KeepException | RuntimeException e) {
      holder.close();
      throw e;
    }
  }

  /** Loads the database library, so that opening a record later is quick; no file is touched. */
  public static void loadAhead() {
    Database.loadAhead();
  }

  /**
   * Opens the record in this folder for reading only; nothing is created or changed.
   *
   * @throws KeepException when there is none or it cannot be read
   */
  public static RecordView watch(Path folder) throws KeepException {
    Database database = Database.forReading(folder.resolve(FILE_NAME));
    return new RecordView(folder, database, new ReentrantLock());
  }

  /** The reading half; closed together with this record. */
  public RecordView view() {
    return view;
  }

  /** The captures folder. */
  public Path folder() {
    return captures.path();
  }

  @Override
  public String keep(Capture capture) throws KeepException {
    return captures.keep(capture);
  }

  @Override
  public void keep(Finding finding) throws KeepException {
    requireCapture(finding.capture());
    transaction(
        "cannot keep the finding in",
        () -> {
          findings.insert(finding);
          return null;
        });
  }

  @Override
  public void keep(LogRow row) throws KeepException {
    requireCapture(row.capture());
    transaction(
        "cannot keep the log row in",
        () -> {
          log.insert(row);
          return null;
        });
  }

  /** The record refers only to what exists. */
  private void requireCapture(String base) throws KeepException {
    if (!base.isEmpty() && !captures.holds(base)) {
      throw new KeepException(
          "there is no capture "
              + Words.oneLine(base, 120)
              + " in "
              + captures.path()
              + ": the finding or log row that refers to it was not kept; look whether somebody"
              + " moved or removed it");
    }
  }

  @Override
  public void note(Instant when, String kind, String text) throws KeepException {
    transaction(
        "cannot keep the event '" + Words.oneLine(kind, 40) + "' in",
        () -> {
          PreparedStatement s =
              database.statement("INSERT INTO event(at_utc, kind, text) VALUES(?,?,?)");
          s.setString(1, Words.utc(when));
          s.setString(2, kind);
          s.setString(3, text);
          s.executeUpdate();
          return null;
        });
  }

  @Override
  public List<Finding> findings(Rung rung) throws KeepException {
    return view.findings(rung);
  }

  @Override
  public Optional<Finding> newest(Rung rung) throws KeepException {
    return view.newest(rung);
  }

  @Override
  public Optional<Capture> capture(String name) {
    try {
      return Optional.of(CaptureReader.read(folder().resolve(name)));
    } catch (CaptureException e) {
      return Optional.empty();
    }
  }

  @Override
  public Optional<String> setting(String name) throws KeepException {
    return view.setting(name);
  }

  @Override
  public void setSetting(String name, String value) throws KeepException {
    transaction(
        "cannot keep the setting '" + Words.oneLine(name, 40) + "' in",
        () -> {
          PreparedStatement s =
              database.statement(
                  "INSERT INTO setting VALUES(?,?)"
                      + " ON CONFLICT(name) DO UPDATE SET value = excluded.value");
          s.setString(1, name);
          s.setString(2, value);
          s.executeUpdate();
          return null;
        });
  }

  private void transaction(String what, Database.Action<Void> action) throws KeepException {
    lock.lock();
    try {
      database.transaction(what, action);
    } finally {
      lock.unlock();
    }
  }

  Database database() {
    return database;
  }

  @Override
  public void close() {
    view.close();
    holder.close();
  }
}
