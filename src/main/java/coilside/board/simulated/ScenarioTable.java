package coilside.board.simulated;

import coilside.board.profile.ProfileProblem;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Locale;
import java.util.Optional;
import java.util.OptionalInt;
import java.util.Set;
import java.util.TreeSet;
import org.tomlj.TomlArray;
import org.tomlj.TomlPosition;
import org.tomlj.TomlTable;

/** One table of a scenario file, read key by key; problems of all tables go to one list. */
final class ScenarioTable {
  private static final int MOST_TABLES = 64;

  private final String file;
  private final String path;
  private final TomlTable table;
  private final OptionalInt at;
  private final List<ProfileProblem> problems;
  private final Set<String> asked = new TreeSet<>();

  ScenarioTable(
      String file, String path, TomlTable table, OptionalInt at, List<ProfileProblem> problems) {
    this.file = file;
    this.path = path;
    this.table = table;
    this.at = at;
    this.problems = problems;
  }

  ScenarioTable table(String key) {
    Object value = value(key);
    TomlTable inner = value instanceof TomlTable t ? t : null;
    if (value != null && inner == null) {
      problem(key, "a table", "[" + full(key) + "]");
    }
    return new ScenarioTable(file, full(key), inner, line(key), problems);
  }

  List<ScenarioTable> tables(String key) {
    Object value = value(key);
    List<ScenarioTable> out = new ArrayList<>();
    if (value == null) {
      return out;
    }
    String allowed = "at most " + MOST_TABLES + " tables";
    if (!(value instanceof TomlArray array) || array.size() > MOST_TABLES) {
      problem(key, allowed, "[[" + full(key) + "]]");
      return out;
    }
    for (int i = 0; i < array.size(); i++) {
      if (array.get(i) instanceof TomlTable t) {
        OptionalInt here = OptionalInt.of(array.inputPositionOf(i).line());
        out.add(new ScenarioTable(file, full(key) + "[" + (i + 1) + "]", t, here, problems));
      } else {
        problem(key, allowed, "[[" + full(key) + "]]");
        return out;
      }
    }
    return out;
  }

  String text(String key, String otherwise, int longest) {
    Object value = value(key);
    if (value instanceof String s
        && s.length() <= longest
        && s.codePoints().noneMatch(Character::isISOControl)) {
      return s;
    }
    if (value != null || otherwise == null) {
      problem(key, "text of at most " + longest + " characters", key + " = \"my bench\"");
    }
    return otherwise == null ? "" : otherwise;
  }

  boolean flag(String key) {
    Object value = value(key);
    if (value instanceof Boolean b) {
      return b;
    }
    if (value != null) {
      problem(key, "true or false", key + " = true");
    }
    return false;
  }

  <E extends Enum<E>> E choice(String key, Class<E> words, E otherwise) {
    Object value = value(key);
    if (value == null) {
      return otherwise;
    }
    for (E word : words.getEnumConstants()) {
      if (word.name().toLowerCase(Locale.ROOT).equals(value)) {
        return word;
      }
    }
    String all =
        String.join(
            ", ",
            Arrays.stream(words.getEnumConstants())
                .map(w -> w.name().toLowerCase(Locale.ROOT))
                .toList());
    problem(key, "one of " + all, key + " = \"" + all.split(", ")[0] + "\"");
    return otherwise;
  }

  /** A quantity that must be there; the example is a right value as it stands in the file. */
  double required(String key, ScenarioUnit unit, double least, double most, String example) {
    return read(key, unit, least, most, example).orElse(Double.NaN);
  }

  double optional(
      String key, ScenarioUnit unit, double least, double most, String example, double otherwise) {
    asked.add(key);
    return value(key) == null ? otherwise : read(key, unit, least, most, example).orElse(otherwise);
  }

  private Optional<Double> read(
      String key, ScenarioUnit unit, double least, double most, String example) {
    Object value = value(key);
    if (value != null) {
      double x = unit.read(value).orElse(Double.NaN);
      if (x >= least && x <= most) {
        return Optional.of(x);
      }
    }
    problem(key, unit.words(least, most), key + " = " + example);
    return Optional.empty();
  }

  /** Reports keys that nobody asked for. */
  void complainAboutTheRest() {
    if (table == null) {
      return;
    }
    for (String key : table.keySet()) {
      if (!asked.contains(key)) {
        problems.add(
            new ProfileProblem(
                file,
                line(key),
                shown(full(key)),
                "an unknown key",
                "the keys of this table: " + String.join(", ", asked),
                ""));
      }
    }
  }

  void problem(String key, String allowed, String example) {
    Object value = value(key);
    String said =
        value == null
            ? "missing"
            : value instanceof String s
                ? '"' + shown(s) + '"'
                : value instanceof TomlTable || value instanceof TomlArray
                    ? "a table or list"
                    : shown(value.toString());
    problems.add(
        new ProfileProblem(
            file, value == null ? at : line(key), full(key), said, allowed, example));
  }

  private Object value(String key) {
    asked.add(key);
    return table == null ? null : table.get(List.of(key));
  }

  private OptionalInt line(String key) {
    TomlPosition position = table == null ? null : table.inputPositionOf(List.of(key));
    return position == null ? OptionalInt.empty() : OptionalInt.of(position.line());
  }

  private String full(String key) {
    return path.isEmpty() ? key : path + "." + key;
  }

  private static String shown(String text) {
    StringBuilder out = new StringBuilder();
    text.codePoints()
        .limit(80)
        .forEach(c -> out.appendCodePoint(Character.isISOControl(c) ? '.' : c));
    return out.toString();
  }
}
