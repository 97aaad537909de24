package coilside.board.profile;

import java.util.Optional;

/** What a board is expected to say: a line that matches a pattern, or a frame of a fixed layout. */
public sealed interface Expectation {
  /**
   * A text line.
   *
   * @param pattern what the whole line, without its end, must match
   * @param example how such a line looks, with {@code {named}} places; the pattern matches it. The
   *     simulated firmware says this; a real board does not need it
   */
  record LinePattern(BoundedPattern pattern, Optional<Template> example) implements Expectation {}

  /**
   * A binary frame, without its checksum.
   *
   * @param layout literal bytes and slots with formats; the last slot may take the rest
   */
  record FrameLayout(Template layout) implements Expectation {}
}
