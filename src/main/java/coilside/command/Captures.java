package coilside.command;

import coilside.bench.Capture;
import coilside.record.CaptureException;
import coilside.record.CaptureReader;
import java.nio.file.Files;
import java.nio.file.Path;

/** Finds captures by name or path. */
final class Captures {
  private static final String META = ".sigmf-meta";
  private static final String DATA = ".sigmf-data";

  private Captures() {}

  static Capture read(Path folder, String name) {
    Path path = locate(folder, name);
    try {
      return CaptureReader.read(path);
    } catch (CaptureException e) {
      throw new UsageException(e.getMessage());
    }
  }

  /** The metadata file of a capture. */
  static Path locate(Path folder, String name) {
    String base =
        name.endsWith(META) || name.endsWith(DATA)
            ? name.substring(0, name.length() - META.length())
            : name;
    Path direct = Path.of(base + META);
    if (Files.exists(direct)) {
      return direct;
    }
    Path inFolder = folder.resolve(base + META);
    if (Files.exists(inFolder)) {
      return inFolder;
    }
    throw new UsageException(
        "there is no capture '"
            + name
            + "', neither as a path nor in "
            + folder
            + "; 'coilside ladder' names the captures of its findings");
  }

  /** The base name of a capture given by name or path. */
  static String baseName(String name) {
    String file = Path.of(name).getFileName().toString();
    return file.endsWith(META) || file.endsWith(DATA)
        ? file.substring(0, file.length() - META.length())
        : file;
  }
}
