package coilside.record;

import coilside.bench.LogRow;
import java.sql.PreparedStatement;
import java.sql.ResultSet;
import java.sql.SQLException;
import java.time.Instant;
import java.util.ArrayList;
import java.util.List;

/** Log rows and the list of log runs in and out of the record's tables. */
final class LogTable {
  private static final String COLUMNS =
      "seq, run, number, due_utc, started_utc, temperature_celsius, retries, note, capture";

  private final Database database;

  LogTable(Database database) {
    this.database = database;
  }

  void insert(LogRow row) throws SQLException {
    PreparedStatement s =
        database.statement(
            "INSERT INTO log_row(run, number, due_utc, started_utc, temperature_celsius, retries,"
                + " note, capture) VALUES(?,?,?,?,?,?,?,?)");
    s.setString(1, row.run());
    s.setLong(2, row.number());
    s.setString(3, Words.utc(row.due()));
    s.setString(4, Words.utc(row.started()));
    Columns.setOptional(s, 5, row.temperatureCelsius());
    s.setInt(6, row.retries());
    s.setString(7, row.note());
    s.setString(8, row.capture());
    s.executeUpdate();
    long seq = Columns.lastRow(database);
    Columns.insertValues(database, "log_value", "row", seq, row.values());
    PreparedStatement run =
        database.statement(
            "INSERT INTO log_run VALUES(?,?,?,1,?) ON CONFLICT(run) DO UPDATE SET"
                + " last_started_utc = excluded.last_started_utc, rows = rows + 1,"
                + " gaps = gaps + excluded.gaps");
    run.setString(1, row.run());
    run.setString(2, Words.utc(row.due()));
    run.setString(3, Words.utc(row.started()));
    run.setInt(4, row.values().isEmpty() ? 1 : 0);
    run.executeUpdate();
  }

  List<RecordView.Kept<LogRow>> after(long cursor, int limit) throws SQLException {
    PreparedStatement s =
        database.statement(
            "SELECT " + COLUMNS + " FROM log_row WHERE seq > ? ORDER BY seq LIMIT ?");
    s.setLong(1, cursor);
    s.setInt(2, limit);
    return read(s);
  }

  List<RecordView.Kept<LogRow>> ofRun(String run, long cursor, int limit) throws SQLException {
    PreparedStatement s =
        database.statement(
            "SELECT " + COLUMNS + " FROM log_row WHERE run = ? AND seq > ? ORDER BY seq LIMIT ?");
    s.setString(1, run);
    s.setLong(2, cursor);
    s.setInt(3, limit);
    return read(s);
  }

  List<RecordView.LogRun> runs() throws SQLException {
    PreparedStatement s =
        database.statement(
            "SELECT run, first_due_utc, last_started_utc, rows, gaps FROM log_run"
                + " ORDER BY (SELECT min(seq) FROM log_row WHERE log_row.run = log_run.run)");
    List<RecordView.LogRun> out = new ArrayList<>();
    try (ResultSet r = s.executeQuery()) {
      while (r.next()) {
        out.add(
            new RecordView.LogRun(
                r.getString(1),
                Instant.parse(r.getString(2)),
                Instant.parse(r.getString(3)),
                r.getLong(4),
                r.getLong(5)));
      }
    }
    return out;
  }

  private List<RecordView.Kept<LogRow>> read(PreparedStatement s) throws SQLException {
    List<RecordView.Kept<LogRow>> out = new ArrayList<>();
    try (ResultSet r = s.executeQuery()) {
      while (r.next()) {
        long seq = r.getLong(1);
        out.add(
            new RecordView.Kept<>(
                seq,
                new LogRow(
                    r.getString(2),
                    r.getLong(3),
                    Instant.parse(r.getString(4)),
                    Instant.parse(r.getString(5)),
                    Columns.values(database, "log_value", "row", seq),
                    Columns.optional(r, 6),
                    r.getInt(7),
                    r.getString(8),
                    r.getString(9))));
      }
    }
    return out;
  }
}
