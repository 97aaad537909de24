package coilside.terminal;

import java.nio.charset.Charset;
import java.nio.file.Path;
import java.time.InstantSource;
import java.util.Map;

/**
 * How the text interface runs.
 *
 * @param plain line by line, for screen readers, without a drawn screen
 * @param noColor no colours, whatever the terminal can do
 * @param asciiOnly nothing beyond ASCII, whatever the locale says
 * @param bell ring when a new best is reached, until the operator changes it
 * @param charset what the terminal decodes; anything but UTF-8 means ASCII drawing
 * @param environment TERM, NO_COLOR, COLORTERM, COLORFGBG and SSH_CONNECTION are looked at
 * @param crashLog file to which a stack trace is appended
 * @param store where the look of the screen is kept from one start to the next
 * @param operator who is named when the board is armed
 * @param clock the time
 */
public record TerminalOptions(
    boolean plain,
    boolean noColor,
    boolean asciiOnly,
    boolean bell,
    Charset charset,
    Map<String, String> environment,
    Path crashLog,
    SettingsStore store,
    String operator,
    InstantSource clock) {
  public TerminalOptions {
    environment = Map.copyOf(environment);
  }
}
