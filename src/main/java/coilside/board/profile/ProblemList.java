package coilside.board.profile;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.OptionalInt;
import java.util.Set;
import java.util.TreeSet;
import org.tomlj.TomlPosition;
import org.tomlj.TomlTable;

/** What has been found wrong so far, and every key the reader has asked for. */
final class ProblemList {
  private final String file;
  private final TomlTable top;
  private final List<ProfileProblem> problems = new ArrayList<>();
  private final Set<String> known = new TreeSet<>();

  ProblemList(String file, TomlTable top) {
    this.file = file;
    this.top = top;
  }

  void add(OptionalInt line, String key, String value, String allowed, String example) {
    problems.add(new ProfileProblem(file, line, key, value, allowed, example));
  }

  void know(String key) {
    known.add(key);
  }

  OptionalInt lineOfTable(String path) {
    TomlPosition at = top == null ? null : top.inputPositionOf(path);
    return at == null ? OptionalInt.empty() : OptionalInt.of(at.line());
  }

  boolean isEmpty() {
    return problems.isEmpty();
  }

  /** Sorted by line; what has no line comes last. */
  List<ProfileProblem> sorted() {
    return problems.stream()
        .sorted(Comparator.comparingInt(p -> p.line().orElse(Integer.MAX_VALUE)))
        .toList();
  }

  Set<String> known() {
    return known;
  }
}
