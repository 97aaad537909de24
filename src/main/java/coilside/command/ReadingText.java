package coilside.command;

import coilside.bench.Reading;
import java.util.ArrayList;
import java.util.List;

/** A reading as lines of text. */
final class ReadingText {
  private ReadingText() {}

  static List<String> of(Reading reading, boolean plain) {
    List<String> lines = new ArrayList<>();
    reading.values().forEach((name, m) -> lines.add(LadderTable.value(name, m, plain)));
    reading.warnings().forEach(w -> lines.add("note: " + w));
    return lines;
  }
}
