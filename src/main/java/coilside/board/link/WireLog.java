package coilside.board.link;

import java.io.IOException;
import java.io.Writer;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.InstantSource;
import java.time.temporal.ChronoUnit;
import java.util.Locale;
import java.util.Objects;
import java.util.Optional;
import java.util.function.LongSupplier;

/**
 * A link that keeps the exchange of another one in a text file, with times, which {@link
 * ReplayLink} plays back.
 *
 * <p>Each line is a time in seconds since the start, a mark and the bytes: {@code >} sent to the
 * board, {@code <} come from it (at the time they were taken from the link), {@code !} the kind of
 * trouble that ended it. A file that can no longer be written, or has grown too long, ends the log
 * and not the link: {@link #trouble()} tells.
 */
public final class WireLog implements Link {
  /** Longest file unless told otherwise, characters. */
  public static final long LONGEST = 256L << 20;

  private static final int TEXT_BYTES = 120;
  private static final int BINARY_BYTES = 24;

  private final Link link;
  private final Writer out;
  private final LongSupplier nanos;
  private final long startedNanos;
  private long left;
  private boolean endTold;
  private IOException trouble;

  /**
   * Wraps a link.
   *
   * @param file where to; must not exist yet
   * @param clock for the date in the first lines
   * @param nanos a steady clock, ns
   * @throws IOException the file exists already or cannot be made
   */
  public static WireLog over(Link link, Path file, InstantSource clock, LongSupplier nanos)
      throws IOException {
    Writer out =
        Files.newBufferedWriter(
            file,
            StandardCharsets.US_ASCII,
            java.nio.file.StandardOpenOption.CREATE_NEW,
            java.nio.file.StandardOpenOption.WRITE);
    return new WireLog(link, out, clock, nanos, LONGEST);
  }

  WireLog(Link link, Writer out, InstantSource clock, LongSupplier nanos, long longest) {
    this.link = Objects.requireNonNull(link, "link");
    this.out = out;
    this.nanos = nanos;
    this.startedNanos = nanos.getAsLong();
    this.left = longest;
    String where = link.description().replaceAll("[^\\x20-\\x7e]", "?");
    write(
        "# exchange with "
            + where
            + "\n# started "
            + clock.instant().truncatedTo(ChronoUnit.MILLIS)
            + "; each line: seconds since then, > to the board or < from it, the bytes\n");
  }

  @Override
  public String description() {
    return link.description();
  }

  @Override
  public void send(byte[] bytes, int offset, int length) throws LinkException {
    try {
      link.send(bytes, offset, length);
      keep('>', bytes, offset, length);
    } catch (LinkException e) {
      keepEnd(e);
      throw e;
    }
  }

  @Override
  public int receive(byte[] into, long timeoutNanos) throws LinkException {
    try {
      int n = link.receive(into, timeoutNanos);
      keep('<', into, 0, n);
      return n;
    } catch (LinkException e) {
      keepEnd(e);
      throw e;
    }
  }

  /** Why the log ended before the link did; empty while it goes on. */
  public synchronized Optional<IOException> trouble() {
    return Optional.ofNullable(trouble);
  }

  private synchronized void keep(char mark, byte[] bytes, int offset, int length) {
    if (length == 0) {
      return;
    }
    String start = time() + " " + mark + " ";
    StringBuilder lines = new StringBuilder();
    int at = offset;
    int end = offset + length;
    while (at < end) {
      int n = lineLength(bytes, at, end);
      lines.append(start).append(WireText.of(bytes, at, n)).append('\n');
      at += n;
    }
    write(lines.toString());
  }

  /** Text goes up to its line end, binary bytes a few at a time. */
  private static int lineLength(byte[] bytes, int at, int end) {
    int most = Math.min(TEXT_BYTES, end - at);
    for (int i = 0; i < most; i++) {
      int b = bytes[at + i] & 0xff;
      if (b == '\n') {
        return i + 1;
      }
      boolean text = b >= 0x20 && b < 0x7f || b == '\r' || b == '\t';
      if (!text) {
        return Math.min(end - at, Math.max(i, BINARY_BYTES));
      }
    }
    return most;
  }

  private synchronized void keepEnd(LinkException e) {
    if (!endTold) {
      endTold = true;
      write(time() + " ! " + e.kind().name().toLowerCase(Locale.ROOT) + "\n");
    }
  }

  private String time() {
    return String.format(Locale.ROOT, "%.6f", (nanos.getAsLong() - startedNanos) * 1e-9);
  }

  private synchronized void write(String text) {
    if (trouble != null) {
      return;
    }
    try {
      if (text.length() > left) {
        out.write("# the log is full and ends here; the link went on\n");
        out.close();
        throw new IOException("the wire log has reached its longest size and ended");
      }
      left -= text.length();
      out.write(text);
      out.flush();
    } catch (IOException e) {
      trouble = e;
    }
  }

  @Override
  public void close() {
    link.close();
    synchronized (this) {
      TcpLink.quietly(out);
      if (trouble == null) {
        trouble = new IOException("the wire log was closed with its link");
      }
    }
  }
}
