package coilside.record;

import java.sql.Connection;
import java.sql.ResultSet;
import java.sql.SQLException;
import java.sql.Statement;
import java.util.List;

/**
 * The tables of the bench record and how an older file is brought up to date.
 *
 * <p>{@code PRAGMA user_version} holds the version; step i of {@link #MIGRATIONS} leads from
 * version i to i + 1, each in one transaction. A step that has shipped is never edited, only
 * followed.
 *
 * <p>Value columns carry no declared type on purpose: a column declared REAL would store -0.0 as 0.
 * NULL stands for "not a number". Times are UTC text with nine decimals, so they sort as text; the
 * order in which things were kept is that of {@code seq}, which a clock set back does not disturb.
 */
final class Schema {
  /** "COIL": tells this kind of SQLite file from others. */
  static final int APPLICATION_ID = 0x434f494c;

  private static final String VERSION_1 =
      """
      CREATE TABLE finding(
        seq INTEGER PRIMARY KEY AUTOINCREMENT,
        id TEXT NOT NULL UNIQUE,
        rung TEXT NOT NULL,
        started_utc TEXT NOT NULL,
        seconds,
        scans INTEGER NOT NULL,
        refusal TEXT,
        capture TEXT NOT NULL,
        simulated INTEGER NOT NULL,
        board TEXT NOT NULL,
        profile_sha256 TEXT NOT NULL,
        carrier_hertz,
        amplitude,
        gain_decibels,
        sample TEXT NOT NULL,
        coil TEXT NOT NULL,
        temperature_celsius);
      CREATE INDEX finding_by_rung ON finding(rung, seq);
      CREATE TABLE finding_value(
        finding INTEGER NOT NULL REFERENCES finding(seq),
        position INTEGER NOT NULL,
        name TEXT NOT NULL,
        value,
        u,
        unit TEXT NOT NULL,
        why_no_u TEXT NOT NULL,
        PRIMARY KEY(finding, position)) WITHOUT ROWID;
      CREATE TABLE finding_text(
        finding INTEGER NOT NULL REFERENCES finding(seq),
        kind TEXT NOT NULL CHECK(kind IN ('warning', 'cause')),
        position INTEGER NOT NULL,
        text TEXT NOT NULL,
        PRIMARY KEY(finding, kind, position)) WITHOUT ROWID;
      CREATE TABLE finding_rests_on(
        finding INTEGER NOT NULL REFERENCES finding(seq),
        rung TEXT NOT NULL,
        id TEXT NOT NULL,
        PRIMARY KEY(finding, rung)) WITHOUT ROWID;
      CREATE TABLE log_row(
        seq INTEGER PRIMARY KEY AUTOINCREMENT,
        run TEXT NOT NULL,
        number INTEGER NOT NULL,
        due_utc TEXT NOT NULL,
        started_utc TEXT NOT NULL,
        temperature_celsius,
        retries INTEGER NOT NULL,
        note TEXT NOT NULL,
        capture TEXT NOT NULL);
      CREATE INDEX log_row_by_run ON log_row(run, seq);
      CREATE TABLE log_value(
        row INTEGER NOT NULL REFERENCES log_row(seq),
        position INTEGER NOT NULL,
        name TEXT NOT NULL,
        value,
        u,
        unit TEXT NOT NULL,
        why_no_u TEXT NOT NULL,
        PRIMARY KEY(row, position)) WITHOUT ROWID;
      CREATE TABLE log_run(
        run TEXT PRIMARY KEY,
        first_due_utc TEXT NOT NULL,
        last_started_utc TEXT NOT NULL,
        rows INTEGER NOT NULL,
        gaps INTEGER NOT NULL) WITHOUT ROWID;
      CREATE TABLE event(
        seq INTEGER PRIMARY KEY AUTOINCREMENT,
        at_utc TEXT NOT NULL,
        kind TEXT NOT NULL,
        text TEXT NOT NULL);
      CREATE TABLE setting(
        name TEXT PRIMARY KEY,
        value TEXT NOT NULL) WITHOUT ROWID;
      CREATE VIEW findings AS
        SELECT f.seq, f.rung, f.started_utc, v.name, v.value, v.u, v.unit, f.scans, f.seconds,
          f.sample, f.board, f.refusal, f.capture
        FROM finding f LEFT JOIN finding_value v ON v.finding = f.seq
        ORDER BY f.seq, v.position;
      CREATE VIEW log_rows AS
        SELECT r.seq, r.run, r.number, r.due_utc, r.started_utc,
          max(CASE v.name WHEN 'larmor_frequency' THEN v.value END) AS larmor_frequency_hertz,
          max(CASE v.name WHEN 'larmor_frequency' THEN v.u END) AS u_larmor_frequency_hertz,
          max(CASE v.name WHEN 'field' THEN v.value END) AS field_tesla,
          max(CASE v.name WHEN 'field' THEN v.u END) AS u_field_tesla,
          max(CASE v.name WHEN 'amplitude' THEN v.value END) AS amplitude_volt,
          max(CASE v.name WHEN 'amplitude' THEN v.u END) AS u_amplitude_volt,
          max(CASE v.name WHEN 'linewidth' THEN v.value END) AS linewidth_hertz,
          max(CASE v.name WHEN 'linewidth' THEN v.u END) AS u_linewidth_hertz,
          max(CASE v.name WHEN 't2_star' THEN v.value END) AS t2_star_seconds,
          max(CASE v.name WHEN 't2_star' THEN v.u END) AS u_t2_star_seconds,
          max(CASE v.name WHEN 'snr' THEN v.value END) AS snr,
          max(CASE v.name WHEN 'snr' THEN v.u END) AS u_snr,
          r.temperature_celsius, r.retries, r.note, r.capture
        FROM log_row r LEFT JOIN log_value v ON v.row = r.seq
        GROUP BY r.seq;
      """;

  /** Step i leads from version i to version i + 1. */
  static final List<String> MIGRATIONS = List.of(VERSION_1);

  /** The version this program writes. */
  static final int VERSION = MIGRATIONS.size();

  private Schema() {}

  static int version(Connection connection) throws SQLException {
    return pragma(connection, "user_version");
  }

  static int applicationId(Connection connection) throws SQLException {
    return pragma(connection, "application_id");
  }

  private static int pragma(Connection connection, String name) throws SQLException {
    try (Statement s = connection.createStatement();
        ResultSet r = s.executeQuery("PRAGMA " + name)) {
      r.next();
      return r.getInt(1);
    }
  }

  /** Brings the file from the version it has to {@link #VERSION}; each step all or nothing. */
  static void migrate(Connection connection) throws SQLException {
    for (int from = version(connection); from < VERSION; from++) {
      int version = from;
      Database.inTransaction(
          connection,
          () -> {
            try (Statement s = connection.createStatement()) {
              for (String sql : MIGRATIONS.get(version).split(";")) {
                if (!sql.isBlank()) {
                  s.execute(sql);
                }
              }
              s.execute("PRAGMA application_id = " + APPLICATION_ID);
              s.execute("PRAGMA user_version = " + (version + 1));
            }
            return null;
          });
    }
  }
}
