package coilside.board.wire;

import coilside.board.profile.SampleFormat;
import coilside.board.profile.SampleFormat.Layout;
import java.lang.invoke.MethodHandles;
import java.lang.invoke.VarHandle;
import java.nio.ByteOrder;

/**
 * Turns sample bytes into numbers in counts, and watches the level at the ADC meanwhile.
 *
 * <p>Counts are those of the profile: zero volts is 0 after offset binary has been taken off. Not
 * thread-safe: one decoder collects the level of one scan.
 */
public final class SampleDecoder {
  private static final VarHandle SHORT_LITTLE = view(short[].class, ByteOrder.LITTLE_ENDIAN);
  private static final VarHandle SHORT_BIG = view(short[].class, ByteOrder.BIG_ENDIAN);
  private static final VarHandle INT_LITTLE = view(int[].class, ByteOrder.LITTLE_ENDIAN);
  private static final VarHandle INT_BIG = view(int[].class, ByteOrder.BIG_ENDIAN);

  private final SampleFormat format;
  private double largest;
  private long clipped;
  private long notNumbers;

  public SampleDecoder(SampleFormat format) {
    this.format = format;
  }

  private static VarHandle view(Class<?> type, ByteOrder order) {
    return MethodHandles.byteArrayViewVarHandle(type, order);
  }

  /**
   * Decodes complex samples.
   *
   * @param bytes sample bytes
   * @param offset where they begin
   * @param samples how many complex samples
   * @param re gets the real parts, counts, from index 0
   * @param im gets the imaginary parts; their sign is turned where the profile says conjugated
   */
  public void complex(byte[] bytes, int offset, int samples, double[] re, double[] im) {
    int size = format.type().bytes();
    int stride = format.layout() == Layout.PLANAR ? size : 2 * size;
    int second = format.layout() == Layout.PLANAR ? samples * size : size;
    boolean swapped = format.layout() == Layout.QI;
    if (format.type() == SampleFormat.Type.I16 && format.layout() != Layout.PLANAR) {
      shortPairs(bytes, offset, samples, swapped ? im : re, swapped ? re : im);
    } else {
      component(bytes, offset + (swapped ? second : 0), stride, samples, re);
      component(bytes, offset + (swapped ? 0 : second), stride, samples, im);
    }
    if (format.conjugated()) {
      for (int k = 0; k < samples; k++) {
        im[k] = -im[k];
      }
    }
  }

  /** Decodes real samples into counts. */
  public void real(byte[] bytes, int offset, int samples, double[] into) {
    component(bytes, offset, format.type().bytes(), samples, into);
  }

  /** Largest component seen so far over full scale. */
  public double peakFraction() {
    return Math.min(1, largest / format.fullScaleCounts());
  }

  /** How many components stood at the rails so far. */
  public long clipped() {
    return clipped;
  }

  /** How many components were no finite numbers so far. */
  public long notNumbers() {
    return notNumbers;
  }

  private void component(byte[] bytes, int base, int stride, int n, double[] out) {
    switch (format.type()) {
      case I8 -> bytesOf(bytes, base, stride, n, out);
      case I16 -> shorts(bytes, base, stride, n, out);
      case I24 -> threes(bytes, base, stride, n, out);
      case I32 -> ints(bytes, base, stride, n, out);
      case F32 -> floats(bytes, base, stride, n, out);
    }
  }

  /** The usual case in one pass: a pair is read as one number. */
  private void shortPairs(byte[] bytes, int offset, int n, double[] first, double[] second) {
    int flip = format.offsetBinary() ? 0x80008000 : 0;
    boolean big = format.byteOrder() == ByteOrder.BIG_ENDIAN;
    int least = 0;
    int most = 0;
    if (big) {
      for (int k = 0, at = offset; k < n; k++, at += 4) {
        int pair = (int) INT_BIG.get(bytes, at) ^ flip;
        int a = pair >> 16;
        int b = (short) pair;
        first[k] = a;
        second[k] = b;
        most = Math.max(most, Math.max(a, b));
        least = Math.min(least, Math.min(a, b));
      }
    } else {
      for (int k = 0, at = offset; k < n; k++, at += 4) {
        int pair = (int) INT_LITTLE.get(bytes, at) ^ flip;
        int a = (short) pair;
        int b = pair >> 16;
        first[k] = a;
        second[k] = b;
        most = Math.max(most, Math.max(a, b));
        least = Math.min(least, Math.min(a, b));
      }
    }
    double peak = Math.max(most, -least);
    largest = Math.max(largest, peak);
    if (peak >= format.fullScaleCounts()) {
      countClipped(first, n);
      countClipped(second, n);
    }
  }

  private void bytesOf(byte[] bytes, int base, int stride, int n, double[] out) {
    int flip = format.offsetBinary() ? 0x80 : 0;
    for (int k = 0, at = base; k < n; k++, at += stride) {
      out[k] = (byte) (bytes[at] ^ flip);
    }
    level(out, n);
  }

  private void shorts(byte[] bytes, int base, int stride, int n, double[] out) {
    int flip = format.offsetBinary() ? 0x8000 : 0;
    if (format.byteOrder() == ByteOrder.BIG_ENDIAN) {
      for (int k = 0, at = base; k < n; k++, at += stride) {
        out[k] = (short) ((short) SHORT_BIG.get(bytes, at) ^ flip);
      }
    } else {
      for (int k = 0, at = base; k < n; k++, at += stride) {
        out[k] = (short) ((short) SHORT_LITTLE.get(bytes, at) ^ flip);
      }
    }
    level(out, n);
  }

  private void threes(byte[] bytes, int base, int stride, int n, double[] out) {
    int flip = format.offsetBinary() ? 0x800000 : 0;
    boolean big = format.byteOrder() == ByteOrder.BIG_ENDIAN;
    for (int k = 0, at = base; k < n; k++, at += stride) {
      int high = bytes[big ? at : at + 2];
      int low = bytes[big ? at + 2 : at];
      int raw = high << 16 & 0xff0000 | (bytes[at + 1] & 0xff) << 8 | low & 0xff;
      out[k] = (raw ^ flip) << 8 >> 8;
    }
    level(out, n);
  }

  private void ints(byte[] bytes, int base, int stride, int n, double[] out) {
    int flip = format.offsetBinary() ? 0x80000000 : 0;
    VarHandle view = format.byteOrder() == ByteOrder.BIG_ENDIAN ? INT_BIG : INT_LITTLE;
    for (int k = 0, at = base; k < n; k++, at += stride) {
      out[k] = (int) view.get(bytes, at) ^ flip;
    }
    level(out, n);
  }

  private void floats(byte[] bytes, int base, int stride, int n, double[] out) {
    VarHandle view = format.byteOrder() == ByteOrder.BIG_ENDIAN ? INT_BIG : INT_LITTLE;
    for (int k = 0, at = base; k < n; k++, at += stride) {
      float x = Float.intBitsToFloat((int) view.get(bytes, at));
      if (!Float.isFinite(x)) {
        notNumbers++;
        x = 0;
      }
      out[k] = x;
    }
    level(out, n);
  }

  private void level(double[] out, int n) {
    double most = 0;
    for (int k = 0; k < n; k++) {
      most = Math.max(most, Math.abs(out[k]));
    }
    largest = Math.max(largest, most);
    if (most >= format.fullScaleCounts()) {
      countClipped(out, n);
    }
  }

  private void countClipped(double[] out, int n) {
    double rail = format.fullScaleCounts();
    for (int k = 0; k < n; k++) {
      if (Math.abs(out[k]) >= rail) {
        clipped++;
      }
    }
  }
}
