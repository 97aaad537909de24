package coilside.board.profile;

import java.util.LinkedHashMap;
import java.util.Map;
import java.util.Optional;
import java.util.Set;
import java.util.TreeSet;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import java.util.regex.PatternSyntaxException;

/**
 * A regular expression from a profile that cannot hang the program: the text it is held against is
 * bounded, and so is the number of characters it may look at while it tries. Past that budget it
 * does not match.
 *
 * <p>It must match the whole text. Named groups carry what is read out of it.
 */
public final class BoundedPattern {
  /** Longest text a pattern is held against, characters. */
  public static final int LONGEST_TEXT = 4096;

  private static final int LONGEST_SOURCE = 512;
  private static final int BUDGET = 200_000;
  private static final Pattern GROUP = Pattern.compile("\\(\\?<([a-zA-Z][a-zA-Z0-9]*)>");

  private final Pattern pattern;
  private final Set<String> groups;

  private BoundedPattern(Pattern pattern, Set<String> groups) {
    this.pattern = pattern;
    this.groups = groups;
  }

  /** Compiles a pattern; the exception's message is for the profile's author. */
  static BoundedPattern of(String source) throws PatternSyntaxException {
    if (source.length() > LONGEST_SOURCE) {
      throw new PatternSyntaxException(
          "longer than " + LONGEST_SOURCE + " characters", source.substring(0, 40), -1);
    }
    Set<String> groups = new TreeSet<>();
    Matcher m = GROUP.matcher(source);
    while (m.find()) {
      groups.add(m.group(1));
    }
    return new BoundedPattern(Pattern.compile(source), groups);
  }

  public String source() {
    return pattern.pattern();
  }

  /** The names of the groups. */
  public Set<String> groups() {
    return Set.copyOf(groups);
  }

  /** The named groups when the whole text matches within the budget, empty otherwise. */
  public Optional<Map<String, String>> match(String text) {
    if (text.length() > LONGEST_TEXT) {
      return Optional.empty();
    }
    try {
      Matcher m = pattern.matcher(new Counted(text, 0, text.length(), new int[] {BUDGET}));
      if (!m.matches()) {
        return Optional.empty();
      }
      Map<String, String> out = new LinkedHashMap<>();
      for (String group : groups) {
        if (m.start(group) >= 0) {
          out.put(group, text.substring(m.start(group), m.end(group)));
        }
      }
      return Optional.of(out);
    } catch (OutOfBudget | StackOverflowError tooHard) {
      return Optional.empty();
    }
  }

  @Override
  public String toString() {
    return source();
  }

  private static final class OutOfBudget extends RuntimeException {
    private static final long serialVersionUID = 1L;

    OutOfBudget() {
      super("pattern out of budget", null, false, false);
    }
  }

  /** A text that counts how often it is looked at. */
  private record Counted(String text, int from, int to, int[] left) implements CharSequence {
    @Override
    public int length() {
      return to - from;
    }

    @Override
    public char charAt(int index) {
      if (--left[0] < 0) {
        throw new OutOfBudget();
      }
      return text.charAt(from + index);
    }

    @Override
    public CharSequence subSequence(int start, int end) {
      return new Counted(text, from + start, from + end, left);
    }

    @Override
    public String toString() {
      return text.substring(from, to);
    }
  }
}
