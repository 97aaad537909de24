package coilside.terminal;

import java.io.FilterOutputStream;
import java.io.IOException;
import java.io.OutputStream;

/** Counts the bytes that go to the terminal. */
final class CountingOutput extends FilterOutputStream {
  private long bytes;

  CountingOutput(OutputStream out) {
    super(out);
  }

  long bytes() {
    return bytes;
  }

  @Override
  public void write(int b) throws IOException {
    out.write(b);
    bytes++;
  }

  @Override
  public void write(byte[] b, int offset, int length) throws IOException {
    out.write(b, offset, length);
    bytes += length;
  }
}
