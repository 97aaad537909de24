package coilside.board.driver;

import coilside.board.BoardException;
import coilside.board.driver.Conformance.Row;
import coilside.board.driver.Conformance.Row.Verdict;
import java.util.ArrayList;
import java.util.List;
import java.util.function.Consumer;

/** The rows of a conformance table as they come up. */
final class Trials {
  private final Consumer<Row> asItGoes;
  private final List<Row> rows = new ArrayList<>();

  interface Trial {
    void run() throws BoardException;
  }

  Trials(Consumer<Row> asItGoes) {
    this.asItGoes = asItGoes;
  }

  List<Row> rows() {
    return List.copyOf(rows);
  }

  void row(String tried, String expected, String seen, Verdict verdict) {
    Row row = new Row(tried, expected, seen, verdict);
    rows.add(row);
    asItGoes.accept(row);
  }

  /** Runs one trial; an error that it does not treat itself becomes a BAD row. */
  boolean tryOut(String tried, String expected, Trial trial) {
    try {
      trial.run();
      return true;
    } catch (BoardException e) {
      row(tried, expected, e.getMessage(), Verdict.BAD);
      return false;
    }
  }
}
