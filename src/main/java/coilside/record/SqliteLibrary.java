package coilside.record;

import coilside.bench.KeepException;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.LinkOption;
import java.nio.file.Path;
import java.nio.file.attribute.PosixFilePermission;
import java.nio.file.attribute.PosixFilePermissions;
import java.util.Set;

/**
 * Where SQLite's native library is unpacked: a folder only its owner may write to.
 *
 * <p>Left alone, the driver unpacks into the shared temporary folder, where another user could
 * plant a library that would be loaded. A folder given in the system property {@code
 * org.sqlite.tmpdir} is respected. Otherwise it is {@code coilside} in the user's cache folder, so
 * that the driver can clear what a killed run left behind; where that cannot be had, a fresh
 * private temporary folder.
 */
final class SqliteLibrary {
  private static final String PROPERTY = "org.sqlite.tmpdir";
  private static final Set<PosixFilePermission> OWNER_ONLY =
      PosixFilePermissions.fromString("rwx------");

  private SqliteLibrary() {}

  /** Must have run before the first connection. */
  static synchronized void prepare() throws KeepException {
    if (System.getProperty(PROPERTY) != null) {
      return;
    }
    Path folder;
    try {
      folder = cacheFolder();
    } catch (IOException | UnsupportedOperationException | SecurityException e) {
      folder = temporaryFolder();
    }
    System.setProperty(PROPERTY, folder.toString());
  }

  private static Path cacheFolder() throws IOException {
    String cache = System.getenv("XDG_CACHE_HOME");
    Path base =
        cache != null && cache.startsWith("/")
            ? Path.of(cache)
            : Path.of(System.getProperty("user.home"), ".cache");
    Files.createDirectories(base);
    Path folder = base.resolve("coilside");
    if (!Files.exists(folder, LinkOption.NOFOLLOW_LINKS)) {
      Files.createDirectory(folder, PosixFilePermissions.asFileAttribute(OWNER_ONLY));
    }
    boolean ours =
        Files.isDirectory(folder, LinkOption.NOFOLLOW_LINKS)
            && Files.getOwner(folder).equals(Files.getOwner(base))
            && Files.getPosixFilePermissions(folder).equals(OWNER_ONLY)
            && Files.isWritable(folder);
    if (!ours) {
      throw new IOException(folder + " is not private to its owner");
    }
    return folder;
  }

  private static Path temporaryFolder() throws KeepException {
    try {
      Path folder = Files.createTempDirectory("coilside-");
      folder.toFile().deleteOnExit();
      return folder;
    } catch (IOException e) {
      throw new KeepException(
          "there is no folder to unpack SQLite's library into ("
              + Trouble.words(e)
              + "): name one with -D"
              + PROPERTY
              + "=FOLDER",
          e);
    }
  }

  /** The error where the library could not be loaded. */
  static KeepException notLoaded(Throwable cause) {
    return new KeepException(
        "SQLite's library could not be loaded from "
            + System.getProperty(PROPERTY)
            + " ("
            + Trouble.words(cause)
            + "): where that folder forbids execution, name another with -D"
            + PROPERTY
            + "=FOLDER",
        cause);
  }
}
