package coilside.board.profile;

import coilside.board.BoardLimits.Range;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalDouble;
import java.util.OptionalInt;
import java.util.function.Function;
import org.tomlj.TomlArray;
import org.tomlj.TomlPosition;
import org.tomlj.TomlTable;

/**
 * One table of a profile file, read key by key. It remembers which keys were asked for, so that
 * {@link #complainAboutTheRest} can name the unknown ones; a table that is missing reads like an
 * empty one.
 */
final class Section {
  private final ProblemList problems;
  private final String path;
  private final String general;
  private final TomlTable table;
  private final Map<String, Section> asked = new LinkedHashMap<>();

  private Section(ProblemList problems, String path, String general, TomlTable table) {
    this.problems = problems;
    this.path = path;
    this.general = general;
    this.table = table;
  }

  static Section top(ProblemList problems, TomlTable table) {
    return new Section(problems, "", "", table);
  }

  boolean present() {
    return table != null;
  }

  boolean has(String key) {
    return table != null && table.contains(List.of(key));
  }

  /** The table under this key; an absent one where there is none. */
  Section section(String key) {
    return section(key, key);
  }

  /** The same where the key is one of several names that {@code generalKey} stands for. */
  Section section(String key, String generalKey) {
    if (asked.get(key) != null) {
      return asked.get(key);
    }
    Object value = raw(key, generalKey);
    TomlTable inner = null;
    if (value instanceof TomlTable t) {
      inner = t;
    } else if (value != null) {
      problem(key, "a table", "[" + full(key) + "]");
    }
    Section out = new Section(problems, full(key), join(general, generalKey), inner);
    asked.put(key, out);
    return out;
  }

  Optional<String> text(String key, String allowed, String example) {
    Object value = raw(key, key);
    if (value == null) {
      return Optional.empty();
    }
    if (value instanceof String s && s.length() <= 512) {
      return Optional.of(s);
    }
    problem(key, allowed + " (text in quotes, at most 512 characters)", example);
    return Optional.empty();
  }

  Optional<String> requiredText(String key, String allowed, String example) {
    Optional<String> out = text(key, allowed, example);
    if (out.isEmpty() && !has(key)) {
      missing(key, allowed, example);
    }
    return out;
  }

  boolean flag(String key, boolean otherwise) {
    Object value = raw(key, key);
    if (value instanceof Boolean b) {
      return b;
    }
    if (value != null) {
      problem(key, "true or false", key + " = " + otherwise);
    }
    return otherwise;
  }

  int whole(String key, int least, int most, int otherwise) {
    return whole(key, least, most).orElse(otherwise);
  }

  OptionalInt whole(String key, int least, int most) {
    Object value = raw(key, key);
    if (value == null) {
      return OptionalInt.empty();
    }
    if (value instanceof Long n && n >= least && n <= most) {
      return OptionalInt.of(n.intValue());
    }
    problem(key, "a whole number from " + least + " to " + most, key + " = " + least);
    return OptionalInt.empty();
  }

  int requiredWhole(String key, int least, int most, int example) {
    OptionalInt out = whole(key, least, most);
    if (out.isEmpty() && !has(key)) {
      missing(key, "a whole number from " + least + " to " + most, key + " = " + example);
    }
    return out.orElse(example);
  }

  double number(String key, double least, double most, double otherwise) {
    Object value = raw(key, key);
    if (value == null) {
      return otherwise;
    }
    double x =
        value instanceof Long n ? n.doubleValue() : value instanceof Double d ? d : Double.NaN;
    if (x >= least && x <= most) {
      return x;
    }
    problem(key, "a number from " + least + " to " + most, key + " = " + otherwise);
    return otherwise;
  }

  OptionalDouble quantity(
      String key, ValueName.Dimension dimension, double least, double most, String example) {
    Object value = raw(key, key);
    if (value == null) {
      return OptionalDouble.empty();
    }
    OptionalDouble x = si(value, dimension);
    if (x.isPresent() && x.getAsDouble() >= least && x.getAsDouble() <= most) {
      return x;
    }
    problem(key, quantityWords(dimension, least, most), example);
    return OptionalDouble.empty();
  }

  /** A table {@code {from, to, step}}. */
  Optional<Range> range(
      String key, ValueName.Dimension dimension, double least, double most, String example) {
    Object value = raw(key, key);
    for (String end : List.of("from", "to", "step")) {
      problems.know(join(join(general, key), end));
    }
    if (value == null) {
      return Optional.empty();
    }
    String allowed =
        "from, to and (where there is a grain) step, each " + quantityWords(dimension, least, most);
    if (!(value instanceof TomlTable t)) {
      problem(key, allowed, example);
      return Optional.empty();
    }
    Section inner = new Section(problems, full(key), join(general, key), t);
    asked.put(key, inner);
    OptionalDouble from = inner.quantity("from", dimension, least, most, example);
    OptionalDouble to = inner.quantity("to", dimension, least, most, example);
    OptionalDouble step = inner.quantity("step", dimension, 0, most, example);
    double low = from.orElse(inner.has("from") ? Double.NaN : least);
    double high = to.orElse(inner.has("to") ? Double.NaN : most);
    if (!inner.has("from") && !inner.has("to")) {
      problem(key, allowed, example);
      return Optional.empty();
    }
    if (low > high) {
      problem(key, "'from' not above 'to'", example);
      return Optional.empty();
    }
    return Double.isNaN(low) || Double.isNaN(high)
        ? Optional.empty()
        : Optional.of(new Range(low, high, step.orElse(0)));
  }

  Optional<Range> requiredRange(
      String key, ValueName.Dimension dimension, double least, double most, String example) {
    Optional<Range> out = range(key, dimension, least, most, example);
    if (out.isEmpty() && !has(key)) {
      missing(key, "from, to and (where there is a grain) step", example);
    }
    return out;
  }

  /** One of several words. */
  <T> Optional<T> choice(String key, Function<String, Optional<T>> read, String words) {
    Object value = raw(key, key);
    if (value == null) {
      return Optional.empty();
    }
    Optional<T> out = value instanceof String s ? read.apply(s) : Optional.empty();
    if (out.isEmpty()) {
      problem(key, "one of " + words, key + " = \"" + words.split(", ")[0] + "\"");
    }
    return out;
  }

  <T> Optional<T> requiredChoice(String key, Function<String, Optional<T>> read, String words) {
    Optional<T> out = choice(key, read, words);
    if (out.isEmpty() && !has(key)) {
      missing(key, "one of " + words, key + " = \"" + words.split(", ")[0] + "\"");
    }
    return out;
  }

  List<String> texts(String key, String allowed, String example) {
    Object value = raw(key, key);
    List<String> out = new ArrayList<>();
    if (value instanceof TomlArray array && array.size() <= 64) {
      for (int i = 0; i < array.size(); i++) {
        if (array.get(i) instanceof String s && s.length() <= 512) {
          out.add(s);
        } else {
          problem(key, allowed, example);
          return List.of();
        }
      }
    } else if (value != null) {
      problem(key, allowed, example);
    }
    return out;
  }

  /** Reports every key that nobody asked for, with the nearest known one. */
  void complainAboutTheRest() {
    if (table == null) {
      return;
    }
    for (String key : table.keySet()) {
      if (!asked.containsKey(key)) {
        problems.add(
            line(key),
            full(key),
            "an unknown key",
            "the keys of this table: " + String.join(", ", asked.keySet()),
            Spelling.nearest(key, asked.keySet()).map(n -> n + " = ...").orElse(""));
      }
    }
    for (Section inner : asked.values()) {
      if (inner != null) {
        inner.complainAboutTheRest();
      }
    }
  }

  /** Every key of the table, known or not. */
  List<String> keys() {
    return table == null ? List.of() : List.copyOf(table.keySet());
  }

  void problem(String key, String allowed, String example) {
    Object value = table == null ? null : table.get(List.of(key));
    if (value == null) {
      missing(key, allowed, example);
    } else {
      problems.add(line(key), full(key), shown(value), allowed, example);
    }
  }

  void missing(String key, String allowed, String example) {
    problems.add(
        path.isEmpty() || table == null ? OptionalInt.empty() : problems.lineOfTable(path),
        full(key),
        "missing",
        allowed,
        example);
  }

  /** Marks the keys of this table as asked for: the table itself has been complained about. */
  void markAllAsked() {
    keys().forEach(key -> asked.putIfAbsent(key, null));
  }

  /** Makes a key known that was not read. */
  void know(String key) {
    raw(key, key);
  }

  boolean isTable(String key) {
    return has(key) && table.get(List.of(key)) instanceof TomlTable;
  }

  private Object raw(String key, String generalKey) {
    asked.putIfAbsent(key, null);
    problems.know(join(general, generalKey));
    return table == null ? null : table.get(List.of(key));
  }

  private OptionalInt line(String key) {
    TomlPosition at = table.inputPositionOf(List.of(key));
    return at == null ? OptionalInt.empty() : OptionalInt.of(at.line());
  }

  private String full(String key) {
    return join(path, key);
  }

  private static String join(String path, String key) {
    return path.isEmpty() ? key : path + "." + key;
  }

  private static OptionalDouble si(Object value, ValueName.Dimension dimension) {
    boolean bare =
        dimension == ValueName.Dimension.FRACTION || dimension == ValueName.Dimension.COUNT;
    if (value instanceof String s) {
      return Quantities.parse(s, dimension);
    }
    if (bare && value instanceof Number n) {
      return OptionalDouble.of(n.doubleValue());
    }
    return OptionalDouble.empty();
  }

  private static String quantityWords(ValueName.Dimension dimension, double least, double most) {
    String units = String.join(", ", Quantities.units(dimension, 0).keySet());
    return switch (dimension) {
      case COUNT -> "a whole number from " + (long) least + " to " + (long) most;
      case FRACTION -> "a number from " + least + " to " + most;
      default ->
          "a number with its unit ("
              + units
              + "), from "
              + least
              + " to "
              + most
              + " in the first of them";
    };
  }

  private static String shown(Object value) {
    String text =
        value instanceof String s
            ? "\"" + s + "\""
            : value instanceof TomlTable ? "a table" : String.valueOf(value);
    StringBuilder out = new StringBuilder();
    text.codePoints()
        .limit(80)
        .forEach(c -> out.appendCodePoint(Character.isISOControl(c) ? '.' : c));
    return out.toString();
  }
}
