package coilside.board.link;

import coilside.board.link.LinkException.Kind;
import java.io.IOException;
import java.io.InputStream;
import java.nio.file.Files;
import java.nio.file.LinkOption;
import java.nio.file.Path;
import java.nio.file.StandardCopyOption;
import java.nio.file.attribute.PosixFileAttributeView;
import java.nio.file.attribute.PosixFilePermission;
import java.nio.file.attribute.PosixFilePermissions;
import java.util.Arrays;
import java.util.Map;
import java.util.Set;

/**
 * The private folder into which native libraries are unpacked, so that nobody else on the computer
 * can plant one. Nobody but its owner may write there, or it is not used.
 */
public final class NativeFolder {
  private static final Set<PosixFilePermission> OWNER_ONLY =
      PosixFilePermissions.fromString("rwx------");
  private static final Set<PosixFilePermission> OTHERS_WRITE =
      Set.of(PosixFilePermission.GROUP_WRITE, PosixFilePermission.OTHERS_WRITE);

  private static volatile Path chosen;

  private NativeFolder() {}

  /** Says where to unpack; to be called before the first port is opened. */
  public static void use(Path folder) {
    chosen = folder.toAbsolutePath().normalize();
  }

  /** The folder in use: what {@link #use} said, else the user's own cache folder. */
  static Path folder() {
    Path told = chosen;
    return told != null
        ? told
        : byDefault(System.getenv(), Path.of(System.getProperty("user.home", ".")));
  }

  static Path byDefault(Map<String, String> environment, Path home) {
    String cache = environment.getOrDefault("XDG_CACHE_HOME", "");
    Path base = cache.startsWith("/") ? Path.of(cache) : home.resolve(".cache");
    return base.resolve("coilside").resolve("native").toAbsolutePath().normalize();
  }

  /** Makes sure the folder is there and private. */
  static Path ensure(Path folder) throws LinkException {
    try {
      if (posix(nearest(folder))) {
        Files.createDirectories(folder, PosixFilePermissions.asFileAttribute(OWNER_ONLY));
        if (!Files.isDirectory(folder, LinkOption.NOFOLLOW_LINKS)) {
          throw new IOException("it is a link or no folder");
        }
        Set<PosixFilePermission> now = Files.getPosixFilePermissions(folder);
        if (now.stream().anyMatch(OTHERS_WRITE::contains)) {
          throw new IOException("others may write there");
        }
        refuseOthers(folder);
      } else {
        Files.createDirectories(folder);
      }
      return folder;
    } catch (IOException e) {
      throw new LinkException(
          Kind.UNUSABLE,
          "cannot unpack the serial library into "
              + folder
              + ": "
              + e.getMessage()
              + "; make it a folder that only you can write to, or set XDG_CACHE_HOME to one",
          e);
    }
  }

  private static void refuseOthers(Path folder) throws IOException {
    Path ours = Files.createTempFile(folder, "owner", ".probe");
    try {
      if (!Files.getOwner(folder).equals(Files.getOwner(ours))) {
        throw new IOException("it belongs to somebody else");
      }
    } finally {
      Files.deleteIfExists(ours);
    }
  }

  private static Path nearest(Path folder) {
    Path p = folder;
    while (p.getParent() != null && !Files.exists(p)) {
      p = p.getParent();
    }
    return p;
  }

  /** Asked of the file, not of its mount: inside a container the mount may not be findable. */
  private static boolean posix(Path existing) {
    return Files.getFileAttributeView(existing, PosixFileAttributeView.class) != null;
  }

  /**
   * Unpacks one resource under its own path below the folder, replacing a file that differs.
   *
   * @return the file
   */
  static Path unpack(Class<?> beside, String resource, Path folder) throws IOException {
    byte[] wanted;
    try (InputStream in = beside.getResourceAsStream(resource)) {
      if (in == null) {
        throw new IOException("there is no " + resource + " in the library");
      }
      wanted = in.readAllBytes();
    }
    Path file = folder.resolve(resource.startsWith("/") ? resource.substring(1) : resource);
    Files.createDirectories(file.getParent());
    if (Files.isRegularFile(file, LinkOption.NOFOLLOW_LINKS)
        && Files.size(file) == wanted.length
        && Arrays.equals(Files.readAllBytes(file), wanted)) {
      return file;
    }
    Path aside = Files.createTempFile(file.getParent(), "unpack", ".part");
    try {
      Files.write(aside, wanted);
      Files.move(aside, file, StandardCopyOption.ATOMIC_MOVE, StandardCopyOption.REPLACE_EXISTING);
    } finally {
      Files.deleteIfExists(aside);
    }
    return file;
  }
}
