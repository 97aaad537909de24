package coilside.board.profile;

import java.util.Objects;
import java.util.Optional;

/**
 * One thing that is said to the board.
 *
 * @param template what is sent; in lines without the line end, in frames without checksum and
 *     stuffing
 * @param answer what comes back instead of the usual success reply; empty for the usual
 * @param silent true when nothing at all comes back, whatever the reply mode
 */
public record Command(Template template, Optional<Expectation> answer, boolean silent) {
  public Command {
    Objects.requireNonNull(template, "template");
    Objects.requireNonNull(answer, "answer");
  }
}
