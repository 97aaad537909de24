package coilside.board.profile;

import java.util.List;
import java.util.Optional;

/**
 * How the board reports success and errors.
 *
 * @param mode whether every command is answered, or the host asks, or nobody says anything
 * @param ahead how many commands may be under way before the first one's answer has come; 1 is one
 *     by one. Only for {@link Mode#EACH}
 * @param success the usual answer to a command, or to the question
 * @param error an error report; groups "code" and "text" where the board gives them. It may come at
 *     any time in place of an expected answer
 * @param question what is asked in {@link Mode#ASKED}, after a shot's commands and once more after
 *     an error until it answers with success
 * @param ignore lines that are passed over wherever they come
 * @param timeLimitSeconds longest time from a command to its answer, beyond what the shot itself
 *     and the wire take, s
 */
public record Replies(
    Mode mode,
    int ahead,
    Optional<Expectation> success,
    Optional<Expectation> error,
    Optional<Template> question,
    List<BoundedPattern> ignore,
    double timeLimitSeconds) {
  /** Who speaks when. */
  public enum Mode {
    /** The board answers each command with success or an error. */
    EACH,
    /** The board takes commands silently; the host asks whether all went well. */
    ASKED,
    /** The board never confirms a command; only questions and samples are answered. */
    NONE
  }

  public Replies {
    ignore = List.copyOf(ignore);
  }
}
