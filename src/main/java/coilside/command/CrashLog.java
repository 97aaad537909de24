package coilside.command;

import java.io.IOException;
import java.io.PrintWriter;
import java.io.StringWriter;
import java.nio.file.Files;
import java.nio.file.Path;

/** Writes the stack trace of a mistake of ours to a file, so that the user sees one sentence. */
final class CrashLog {
  private CrashLog() {}

  /** Writes it and says where. */
  static String write(Throwable e) {
    StringWriter text = new StringWriter();
    e.printStackTrace(new PrintWriter(text));
    try {
      Path file = Files.createTempFile("coilside-crash-", ".txt");
      Files.writeString(file, text.toString());
      return "The details are in " + file + "; please report them.";
    } catch (IOException cannot) {
      return "The details could not be written to the temporary folder.";
    }
  }
}
