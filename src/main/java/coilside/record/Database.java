package coilside.record;

import coilside.bench.KeepException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.sql.Connection;
import java.sql.PreparedStatement;
import java.sql.SQLException;
import java.sql.Statement;
import java.util.HashMap;
import java.util.Map;
import org.sqlite.SQLiteConfig;
import org.sqlite.SQLiteOpenMode;

/**
 * One connection to the record's SQLite file, with its prepared statements. Not thread-safe:
 * whoever owns it locks.
 *
 * <p>Write-ahead log, so that watchers read while the bench writes; {@code synchronous=FULL}, so
 * that what was committed survives a power cut.
 */
final class Database implements AutoCloseable {
  private static final int BUSY_MILLISECONDS = 5000;

  private final Path file;
  private final Connection connection;
  private final Map<String, PreparedStatement> statements = new HashMap<>();

  private Database(Path file, Connection connection) {
    this.file = file;
    this.connection = connection;
  }

  /** Something done with the connection. */
  interface Action<T> {
    T run() throws SQLException;
  }

  /** Loads the library by way of a database in memory; trouble shows when a file is opened. */
  static void loadAhead() {
    try {
      SqliteLibrary.prepare();
      try (Connection memory = new SQLiteConfig().createConnection("jdbc:sqlite::memory:");
          Statement s = memory.createStatement()) {
        s.execute("SELECT 1");
      }
    } catch (SQLException | KeepException | LinkageError e) {
      return;
    }
  }

  /** Opens or creates the file and brings it up to date. */
  static Database forWriting(Path file) throws KeepException {
    SQLiteConfig config = new SQLiteConfig();
    config.setBusyTimeout(BUSY_MILLISECONDS);
    config.setJournalMode(SQLiteConfig.JournalMode.WAL);
    config.setSynchronous(SQLiteConfig.SynchronousMode.FULL);
    config.enforceForeignKeys(true);
    Database database = open(file, config, "jdbc:sqlite:" + file);
    database.checked(
        "cannot open the bench record",
        () -> {
          database.checkKind();
          Schema.migrate(database.connection);
          return null;
        });
    return database;
  }

  /** Opens an existing file for reading only; a writer may be at work on it. */
  static Database forReading(Path file) throws KeepException {
    if (!Files.isReadable(file)) {
      throw new KeepException(
          "there is no bench record that can be read at "
              + file
              + ": name the captures folder of a bench that has measured with --captures DIR");
    }
    SQLiteConfig config = new SQLiteConfig();
    config.setBusyTimeout(BUSY_MILLISECONDS);
    config.setReadOnly(true);
    try {
      return checkedForReading(open(file, config, "jdbc:sqlite:" + file));
    } catch (KeepException e) {
      // A folder that may not be written has no room for the files a shared reader needs. Without a
      // write-ahead log nobody is writing, so the file can be read as it lies there.
      Path log = file.resolveSibling(file.getFileName() + "-wal");
      if (Files.isWritable(file.toAbsolutePath().getParent()) || Files.exists(log)) {
        throw e;
      }
      config.setOpenMode(SQLiteOpenMode.OPEN_URI);
      return checkedForReading(
          open(file, config, "jdbc:sqlite:" + file.toAbsolutePath().toUri() + "?immutable=1"));
    }
  }

  private static Database checkedForReading(Database database) throws KeepException {
    database.checked(
        "cannot read the bench record",
        () -> {
          database.checkKind();
          return null;
        });
    return database;
  }

  private static Database open(Path file, SQLiteConfig config, String url) throws KeepException {
    SqliteLibrary.prepare();
    try {
      return new Database(file, config.createConnection(url));
    } catch (SQLException e) {
      if (e.getCause() instanceof org.sqlite.NativeLibraryNotFoundException) {
        throw SqliteLibrary.notLoaded(e.getCause());
      }
      throw Trouble.with("cannot open the bench record", file, e);
    } catch (LinkageError e) {
      throw SqliteLibrary.notLoaded(e);
    }
  }

  private void checkKind() throws SQLException {
    int version = Schema.version(connection);
    int kind = Schema.applicationId(connection);
    if (version > Schema.VERSION && kind == Schema.APPLICATION_ID) {
      throw new NewerRecord(
          "it was written by a newer coilside (record version "
              + version
              + ", this one knows up to "
              + Schema.VERSION
              + "); use that one, or choose another folder with --captures DIR");
    }
    if (kind != Schema.APPLICATION_ID && !(version == 0 && kind == 0)) {
      throw new NewerRecord(
          "it is an SQLite file of another program (application id "
              + kind
              + "); move it away or choose another folder with --captures DIR");
    }
  }

  /** A file this program must leave alone; the message says why. */
  private static final class NewerRecord extends SQLException {
    private static final long serialVersionUID = 1L;

    NewerRecord(String message) {
      super(message);
    }
  }

  Connection connection() {
    return connection;
  }

  Path file() {
    return file;
  }

  /** The prepared statement of this text, made once. */
  PreparedStatement statement(String sql) throws SQLException {
    PreparedStatement statement = statements.get(sql);
    if (statement == null) {
      statement = connection.prepareStatement(sql);
      statements.put(sql, statement);
    }
    return statement;
  }

  /**
   * Runs an action as one transaction: all of it is on the disk at the return, or nothing.
   *
   * <p>BEGIN and COMMIT are said here, not left to the driver: on some errors (a full disk) SQLite
   * has already rolled back by itself, which the driver does not notice.
   */
  <T> T transaction(String what, Action<T> action) throws KeepException {
    try {
      return inTransaction(connection, action);
    } catch (SQLException e) {
      throw Trouble.with(what, file, e);
    }
  }

  static <T> T inTransaction(Connection connection, Action<T> action) throws SQLException {
    try (Statement s = connection.createStatement()) {
      s.execute("BEGIN IMMEDIATE");
      try {
        T result = action.run();
        s.execute("COMMIT");
        return result;
      } catch (SQLException | RuntimeException e) {
        try {
          s.execute("ROLLBACK");
        } catch (SQLException alreadyRolledBack) {
          e.addSuppressed(alreadyRolledBack);
        }
        throw e;
      }
    }
  }

  /** Runs a reading action. */
  <T> T read(Action<T> action) throws KeepException {
    try {
      return action.run();
    } catch (SQLException e) {
      throw Trouble.with("cannot read the bench record", file, e);
    }
  }

  private void checked(String what, Action<Void> action) throws KeepException {
    try {
      action.run();
    } catch (NewerRecord e) {
      close();
      throw new KeepException(what + " " + file + ": " + e.getMessage(), e);
    } catch (SQLException e) {
      close();
      throw Trouble.with(what, file, e);
    }
  }

  /** Limits how far the file may grow, in pages; stands in for a full disk in tests. */
  void limitPages(int pages) throws SQLException {
    try (Statement s = connection.createStatement()) {
      s.execute("PRAGMA max_page_count = " + pages);
    }
  }

  @Override
  public void close() {
    try {
      for (PreparedStatement statement : statements.values()) {
        statement.close();
      }
      statements.clear();
      if (!connection.isClosed()) {
        connection.close();
      }
    } catch (SQLException e) {
      // Everything committed is on the disk; there is nothing left to lose.
      statements.clear();
    }
  }
}
