package coilside.record;

import coilside.signal.Fid;
import java.io.IOException;
import java.io.OutputStream;
import java.nio.ByteBuffer;
import java.nio.ByteOrder;
import java.nio.charset.StandardCharsets;
import java.util.List;

/**
 * FIDs as a NumPy array file, format version 1.0: little-endian complex128, volts. One FID gives
 * shape (points,), several of equal length (windows, points).
 */
final class NpyWriter {
  private static final byte[] MAGIC = {(byte) 0x93, 'N', 'U', 'M', 'P', 'Y', 1, 0};
  private static final int ALIGNMENT = 64;

  private NpyWriter() {}

  static void write(List<Fid> rows, OutputStream out) throws IOException {
    int points = rows.get(0).points();
    String shape = rows.size() == 1 ? "(" + points + ",)" : "(" + rows.size() + ", " + points + ")";
    String dictionary = "{'descr': '<c16', 'fortran_order': False, 'shape': " + shape + ", }";
    int bare = MAGIC.length + 2 + dictionary.length() + 1;
    int padding = (ALIGNMENT - bare % ALIGNMENT) % ALIGNMENT;
    String header = dictionary + " ".repeat(padding) + "\n";
    out.write(MAGIC);
    out.write(header.length() & 0xff);
    out.write(header.length() >> 8);
    out.write(header.getBytes(StandardCharsets.US_ASCII));
    ByteBuffer sample = ByteBuffer.allocate(16).order(ByteOrder.LITTLE_ENDIAN);
    for (Fid fid : rows) {
      for (int k = 0; k < points; k++) {
        sample.clear();
        sample.putDouble(fid.re(k)).putDouble(fid.im(k));
        out.write(sample.array());
      }
    }
  }
}
