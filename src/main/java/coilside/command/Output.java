package coilside.command;

import java.io.PrintStream;
import java.io.PrintWriter;
import java.nio.charset.StandardCharsets;

/**
 * Where a command writes: results to one stream, progress and errors to the other. Control
 * characters never get through.
 */
final class Output {
  private final PrintWriter out;
  private final PrintWriter err;
  private final boolean progressTerminal;

  /** The process's own standard streams. */
  static Output standard() {
    return new Output(
        new PrintWriter(new PrintStream(System.out, true, StandardCharsets.UTF_8), true),
        new PrintWriter(new PrintStream(System.err, true, StandardCharsets.UTF_8), true),
        System.console() != null && !"dumb".equals(System.getenv("TERM")));
  }

  Output(PrintWriter out, PrintWriter err, boolean progressTerminal) {
    this.out = out;
    this.err = err;
    this.progressTerminal = progressTerminal;
  }

  /** A line of the result. */
  void line(String text) {
    out.println(printable(text));
    out.flush();
  }

  /** A line about what is going on, or an error. */
  void aside(String text) {
    err.println(printable(text));
    err.flush();
  }

  /** A progress line that the next one overwrites; nothing where nobody watches. */
  void progress(String text) {
    if (progressTerminal) {
      err.print("\r\u001b[K" + printable(text));
      err.flush();
    }
  }

  void clearProgress() {
    if (progressTerminal) {
      err.print("\r\u001b[K");
      err.flush();
    }
  }

  boolean progressTerminal() {
    return progressTerminal;
  }

  PrintWriter out() {
    return out;
  }

  PrintWriter err() {
    return err;
  }

  /** The text with control characters other than line feeds replaced. */
  static String printable(String text) {
    StringBuilder b = new StringBuilder(text.length());
    for (int i = 0; i < text.length(); i++) {
      char c = text.charAt(i);
      b.append(c == '\n' || !Character.isISOControl(c) ? c : '\u00b7');
    }
    return b.toString();
  }
}
