package coilside.bench;

/** The data could not be kept: what, where, what to do. */
public class KeepException extends Exception {
  private static final long serialVersionUID = 1L;

  public KeepException(String message) {
    super(message);
  }

  public KeepException(String message, Throwable cause) {
    super(message, cause);
  }
}
