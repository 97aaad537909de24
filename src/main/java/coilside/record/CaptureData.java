package coilside.record;

import coilside.bench.Capture;
import coilside.bench.KeepException;
import coilside.signal.Fid;
import coilside.signal.Scan;
import java.nio.ByteBuffer;
import java.nio.ByteOrder;
import java.util.ArrayList;
import java.util.Iterator;
import java.util.List;
import java.util.NoSuchElementException;

/**
 * The samples of a capture as the bytes of a SigMF dataset: cf64_le, I then Q, all receive windows
 * one after the other. Eight bytes a component, so that what is read again is what was measured, to
 * the last bit.
 */
final class CaptureData {
  static final String DATATYPE = "cf64_le";
  static final int BYTES_PER_SAMPLE = 16;
  private static final int CHUNK_SAMPLES = 4096;

  private final List<Fid> windows;

  private CaptureData(List<Fid> windows) {
    this.windows = windows;
  }

  static CaptureData of(Capture capture) throws KeepException {
    List<Fid> windows = new ArrayList<>();
    for (int scan = 0; scan < capture.scans().size(); scan++) {
      for (Fid fid : capture.scans().get(scan).windows()) {
        requireNumbers(fid, scan);
        windows.add(fid);
      }
    }
    return new CaptureData(windows);
  }

  private static void requireNumbers(Fid fid, int scan) throws KeepException {
    for (int k = 0; k < fid.points(); k++) {
      if (!Double.isFinite(fid.re(k)) || !Double.isFinite(fid.im(k))) {
        throw new KeepException(
            "sample "
                + k
                + " of scan "
                + scan
                + " is not a finite number, so the capture was not kept: the board or its profile"
                + " delivers damaged samples; check the sample format in the profile");
      }
    }
  }

  /** All samples, a few at a time, each buffer to be used before the next is asked for. */
  Iterable<ByteBuffer> chunks() {
    return Chunks::new;
  }

  private final class Chunks implements Iterator<ByteBuffer> {
    private final ByteBuffer buffer =
        ByteBuffer.allocate(CHUNK_SAMPLES * BYTES_PER_SAMPLE).order(ByteOrder.LITTLE_ENDIAN);
    private int window;
    private int from;

    @Override
    public boolean hasNext() {
      return window < windows.size();
    }

    @Override
    public ByteBuffer next() {
      if (!hasNext()) {
        throw new NoSuchElementException();
      }
      buffer.clear();
      Fid fid = windows.get(window);
      int to = Math.min(fid.points(), from + CHUNK_SAMPLES);
      for (int k = from; k < to; k++) {
        buffer.putDouble(fid.re(k)).putDouble(fid.im(k));
      }
      from = to;
      if (from == fid.points()) {
        window++;
        from = 0;
      }
      return buffer.flip();
    }
  }

  static long samples(Scan scan) {
    return scan.windows().stream().mapToLong(Fid::points).sum();
  }
}
