package coilside.board.link;

/**
 * A two-way stream of bytes to a board. One I/O thread of its own fills a bounded queue; an
 * overflow is a lost link, not lost bytes. {@link #send} and {@link #receive} are called from one
 * thread at a time; {@link #close} from any, and it ends a blocked call.
 */
public interface Link extends AutoCloseable {
  /** Where it leads, for people: "ttyACM0 at 115200 baud", "127.0.0.1:5025". */
  String description();

  /**
   * Sends all bytes or throws; never blocks longer than the link's own write limit.
   *
   * @throws LinkException lost, closed or stalled
   */
  void send(byte[] bytes, int offset, int length) throws LinkException;

  default void send(byte[] bytes) throws LinkException {
    send(bytes, 0, bytes.length);
  }

  /**
   * Waits for bytes.
   *
   * @param into where they go
   * @param timeoutNanos longest wait, ns; 0 takes what is there
   * @return how many bytes came; 0 when the time passed without any
   * @throws LinkException lost, closed or overflown
   */
  int receive(byte[] into, long timeoutNanos) throws LinkException;

  /** Lets the line go. Never throws, may be called twice. */
  @Override
  void close();
}
