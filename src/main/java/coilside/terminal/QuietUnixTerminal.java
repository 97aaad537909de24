package coilside.terminal;

import com.googlecode.lanterna.TerminalSize;
import com.googlecode.lanterna.terminal.ansi.UnixLikeTerminal;
import com.googlecode.lanterna.terminal.ansi.UnixTerminal;
import java.io.IOException;
import java.io.InputStream;
import java.io.OutputStream;
import java.nio.charset.Charset;

/**
 * Lanterna's Unix terminal with its slow spots replaced: the size comes from {@code stty}, and one
 * {@code stty} call switches to single keys. The overrides run inside the super constructor, so
 * they use no fields.
 */
final class QuietUnixTerminal extends UnixTerminal {
  QuietUnixTerminal(InputStream in, OutputStream out, Charset charset) throws IOException {
    super(in, out, charset, UnixLikeTerminal.CtrlCBehaviour.TRAP);
  }

  @Override
  protected TerminalSize findTerminalSize() throws IOException {
    String[] parts = runSTTYCommand("size").trim().split("\\s+");
    if (parts.length == 2 && parts[0].matches("\\d{1,4}") && parts[1].matches("\\d{1,4}")) {
      int rows = Integer.parseInt(parts[0]);
      int columns = Integer.parseInt(parts[1]);
      if (rows > 0 && columns > 0) {
        return new TerminalSize(columns, rows);
      }
    }
    return new TerminalSize(80, 24);
  }

  @Override
  protected void canonicalMode(boolean enabled) throws IOException {
    if (!enabled) {
      runSTTYCommand("-icanon", "-echo", "-isig", "-ixon", "-iexten", "min", "1");
    }
  }

  @Override
  protected void keyEchoEnabled(boolean enabled) {
    // canonicalMode has done it.
  }

  @Override
  protected void keyStrokeSignalsEnabled(boolean enabled) {
    // canonicalMode has done it.
  }

  /** Gives the terminal back for a while, as it was. */
  void lend() throws IOException {
    restoreTerminalSettings();
  }

  /** Takes it again. */
  void takeBack() throws IOException {
    saveTerminalSettings();
    canonicalMode(false);
  }
}
