package coilside.record;

import coilside.bench.KeepException;
import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.channels.FileChannel;
import java.nio.channels.FileLock;
import java.nio.channels.OverlappingFileLockException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.nio.file.StandardOpenOption;
import java.time.Instant;
import java.time.temporal.ChronoUnit;
import java.util.HashMap;
import java.util.Map;

/**
 * The right to write one bench record: a locked file that says who holds it. The system gives the
 * lock back when its holder ends, however it ends; the file itself may stay.
 */
final class RecordLock implements AutoCloseable {
  static final String FILE_NAME = "bench-record.lock";

  /**
   * Held in this process, by real path. Looked at before the file is touched: closing any channel
   * on it would give back the lock this process holds.
   */
  private static final Map<Path, String> HELD_HERE = new HashMap<>();

  private final Path key;
  private final FileChannel channel;
  private final FileLock lock;

  private RecordLock(Path key, FileChannel channel, FileLock lock) {
    this.key = key;
    this.channel = channel;
    this.lock = lock;
  }

  static RecordLock take(Path folder, Instant now) throws KeepException {
    synchronized (HELD_HERE) {
      Path file = folder.resolve(FILE_NAME);
      try {
        Path key = folder.toRealPath();
        String here = HELD_HERE.get(key);
        if (here != null) {
          throw refused(folder, here);
        }
        FileChannel channel =
            FileChannel.open(
                file, StandardOpenOption.CREATE, StandardOpenOption.READ, StandardOpenOption.WRITE);
        try {
          FileLock lock = channel.tryLock();
          if (lock == null) {
            String holder = read(channel);
            channel.close();
            throw refused(folder, holder);
          }
          String text =
              "process "
                  + ProcessHandle.current().pid()
                  + " since "
                  + now.truncatedTo(ChronoUnit.SECONDS);
          channel.truncate(0);
          channel.write(ByteBuffer.wrap(text.getBytes(StandardCharsets.UTF_8)), 0);
          HELD_HERE.put(key, text);
          return new RecordLock(key, channel, lock);
        } catch (IOException | OverlappingFileLockException e) {
          channel.close();
          throw e;
        }
      } catch (IOException e) {
        throw Trouble.with("cannot lock the bench record by", file, e);
      }
    }
  }

  private static RecordHeld refused(Path folder, String holder) {
    return new RecordHeld(
        folder, holder.isBlank() ? "another process" : Words.oneLine(holder, 100));
  }

  private static String read(FileChannel channel) throws IOException {
    ByteBuffer buffer = ByteBuffer.allocate(200);
    channel.read(buffer, 0);
    return new String(buffer.array(), 0, buffer.position(), StandardCharsets.UTF_8);
  }

  @Override
  public void close() {
    synchronized (HELD_HERE) {
      HELD_HERE.remove(key);
      try {
        lock.release();
        channel.close();
      } catch (IOException e) {
        // The system gives the lock back at the latest when the process ends.
        return;
      }
    }
  }
}
