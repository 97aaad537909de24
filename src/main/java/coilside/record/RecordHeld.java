package coilside.record;

import coilside.bench.KeepException;
import java.nio.file.Path;
import java.util.OptionalLong;
import java.util.regex.Matcher;
import java.util.regex.Pattern;

/** The bench record is being written by another program; it may be watched. */
public final class RecordHeld extends KeepException {
  private static final long serialVersionUID = 1L;
  private static final Pattern PROCESS = Pattern.compile("process ([0-9]{1,18}) .*");

  private final String holder;

  RecordHeld(Path folder, String holder) {
    super(
        "the bench record in "
            + folder
            + " is being written by "
            + holder
            + ": watch that one ('coilside' without a command shows it live, 'coilside ladder'"
            + " prints what it knows), end it, or choose another folder with --captures DIR");
    this.holder = holder;
  }

  /** Who holds it: "process 4711 since 2026-03-02T08:00:00Z". */
  public String holder() {
    return holder;
  }

  /** The process that holds it, where it says so. */
  public OptionalLong process() {
    Matcher m = PROCESS.matcher(holder);
    return m.matches() ? OptionalLong.of(Long.parseLong(m.group(1))) : OptionalLong.empty();
  }
}
