package coilside.board.simulated;

import coilside.board.profile.DeviceProfile;
import coilside.board.profile.SampleBlocks;
import coilside.board.profile.SampleBlocks.BlockChecksum;
import coilside.board.simulated.FirmwareReceiver.Counts;
import java.io.ByteArrayOutputStream;
import java.nio.ByteOrder;
import java.nio.charset.StandardCharsets;
import java.util.Arrays;
import java.util.HashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;

/** Wraps sample bytes the way the profile says, and spoils one now and then where so wanted. */
final class FirmwareBlocks {
  private final SampleBlocks blocks;
  private final FirmwareDialect dialect;
  private final FirmwareSamples samples;
  private int sent;

  FirmwareBlocks(DeviceProfile profile, FirmwareDialect dialect) {
    this.blocks = profile.blocks();
    this.dialect = dialect;
    this.samples = new FirmwareSamples(profile.samples());
  }

  boolean perWindow() {
    return blocks.per() == SampleBlocks.Per.WINDOW;
  }

  /** The bytes of one window in a block of its own. */
  byte[] window(Counts counts, int window, FirmwareFaults faults) {
    return block(samples.encode(counts), window, faults);
  }

  /** The bytes of all windows in one block. */
  byte[] scan(List<Counts> windows, FirmwareFaults faults) {
    ByteArrayOutputStream all = new ByteArrayOutputStream();
    for (Counts counts : windows) {
      all.writeBytes(samples.encode(counts));
    }
    return block(all.toByteArray(), 0, faults);
  }

  /** What follows the last block of a scan. */
  byte[] endMark() {
    return blocks.endMark().map(e -> dialect.wrap(dialect.say(e, Map.of()))).orElse(new byte[0]);
  }

  private byte[] block(byte[] data, int window, FirmwareFaults faults) {
    sent++;
    byte[] held =
        due(faults.shortOneBlockIn())
            ? Arrays.copyOf(data, Math.max(0, data.length - samples.bytesPerSample()))
            : data;
    boolean damage = due(faults.damageOneBlockIn());
    byte[] whole =
        blocks.kind() == SampleBlocks.Kind.FRAME
            ? frames(held, window, damage)
            : wrapped(held, window, damage);
    return due(faults.cutOneBlockIn())
        ? Arrays.copyOf(whole, whole.length - Math.max(1, whole.length / 4))
        : whole;
  }

  private boolean due(int oneIn) {
    return oneIn > 0 && sent % oneIn == 0;
  }

  private byte[] wrapped(byte[] data, int window, boolean damage) {
    byte[] header = header(data, window);
    ByteArrayOutputStream out = new ByteArrayOutputStream(data.length + 64);
    out.writeBytes(header);
    out.writeBytes(data);
    if (blocks.checksum().isPresent()) {
      out.writeBytes(after(blocks.checksum().get(), header.length, out.toByteArray()));
    }
    out.writeBytes(blocks.afterBlock().getBytes(StandardCharsets.ISO_8859_1));
    byte[] whole = out.toByteArray();
    if (damage) {
      whole[header.length + data.length / 2] ^= 0x04;
    }
    return whole;
  }

  private byte[] header(byte[] data, int window) {
    if (blocks.kind() == SampleBlocks.Kind.BLOCK) {
      String length = Integer.toString(data.length);
      return ("#" + length.length() + length).getBytes(StandardCharsets.ISO_8859_1);
    }
    Map<String, Object> said = new HashMap<>();
    said.put("bytes", data.length);
    said.put("points", data.length / samples.bytesPerSample());
    said.put("window", window);
    blocks
        .checksum()
        .filter(c -> c.place() == BlockChecksum.Place.HEADER)
        .ifPresent(c -> said.put("checksum", hex(c, data, 0, data.length)));
    return dialect.wrap(dialect.say(blocks.header().orElseThrow(), said));
  }

  private static String hex(BlockChecksum checksum, byte[] bytes, int offset, int length) {
    long sum = FirmwareCrc.of(checksum.kind(), bytes, offset, length);
    return String.format(Locale.ROOT, "%0" + 2 * checksum.kind().bytes() + "X", sum);
  }

  private static byte[] after(BlockChecksum checksum, int headerLength, byte[] soFar) {
    int from = checksum.covers() == BlockChecksum.Covers.SAMPLES ? headerLength : 0;
    int length = soFar.length - from;
    long sum = FirmwareCrc.of(checksum.kind(), soFar, from, length);
    int width = checksum.kind().bytes();
    String tail =
        switch (checksum.place()) {
          case HEADER -> "";
          case AFTER_LITTLE -> FirmwareNumbers.bytes(sum, width, ByteOrder.LITTLE_ENDIAN);
          case AFTER_BIG -> FirmwareNumbers.bytes(sum, width, ByteOrder.BIG_ENDIAN);
          case AFTER_HEX -> hex(checksum, soFar, from, length);
        };
    return tail.getBytes(StandardCharsets.ISO_8859_1);
  }

  private byte[] frames(byte[] data, int window, boolean damage) {
    ByteArrayOutputStream out = new ByteArrayOutputStream(data.length + 1024);
    int size = samples.bytesPerSample();
    int most = Math.max(1, blocks.frameSamples());
    int count = data.length / size;
    for (int first = 0; first < count; first += most) {
      int n = Math.min(most, count - first);
      String payload = new String(data, first * size, n * size, StandardCharsets.ISO_8859_1);
      Map<String, Object> said = new HashMap<>();
      said.put("window", window);
      said.put("first", first);
      said.put("samples", payload);
      byte[] frame = dialect.wrap(dialect.say(blocks.header().orElseThrow(), said));
      if (damage && first + most >= count) {
        spoil(frame);
      }
      out.writeBytes(frame);
    }
    return out.toByteArray();
  }

  /** Turns a bit of a frame so that no zero byte appears in it. */
  private static void spoil(byte[] frame) {
    for (int k = frame.length / 2; k < frame.length - 1; k++) {
      if ((frame[k] ^ 0x04) != 0) {
        frame[k] ^= 0x04;
        return;
      }
    }
  }
}
