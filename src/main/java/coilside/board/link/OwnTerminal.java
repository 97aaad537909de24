package coilside.board.link;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.HashSet;
import java.util.List;
import java.util.Set;

/**
 * The terminals this program itself talks through, by device number: the standard streams and the
 * controlling terminal. Opening one of them as a board would garble the screen and eat the keys.
 */
final class OwnTerminal {
  private OwnTerminal() {}

  /**
   * Device numbers of our terminals.
   *
   * @param proc the process folder, normally /proc
   */
  static Set<Long> devices(Path proc) {
    Set<Long> devices = new HashSet<>();
    for (String descriptor : List.of("0", "1", "2")) {
      Path stream = proc.resolve("self").resolve("fd").resolve(descriptor);
      long device = deviceNumber(stream);
      if (device > 0) {
        devices.add(device);
      }
    }
    long controlling = controlling(proc.resolve("self").resolve("stat"));
    if (controlling > 0) {
      devices.add(controlling);
    }
    return devices;
  }

  /** The device number of a character device, links followed; 0 where it is none. */
  static long deviceNumber(Path path) {
    try {
      int mode = (Integer) Files.getAttribute(path, "unix:mode");
      boolean characterDevice = (mode & 0170000) == 0020000;
      return characterDevice ? (Long) Files.getAttribute(path, "unix:rdev") : 0;
    } catch (IOException | RuntimeException e) {
      return 0;
    }
  }

  private static long controlling(Path stat) {
    try {
      String text = Files.readString(stat);
      // The program's name, in brackets, may hold blanks: count the fields after it.
      String[] fields = text.substring(text.lastIndexOf(')') + 1).trim().split(" ");
      return Long.parseLong(fields[4]);
    } catch (IOException | RuntimeException e) {
      return 0;
    }
  }
}
