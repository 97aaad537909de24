package coilside.board.simulated;

import coilside.board.profile.SampleFormat;
import coilside.board.simulated.FirmwareReceiver.Counts;
import java.nio.ByteOrder;

/** ADC counts as bytes: rounded, clipped at the rails, in the profile's number type and order. */
final class FirmwareSamples {
  private final SampleFormat format;
  private final double top;
  private final double bottom;

  FirmwareSamples(SampleFormat format) {
    this.format = format;
    boolean real = format.type() == SampleFormat.Type.F32;
    double range = real ? Double.MAX_VALUE : Math.pow(2, 8 * format.type().bytes() - 1);
    this.top = Math.min(format.fullScaleCounts(), real ? range : range - 1);
    this.bottom =
        Math.max(real ? -format.fullScaleCounts() : -format.fullScaleCounts() - 1, -range);
  }

  int bytesPerSample() {
    return format.bytesPerSample();
  }

  /** The bytes of one window. */
  byte[] encode(Counts counts) {
    int n = counts.i().length;
    byte[] out = new byte[n * format.bytesPerSample()];
    int width = format.type().bytes();
    for (int k = 0; k < n; k++) {
      double i = counts.i()[k];
      double q = counts.q().length == 0 ? 0 : counts.q()[k];
      if (format.conjugated()) {
        q = -q;
      }
      switch (format.layout()) {
        case IQ -> {
          put(out, 2 * k * width, i);
          put(out, (2 * k + 1) * width, q);
        }
        case QI -> {
          put(out, 2 * k * width, q);
          put(out, (2 * k + 1) * width, i);
        }
        case PLANAR -> {
          put(out, k * width, i);
          put(out, (n + k) * width, q);
        }
        case REAL -> put(out, k * width, i);
        default -> throw new IllegalStateException("layout " + format.layout());
      }
    }
    return out;
  }

  private void put(byte[] out, int at, double count) {
    int width = format.type().bytes();
    long bits;
    if (format.type() == SampleFormat.Type.F32) {
      bits = Float.floatToRawIntBits((float) Math.max(bottom, Math.min(top, count)));
    } else {
      bits = (long) Math.max(bottom, Math.min(top, Math.rint(count)));
      if (format.offsetBinary()) {
        bits += 1L << (8 * width - 1);
      }
    }
    boolean big = format.byteOrder() == ByteOrder.BIG_ENDIAN;
    for (int b = 0; b < width; b++) {
      out[at + (big ? width - 1 - b : b)] = (byte) (bits >>> 8 * b);
    }
  }
}
