package coilside.command;

/** A command was given wrongly, or a file it names is unsound: what, and what is allowed. */
final class UsageException extends RuntimeException {
  private static final long serialVersionUID = 1L;

  UsageException(String message) {
    super(message);
  }
}
