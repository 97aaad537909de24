package coilside.record;

import coilside.quantity.Measured;
import coilside.quantity.Unit;
import java.sql.PreparedStatement;
import java.sql.ResultSet;
import java.sql.SQLException;
import java.sql.Types;
import java.util.LinkedHashMap;
import java.util.Map;
import java.util.OptionalDouble;

/** Numbers and measured values in and out of columns, exactly; NULL is NaN. */
final class Columns {
  private Columns() {}

  static void setNumber(PreparedStatement s, int index, double x) throws SQLException {
    if (Double.isNaN(x)) {
      s.setNull(index, Types.REAL);
    } else {
      s.setDouble(index, x);
    }
  }

  static double number(ResultSet r, int index) throws SQLException {
    double x = r.getDouble(index);
    return r.wasNull() ? Double.NaN : x;
  }

  static void setOptional(PreparedStatement s, int index, OptionalDouble x) throws SQLException {
    setNumber(s, index, x.orElse(Double.NaN));
  }

  static OptionalDouble optional(ResultSet r, int index) throws SQLException {
    double x = number(r, index);
    return Double.isNaN(x) ? OptionalDouble.empty() : OptionalDouble.of(x);
  }

  static long lastRow(Database database) throws SQLException {
    try (ResultSet r = database.statement("SELECT last_insert_rowid()").executeQuery()) {
      r.next();
      return r.getLong(1);
    }
  }

  static void insertValues(
      Database database, String table, String owner, long seq, Map<String, Measured> values)
      throws SQLException {
    PreparedStatement s =
        database.statement(
            "INSERT INTO "
                + table
                + "("
                + owner
                + ", position, name, value, u, unit, why_no_u) VALUES(?,?,?,?,?,?,?)");
    int position = 0;
    for (Map.Entry<String, Measured> entry : values.entrySet()) {
      Measured m = entry.getValue();
      s.setLong(1, seq);
      s.setInt(2, position++);
      s.setString(3, entry.getKey());
      setNumber(s, 4, m.value());
      setNumber(s, 5, m.u());
      s.setString(6, m.unit().symbol());
      s.setString(7, m.whyNoUncertainty());
      s.executeUpdate();
    }
  }

  static Map<String, Measured> values(Database database, String table, String owner, long seq)
      throws SQLException {
    PreparedStatement s =
        database.statement(
            "SELECT name, value, u, unit, why_no_u FROM "
                + table
                + " WHERE "
                + owner
                + " = ? ORDER BY position");
    s.setLong(1, seq);
    Map<String, Measured> out = new LinkedHashMap<>();
    try (ResultSet r = s.executeQuery()) {
      while (r.next()) {
        out.put(r.getString(1), measured(r, 2));
      }
    }
    return out;
  }

  /** A measured value from four columns: value, u, unit, why there is no u. */
  static Measured measured(ResultSet r, int first) throws SQLException {
    return new Measured(
        number(r, first),
        number(r, first + 1),
        Unit.ofSymbol(r.getString(first + 2)),
        r.getString(first + 3));
  }
}
