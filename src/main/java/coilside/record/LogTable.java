package coilside.record;

import coilside.bench.LogRow;
import coilside.quantity.Measured;
import java.sql.PreparedStatement;
import java.sql.ResultSet;
import java.sql.SQLException;
import java.time.Instant;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.OptionalDouble;

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
    PreparedStatement s = database.statement(withValues("seq > ?"));
    s.setLong(1, cursor);
    s.setInt(2, limit);
    return read(s);
  }

  List<RecordView.Kept<LogRow>> ofRun(String run, long cursor, int limit) throws SQLException {
    PreparedStatement s = database.statement(withValues("run = ? AND seq > ?"));
    s.setString(1, run);
    s.setLong(2, cursor);
    s.setInt(3, limit);
    return read(s);
  }

  /** Rows and their values in one go: a query a row would cost ten times as much. */
  private static String withValues(String condition) {
    return "SELECT r.*, v.name, v.value, v.u, v.unit, v.why_no_u FROM (SELECT "
        + COLUMNS
        + " FROM log_row WHERE "
        + condition
        + " ORDER BY seq LIMIT ?) r LEFT JOIN log_value v ON v.row = r.seq"
        + " ORDER BY r.seq, v.position";
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

  private static List<RecordView.Kept<LogRow>> read(PreparedStatement s) throws SQLException {
    List<RecordView.Kept<LogRow>> out = new ArrayList<>();
    try (ResultSet r = s.executeQuery()) {
      boolean more = r.next();
      while (more) {
        long seq = r.getLong(1);
        String run = r.getString(2);
        long number = r.getLong(3);
        Instant due = Instant.parse(r.getString(4));
        Instant started = Instant.parse(r.getString(5));
        OptionalDouble temperature = Columns.optional(r, 6);
        int retries = r.getInt(7);
        String note = r.getString(8);
        String capture = r.getString(9);
        Map<String, Measured> values = new LinkedHashMap<>();
        while (more && r.getLong(1) == seq) {
          if (r.getString(10) != null) {
            values.put(r.getString(10), Columns.measured(r, 11));
          }
          more = r.next();
        }
        LogRow row =
            new LogRow(run, number, due, started, values, temperature, retries, note, capture);
        out.add(new RecordView.Kept<>(seq, row));
      }
    }
    return out;
  }
}
