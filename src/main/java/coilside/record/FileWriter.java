package coilside.record;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.channels.FileChannel;
import java.nio.channels.WritableByteChannel;
import java.nio.charset.StandardCharsets;
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

  /** Writes and syncs a new file; an older one of the same name is replaced. */
  void write(Path file, Body body) throws IOException {
    try (FileChannel out =
        FileChannel.open(
            file,
            StandardOpenOption.CREATE,
            StandardOpenOption.TRUNCATE_EXISTING,
            StandardOpenOption.WRITE)) {
      body.writeTo(out);
      out.force(true);
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
    try (FileChannel channel = FileChannel.open(folder, StandardOpenOption.READ)) {
      channel.force(true);
    } catch (java.nio.file.AccessDeniedException e) {
      // Some systems do not open folders; their renames are ordered by the file system itself.
      return;
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
