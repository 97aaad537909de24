package coilside.board.driver;

import coilside.board.driver.Conformance.Row.Verdict;
import coilside.board.profile.SampleFormat;
import coilside.board.profile.SampleFormat.Layout;
import coilside.board.wire.SampleDecoder;
import java.nio.ByteOrder;

/**
 * Judges from a capture with the transmitter off whether byte order and sign convention of the
 * profile make sense: noise around zero volts is small and centred when read rightly, and fills the
 * whole range, or sits at a rail, when not.
 */
record SampleSanity(String expected, String seen, Verdict verdict) {
  private static final String EXPECTED = "small numbers around zero";

  static SampleSanity of(SampleFormat format, byte[] block) {
    if (block.length < 64 * format.type().bytes()) {
      return new SampleSanity(EXPECTED, "too few samples to tell", Verdict.SKIPPED);
    }
    double[] asSaid = numbers(format, format.byteOrder(), format.offsetBinary(), block);
    double rms = rms(asSaid);
    if (format.type() == SampleFormat.Type.F32) {
      double turned = rms(numbers(format, other(format.byteOrder()), false, block));
      boolean odd = !(rms <= 10 * format.fullScaleCounts()) || (rms < 1e-20 && turned > 1e-12);
      return new SampleSanity(
          EXPECTED, "an effective value of " + text(rms), odd ? Verdict.BAD : Verdict.GOOD);
    }
    if (format.type().bytes() > 1) {
      double turned = rms(numbers(format, other(format.byteOrder()), format.offsetBinary(), block));
      if (turned < rms / 4) {
        return new SampleSanity(
            EXPECTED,
            "with the other byte order the effective value would be "
                + text(turned)
                + " counts instead of "
                + text(rms)
                + ": samples.byte_order is probably wrong",
            Verdict.BAD);
      }
    }
    double otherSign = rms(numbers(format, format.byteOrder(), !format.offsetBinary(), block));
    if (otherSign < rms / 4) {
      return new SampleSanity(
          EXPECTED,
          "the samples sit at half the range: samples.offset_binary is probably wrong",
          Verdict.BAD);
    }
    return new SampleSanity(
        EXPECTED, "an effective value of " + text(rms) + " counts", Verdict.GOOD);
  }

  private static ByteOrder other(ByteOrder order) {
    return order == ByteOrder.BIG_ENDIAN ? ByteOrder.LITTLE_ENDIAN : ByteOrder.BIG_ENDIAN;
  }

  private static double[] numbers(
      SampleFormat f, ByteOrder order, boolean offsetBinary, byte[] block) {
    SampleFormat plain =
        new SampleFormat(
            f.type(),
            order,
            offsetBinary,
            Layout.REAL,
            1,
            f.fullScaleCounts(),
            false,
            0,
            0,
            f.real());
    double[] out = new double[block.length / f.type().bytes()];
    new SampleDecoder(plain).real(block, 0, out.length, out);
    return out;
  }

  private static double rms(double[] x) {
    double sum = 0;
    for (double v : x) {
      sum += v * v;
    }
    return Math.sqrt(sum / x.length);
  }

  private static String text(double x) {
    return String.format(java.util.Locale.ROOT, "%.3g", x);
  }
}
