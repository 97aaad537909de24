package coilside.record;

import coilside.bench.Conditions;
import coilside.bench.Finding;
import coilside.bench.Refusal;
import coilside.bench.Rung;
import coilside.quantity.Measured;
import java.sql.PreparedStatement;
import java.sql.ResultSet;
import java.sql.SQLException;
import java.time.Instant;
import java.util.ArrayList;
import java.util.EnumMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;

/** Findings in and out of the record's tables. */
final class FindingTable {
  private static final String COLUMNS =
      "seq, id, rung, started_utc, seconds, scans, refusal, capture, simulated, board,"
          + " profile_sha256, carrier_hertz, amplitude, gain_decibels, sample, coil,"
          + " temperature_celsius";

  private final Database database;

  FindingTable(Database database) {
    this.database = database;
  }

  void insert(Finding f) throws SQLException {
    PreparedStatement s =
        database.statement(
            "INSERT INTO finding(id, rung, started_utc, seconds, scans, refusal, capture,"
                + " simulated, board, profile_sha256, carrier_hertz, amplitude, gain_decibels,"
                + " sample, coil, temperature_celsius) VALUES(?,?,?,?,?,?,?,?,?,?,?,?,?,?,?,?)");
    Conditions c = f.conditions();
    s.setString(1, f.id());
    s.setString(2, f.rung().id());
    s.setString(3, Words.utc(f.started()));
    Columns.setNumber(s, 4, f.seconds());
    s.setInt(5, f.scans());
    s.setString(6, f.refusal().map(Refusal::reason).orElse(null));
    s.setString(7, f.capture());
    s.setInt(8, f.simulated() ? 1 : 0);
    s.setString(9, c.board());
    s.setString(10, c.profileDigest());
    Columns.setNumber(s, 11, c.carrierHertz());
    Columns.setNumber(s, 12, c.amplitude());
    Columns.setNumber(s, 13, c.gainDecibels());
    s.setString(14, c.sample());
    s.setString(15, c.coil());
    Columns.setOptional(s, 16, c.temperatureCelsius());
    s.executeUpdate();
    long seq = Columns.lastRow(database);
    Columns.insertValues(database, "finding_value", "finding", seq, f.values());
    insertTexts(seq, "warning", f.warnings());
    insertTexts(seq, "cause", f.refusal().map(Refusal::likelyCauses).orElse(List.of()));
    PreparedStatement rests = database.statement("INSERT INTO finding_rests_on VALUES(?,?,?)");
    for (Map.Entry<Rung, String> entry : f.restedOn().entrySet()) {
      rests.setLong(1, seq);
      rests.setString(2, entry.getKey().id());
      rests.setString(3, entry.getValue());
      rests.executeUpdate();
    }
  }

  private void insertTexts(long seq, String kind, List<String> texts) throws SQLException {
    PreparedStatement s = database.statement("INSERT INTO finding_text VALUES(?,?,?,?)");
    for (int i = 0; i < texts.size(); i++) {
      s.setLong(1, seq);
      s.setString(2, kind);
      s.setInt(3, i);
      s.setString(4, texts.get(i));
      s.executeUpdate();
    }
  }

  List<RecordView.Kept<Finding>> ofRung(Rung rung) throws SQLException {
    PreparedStatement s =
        database.statement("SELECT " + COLUMNS + " FROM finding WHERE rung = ? ORDER BY seq");
    s.setString(1, rung.id());
    return read(s);
  }

  Optional<Finding> newest(Rung rung) throws SQLException {
    PreparedStatement s =
        database.statement(
            "SELECT " + COLUMNS + " FROM finding WHERE rung = ? ORDER BY seq DESC LIMIT 1");
    s.setString(1, rung.id());
    return read(s).stream().map(RecordView.Kept::what).findFirst();
  }

  Optional<Finding> ofId(String id) throws SQLException {
    PreparedStatement s = database.statement("SELECT " + COLUMNS + " FROM finding WHERE id = ?");
    s.setString(1, id);
    return read(s).stream().map(RecordView.Kept::what).findFirst();
  }

  List<RecordView.Kept<Finding>> after(long cursor, int limit) throws SQLException {
    PreparedStatement s =
        database.statement(
            "SELECT " + COLUMNS + " FROM finding WHERE seq > ? ORDER BY seq LIMIT ?");
    s.setLong(1, cursor);
    s.setInt(2, limit);
    return read(s);
  }

  private List<RecordView.Kept<Finding>> read(PreparedStatement s) throws SQLException {
    List<RecordView.Kept<Finding>> out = new ArrayList<>();
    try (ResultSet r = s.executeQuery()) {
      while (r.next()) {
        out.add(new RecordView.Kept<>(r.getLong(1), finding(r)));
      }
    }
    return out;
  }

  private Finding finding(ResultSet r) throws SQLException {
    long seq = r.getLong(1);
    Map<String, Measured> values = Columns.values(database, "finding_value", "finding", seq);
    String reason = r.getString(7);
    Optional<Refusal> refusal =
        reason == null ? Optional.empty() : Optional.of(new Refusal(reason, texts(seq, "cause")));
    Conditions conditions =
        new Conditions(
            r.getString(10),
            r.getString(11),
            Columns.number(r, 12),
            Columns.number(r, 13),
            Columns.number(r, 14),
            r.getString(15),
            r.getString(16),
            Columns.optional(r, 17));
    return new Finding(
        r.getString(2),
        Rung.ofId(r.getString(3)),
        Instant.parse(r.getString(4)),
        Columns.number(r, 5),
        r.getInt(6),
        values,
        texts(seq, "warning"),
        refusal,
        conditions,
        r.getString(8),
        restedOn(seq),
        r.getInt(9) != 0);
  }

  private List<String> texts(long seq, String kind) throws SQLException {
    PreparedStatement s =
        database.statement(
            "SELECT text FROM finding_text WHERE finding = ? AND kind = ? ORDER BY position");
    s.setLong(1, seq);
    s.setString(2, kind);
    List<String> out = new ArrayList<>();
    try (ResultSet r = s.executeQuery()) {
      while (r.next()) {
        out.add(r.getString(1));
      }
    }
    return out;
  }

  private Map<Rung, String> restedOn(long seq) throws SQLException {
    PreparedStatement s =
        database.statement("SELECT rung, id FROM finding_rests_on WHERE finding = ?");
    s.setLong(1, seq);
    Map<Rung, String> out = new EnumMap<>(Rung.class);
    try (ResultSet r = s.executeQuery()) {
      while (r.next()) {
        out.put(Rung.ofId(r.getString(1)), r.getString(2));
      }
    }
    return out;
  }
}
