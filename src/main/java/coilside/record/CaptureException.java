package coilside.record;

/** A capture that cannot be read or is not sound: which file, what, what to do. */
public final class CaptureException extends Exception {
  private static final long serialVersionUID = 1L;

  public CaptureException(String message) {
    super(message);
  }

  public CaptureException(String message, Throwable cause) {
    super(message, cause);
  }
}
