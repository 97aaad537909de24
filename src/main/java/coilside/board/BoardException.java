package coilside.board;

/**
 * Something at the bench went wrong: what, the actual value with its unit, the limit, what to do.
 */
public abstract sealed class BoardException extends Exception {
  private static final long serialVersionUID = 1L;

  private BoardException(String message, Throwable cause) {
    super(message, cause);
  }

  /** A shot was refused by the guard, or the board is not armed. Nothing was sent. */
  public static final class OverLimit extends BoardException {
    private static final long serialVersionUID = 1L;

    public OverLimit(String message) {
      super(message, null);
    }
  }

  /** The port cannot be opened: missing, busy, forbidden. */
  public static final class Unreachable extends BoardException {
    private static final long serialVersionUID = 1L;

    public Unreachable(String message) {
      super(message, null);
    }

    public Unreachable(String message, Throwable cause) {
      super(message, cause);
    }
  }

  /** The other end went away. */
  public static final class LinkLost extends BoardException {
    private static final long serialVersionUID = 1L;

    public LinkLost(String message) {
      super(message, null);
    }

    public LinkLost(String message, Throwable cause) {
      super(message, cause);
    }
  }

  /** The board did not answer within its time. */
  public static final class Silent extends BoardException {
    private static final long serialVersionUID = 1L;

    public Silent(String message) {
      super(message, null);
    }
  }

  /** The board answered, but not as its profile says, or with a damaged block. */
  public static final class BadAnswer extends BoardException {
    private static final long serialVersionUID = 1L;

    public BadAnswer(String message) {
      super(message, null);
    }
  }

  /** The board reported an error of its own. */
  public static final class Refused extends BoardException {
    private static final long serialVersionUID = 1L;

    public Refused(String message) {
      super(message, null);
    }
  }

  /** The operator, or the end of the program, stopped it. */
  public static final class Stopped extends BoardException {
    private static final long serialVersionUID = 1L;

    public Stopped(String message) {
      super(message, null);
    }
  }
}
