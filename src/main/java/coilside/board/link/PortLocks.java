package coilside.board.link;

import coilside.board.link.LinkException.Kind;
import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.channels.FileChannel;
import java.nio.channels.FileLock;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardOpenOption;
import java.time.Instant;
import java.time.InstantSource;
import java.time.temporal.ChronoUnit;
import java.util.Locale;
import java.util.Map;
import java.util.Objects;
import java.util.Optional;
import java.util.concurrent.ConcurrentHashMap;

/**
 * Lock files that say who holds which board: one a port, kept locked by the operating system while
 * the port is in use, so that a crash leaves no stale lock. The file names the holder for whoever
 * is refused. The file itself stays behind, empty: taking it away would race with the next holder.
 */
public final class PortLocks {
  private static final int MOST_BYTES = 4096;

  /** Held by this program: the operating system's locks do not tell threads of one apart. */
  private static final Map<Path, Holder> OURS = new ConcurrentHashMap<>();

  private final Path folder;
  private final String program;
  private final InstantSource clock;

  /**
   * Who holds a port.
   *
   * @param pid process id
   * @param program what it calls itself
   * @param since when it took the port, UTC
   */
  public record Holder(long pid, String program, Instant since) {
    @Override
    public String toString() {
      return "'" + program + "' (process " + pid + ", since " + since + ")";
    }
  }

  /** A port held until closed. */
  public static final class Held implements AutoCloseable {
    private final Path file;
    private final FileChannel channel;
    private final FileLock lock;

    private Held(Path file, FileChannel channel, FileLock lock) {
      this.file = file;
      this.channel = channel;
      this.lock = lock;
    }

    /** Lets the port go; may be called twice. */
    @Override
    public synchronized void close() {
      if (channel.isOpen()) {
        try {
          channel.truncate(0);
          lock.release();
        } catch (IOException e) {
          // The operating system drops the lock with the channel in any case.
        }
        TcpLink.quietly(channel);
        OURS.remove(file);
      }
    }
  }

  /**
   * @param folder where the lock files are; made when missing
   * @param program what this program is called, for whoever is refused
   * @param clock for "since"
   */
  public PortLocks(Path folder, String program, InstantSource clock) {
    this.folder = folder.toAbsolutePath().normalize();
    this.program = Objects.requireNonNull(program, "program");
    this.clock = Objects.requireNonNull(clock, "clock");
  }

  /** The usual folder: the user's runtime folder where there is one, else the cache folder. */
  public static Path usualFolder(Map<String, String> environment, Path home) {
    String runtime = environment.getOrDefault("XDG_RUNTIME_DIR", "");
    return runtime.startsWith("/")
        ? Path.of(runtime, "coilside")
        : home.resolve(".cache").resolve("coilside").resolve("locks");
  }

  /**
   * Takes a port or says who holds it.
   *
   * @param device the port's device, links resolved
   * @throws LinkException BUSY with the holder's name, or the lock file cannot be written
   */
  public Held take(Path device) throws LinkException {
    Path file = fileOf(device);
    Holder me = new Holder(ProcessHandle.current().pid(), program, now());
    Holder other = OURS.putIfAbsent(file, me);
    if (other != null) {
      throw busy(device, Optional.of(other));
    }
    Held held = null;
    try {
      held = lock(device, file, me);
      return held;
    } finally {
      if (held == null) {
        OURS.remove(file, me);
      }
    }
  }

  private Instant now() {
    return clock.instant().truncatedTo(ChronoUnit.SECONDS);
  }

  private Held lock(Path device, Path file, Holder me) throws LinkException {
    FileChannel channel = null;
    try {
      Files.createDirectories(folder);
      channel =
          FileChannel.open(
              file, StandardOpenOption.CREATE, StandardOpenOption.READ, StandardOpenOption.WRITE);
      FileLock lock = channel.tryLock();
      if (lock == null) {
        LinkException refusal = busy(device, read(channel));
        TcpLink.quietly(channel);
        throw refusal;
      }
      channel.truncate(0);
      channel.write(ByteBuffer.wrap(text(me).getBytes(StandardCharsets.UTF_8)), 0);
      channel.force(false);
      return new Held(file, channel, lock);
    } catch (LinkException e) {
      throw e;
    } catch (IOException e) {
      if (channel != null) {
        TcpLink.quietly(channel);
      }
      throw new LinkException(
          Kind.FORBIDDEN,
          device
              + ": the lock file "
              + file
              + " cannot be written ("
              + e.getMessage()
              + "); make the folder writable for you",
          e);
    }
  }

  /** Who holds the port now, as far as its lock file tells. */
  public Optional<Holder> holder(Path device) {
    Path file = fileOf(device);
    Holder ours = OURS.get(file);
    if (ours != null) {
      return Optional.of(ours);
    }
    if (!Files.isRegularFile(file)) {
      return Optional.empty();
    }
    try (FileChannel channel =
        FileChannel.open(file, StandardOpenOption.READ, StandardOpenOption.WRITE)) {
      FileLock lock = channel.tryLock();
      if (lock != null) {
        lock.release();
        return Optional.empty();
      }
      return read(channel);
    } catch (IOException e) {
      return Optional.empty();
    }
  }

  private Path fileOf(Path device) {
    String name = device.toString().replaceAll("[^A-Za-z0-9.-]+", "_");
    return folder.resolve(name.toLowerCase(Locale.ROOT) + ".lock");
  }

  private static LinkException busy(Path device, Optional<Holder> holder) {
    return new LinkException(
        Kind.BUSY,
        device
            + " is in use by "
            + holder.map(Holder::toString).orElse("another program")
            + "; end that program first, or choose another port");
  }

  private static String text(Holder holder) {
    return "pid "
        + holder.pid()
        + "\nprogram "
        + printable(holder.program())
        + "\nsince "
        + holder.since()
        + "\n";
  }

  private static Optional<Holder> read(FileChannel channel) throws IOException {
    ByteBuffer bytes = ByteBuffer.allocate(MOST_BYTES);
    while (bytes.hasRemaining() && channel.read(bytes, bytes.position()) > 0) {
      // Until full or at the end.
    }
    return parse(new String(bytes.array(), 0, bytes.position(), StandardCharsets.UTF_8));
  }

  static Optional<Holder> parse(String text) {
    long pid = -1;
    String program = "another program";
    Instant since = Instant.EPOCH;
    try {
      for (String line : text.split("\n")) {
        if (line.startsWith("pid ")) {
          pid = Long.parseLong(line.substring(4).trim());
        } else if (line.startsWith("program ")) {
          program = printable(line.substring(8));
        } else if (line.startsWith("since ")) {
          since = Instant.parse(line.substring(6).trim());
        }
      }
    } catch (RuntimeException e) {
      return Optional.empty();
    }
    return pid < 0 ? Optional.empty() : Optional.of(new Holder(pid, program, since));
  }

  private static String printable(String text) {
    String clean = text.replaceAll("[\\p{Cntrl}\\p{Cf}]", "").trim();
    return clean.length() > 80 ? clean.substring(0, 80) : clean;
  }
}
