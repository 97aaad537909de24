package coilside.board.profile;

import java.util.OptionalInt;

/**
 * One thing wrong with a profile file.
 *
 * @param file the file's name
 * @param line line number from 1; empty where there is none (a missing key)
 * @param key full name of the key, "samples.block.kind"
 * @param value what stands there, control characters removed; "missing" where nothing does
 * @param allowed what is allowed, in words
 * @param example a line that would be right; may be empty
 */
public record ProfileProblem(
    String file, OptionalInt line, String key, String value, String allowed, String example) {
  /** One paragraph for people. */
  public String message() {
    StringBuilder out = new StringBuilder(file);
    line.ifPresent(n -> out.append(':').append(n));
    out.append(": ").append(key).append(" is ").append(value).append("; allowed: ").append(allowed);
    if (!example.isEmpty()) {
      out.append("; for example: ").append(example);
    }
    return out.toString();
  }
}
