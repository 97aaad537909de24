package coilside.command;

/** The exit statuses that scripts rely on. */
final class ExitStatus {
  static final int DONE = 0;
  static final int REFUSED = 1;
  static final int USAGE = 2;
  static final int OUT_OF_REACH = 3;
  static final int LIMIT = 4;
  static final int NOT_KEPT = 5;
  static final int INTERRUPTED = 130;

  private ExitStatus() {}
}
