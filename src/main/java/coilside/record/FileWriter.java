package coilside.record;

import java.io.IOException;
import java.io.RandomAccessFile;
import java.nio.ByteBuffer;
import java.nio.channels.ClosedByInterruptException;
import java.nio.channels.FileChannel;
import java.nio.channels.WritableByteChannel;
import java.nio.charset.StandardCharsets;
import java.nio.file.AccessDeniedException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardCopyOption;
import java.nio.file.StandardOpenOption;
import java.security.MessageDigest;
import java.security.NoSuchAlgorithmException;
import java.util.HexFormat;

/** Writes files so that they survive: whole, synced, then renamed. Not final: tests let it fail. */
class FileWriter {
  /** Writes all bytes of a file, or fails. */
  interface Body {
    void writeTo(WritableByteChannel out) throws IOException;
  }

  /**
   * Writes and syncs a new file; an older one of the same name is replaced. An interrupt of the
   * calling thread does not disturb it, as it would a file channel.
   */
  void write(Path file, Body body) throws IOException {
    try (RandomAccessFile out = new RandomAccessFile(file.toFile(), "rw")) {
      out.setLength(0);
      body.writeTo(new Uninterrupted(out));
      out.getFD().sync();
    }
  }

  /** The writing end of an open file. */
  private record Uninterrupted(RandomAccessFile file) implements WritableByteChannel {
    @Override
    public int write(ByteBuffer bytes) throws IOException {
      int n = bytes.remaining();
      file.write(bytes.array(), bytes.arrayOffset() + bytes.position(), n);
      bytes.position(bytes.limit());
      return n;
    }

    @Override
    public boolean isOpen() {
      return true;
    }

    @Override
    public void close() throws IOException {
      file.close();
    }
  }

  /** Writes samples; gives back their SHA-512 in hex. */
  final String writeData(Path file, CaptureData data) throws IOException {
    MessageDigest digest = sha512();
    write(
        file,
        out -> {
          for (ByteBuffer chunk : data.chunks()) {
            digest.update(chunk.duplicate());
            writeFully(out, chunk);
          }
        });
    return HexFormat.of().formatHex(digest.digest());
  }

  final void writeText(Path file, String text) throws IOException {
    write(file, out -> writeFully(out, ByteBuffer.wrap(text.getBytes(StandardCharsets.UTF_8))));
  }

  void rename(Path from, Path to) throws IOException {
    Files.move(from, to, StandardCopyOption.ATOMIC_MOVE);
  }

  /** Makes the names in a folder survive a power cut; where the system cannot, nothing happens. */
  void syncFolder(Path folder) throws IOException {
    boolean interrupted = Thread.interrupted();
    try {
      while (true) {
        try (FileChannel channel = FileChannel.open(folder, StandardOpenOption.READ)) {
          channel.force(true);
          return;
        } catch (ClosedByInterruptException e) {
          interrupted = Thread.interrupted() || interrupted;
        } catch (AccessDeniedException e) {
          // Some systems do not open folders; their renames are ordered by the file system itself.
          return;
        }
      }
    } finally {
      if (interrupted) {
        Thread.currentThread().interrupt();
      }
    }
  }

  static void deleteQuietly(Path file) {
    try {
      Files.deleteIfExists(file);
    } catch (IOException e) {
      // It is hidden and is cleared at the next opening.
      return;
    }
  }

  static MessageDigest sha512() {
    try {
      return MessageDigest.getInstance("SHA-512");
    } catch (NoSuchAlgorithmException e) {
      throw new IllegalStateException("every Java platform has SHA-512", e);
    }
  }

  private static void writeFully(WritableByteChannel out, ByteBuffer buffer) throws IOException {
    while (buffer.hasRemaining()) {
      out.write(buffer);
    }
  }
}
