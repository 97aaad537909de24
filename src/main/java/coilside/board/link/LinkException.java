package coilside.board.link;

import java.io.IOException;

/** A link could not be opened, or was lost: what, which port, what to do. */
public final class LinkException extends IOException {
  private static final long serialVersionUID = 1L;

  /** What kind of trouble it is. */
  public enum Kind {
    /** No such port, host or path. */
    MISSING,
    /** Another program holds it. */
    BUSY,
    /** Not allowed to open it. */
    FORBIDDEN,
    /** It is there but is no serial port, or cannot be used. */
    UNUSABLE,
    /** The other end went away. */
    LOST,
    /** The other end does not take our bytes. */
    STALLED,
    /** More came than the queue holds. */
    OVERFLOW,
    /** It was closed from our side. */
    CLOSED
  }

  private final Kind kind;

  public LinkException(Kind kind, String message) {
    super(message);
    this.kind = kind;
  }

  public LinkException(Kind kind, String message, Throwable cause) {
    super(message, cause);
    this.kind = kind;
  }

  public Kind kind() {
    return kind;
  }
}
