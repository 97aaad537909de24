package coilside.board.link;

import java.io.IOException;
import java.nio.file.Path;
import java.time.Duration;

/**
 * The board's side of a pseudo-terminal: a link whose other end is a path that any serial program
 * opens as a port. It stays usable while programs open and close that path; it cannot see them do
 * so. Linux only.
 */
public final class PseudoTerminal extends QueuedLink {
  private static final int WAIT_MILLISECONDS = 1000;

  /** What becomes of bytes that nobody reads. */
  public enum WhenNobodyReads {
    /** The write ends with {@link LinkException.Kind#STALLED} and the link is lost. */
    STALL,
    /** They are dropped after a second, as a serial board's are when nothing is plugged in. */
    DROP
  }

  private final PseudoTerminalLine line;
  private final WhenNobodyReads whenNobodyReads;
  private volatile boolean nobodyReads;

  private PseudoTerminal(
      PseudoTerminalLine line, WhenNobodyReads whenNobodyReads, Duration writeLimit) {
    super(line.path().toString(), writeLimit, QUEUE_BYTES);
    this.line = line;
    this.whenNobodyReads = whenNobodyReads;
  }

  /** Makes one, with the usual write limit. */
  public static PseudoTerminal open(WhenNobodyReads whenNobodyReads) throws LinkException {
    return open(whenNobodyReads, WRITE_LIMIT);
  }

  /**
   * Makes one.
   *
   * @param whenNobodyReads what becomes of bytes that nobody reads
   * @param writeLimit longest time a write may take
   * @throws LinkException not Linux, or the native library cannot be used
   */
  public static PseudoTerminal open(WhenNobodyReads whenNobodyReads, Duration writeLimit)
      throws LinkException {
    PseudoTerminal terminal =
        new PseudoTerminal(PseudoTerminalLine.open(), whenNobodyReads, writeLimit);
    terminal.start();
    return terminal;
  }

  /** What others open: "/dev/pts/4". */
  public Path path() {
    return line.path();
  }

  @Override
  int readLine(byte[] into) throws IOException {
    int n = line.read(into, WAIT_MILLISECONDS);
    if (n > 0) {
      nobodyReads = false;
    }
    return n;
  }

  @Override
  int writeLine(byte[] from, int offset, int length) throws IOException {
    while (true) {
      int wait = nobodyReads ? 0 : WAIT_MILLISECONDS;
      int n = line.write(from, offset, length, wait);
      if (n != 0) {
        return n;
      }
      if (whenNobodyReads == WhenNobodyReads.DROP) {
        nobodyReads = true;
        line.dropUnread();
      }
    }
  }

  @Override
  void releaseLine() {
    line.release();
  }
}
