package coilside.board.link;

import java.io.IOException;
import java.nio.file.DirectoryStream;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;

/**
 * Who has a device open, read from the process folder of Linux; elsewhere, and for other users'
 * processes, nothing can be seen.
 */
final class DeviceUse {
  private DeviceUse() {}

  /**
   * Other processes that have the device open, as "program (process 123)".
   *
   * @param proc the process folder, normally /proc
   * @param device the device, links resolved
   * @param self our own process id, left out
   */
  static List<String> holders(Path proc, Path device, long self) {
    List<String> found = new ArrayList<>();
    try (DirectoryStream<Path> processes = Files.newDirectoryStream(proc, "[0-9]*")) {
      for (Path process : processes) {
        String pid = process.getFileName().toString();
        if (!pid.equals(Long.toString(self)) && hasOpen(process.resolve("fd"), device)) {
          found.add(name(process) + " (process " + pid + ")");
        }
      }
    } catch (IOException | RuntimeException e) {
      return found;
    }
    return found;
  }

  private static boolean hasOpen(Path descriptors, Path device) {
    try (DirectoryStream<Path> open = Files.newDirectoryStream(descriptors)) {
      for (Path descriptor : open) {
        if (device.equals(target(descriptor))) {
          return true;
        }
      }
    } catch (IOException | RuntimeException e) {
      return false;
    }
    return false;
  }

  private static Path target(Path descriptor) {
    try {
      return Files.readSymbolicLink(descriptor);
    } catch (IOException | RuntimeException e) {
      return null;
    }
  }

  private static String name(Path process) {
    try {
      String name = Files.readString(process.resolve("comm"));
      return name.replaceAll("\\p{Cntrl}", "").trim();
    } catch (IOException e) {
      return "a program";
    }
  }
}
