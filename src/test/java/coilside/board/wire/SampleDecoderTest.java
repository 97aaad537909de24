package coilside.board.wire;

import static org.junit.jupiter.api.Assertions.assertArrayEquals;
import static org.junit.jupiter.api.Assertions.assertEquals;

import coilside.board.profile.SampleFormat;
import coilside.board.profile.SampleFormat.Layout;
import coilside.board.profile.SampleFormat.Type;
import java.nio.ByteBuffer;
import java.nio.ByteOrder;
import java.util.Optional;
import java.util.OptionalDouble;
import org.junit.jupiter.api.Test;

/** Sample bytes worked out by hand or by the platform's own byte buffers. */
class SampleDecoderTest {
  private static SampleFormat format(
      Type type, ByteOrder order, boolean offsetBinary, Layout layout, boolean conjugated) {
    double rail = type == Type.F32 ? 1 : Math.pow(2, 8 * type.bytes() - 1) - 1;
    return new SampleFormat(
        type,
        order,
        offsetBinary,
        layout,
        1,
        rail,
        conjugated,
        0,
        0,
        layout == Layout.REAL
            ? Optional.of(new SampleFormat.RealSampling(1e6, OptionalDouble.of(1e5)))
            : Optional.empty());
  }

  private static double[][] decode(SampleFormat format, int n, int... bytes) {
    byte[] raw = new byte[bytes.length + 1];
    for (int i = 0; i < bytes.length; i++) {
      raw[i + 1] = (byte) bytes[i];
    }
    double[][] out = new double[2][n];
    new SampleDecoder(format).complex(raw, 1, n, out[0], out[1]);
    return out;
  }

  @Test
  void eightBits() {
    double[][] out =
        decode(
            format(Type.I8, ByteOrder.LITTLE_ENDIAN, false, Layout.IQ, false),
            2,
            1,
            0xff,
            127,
            0x80);
    assertArrayEquals(new double[] {1, 127}, out[0]);
    assertArrayEquals(new double[] {-1, -128}, out[1]);
    out = decode(format(Type.I8, ByteOrder.LITTLE_ENDIAN, true, Layout.QI, true), 1, 0x81, 0x7f);
    assertArrayEquals(new double[] {-1}, out[0]);
    assertArrayEquals(new double[] {-1}, out[1]);
  }

  @Test
  void sixteenBitsEitherEndian() {
    double[][] out =
        decode(
            format(Type.I16, ByteOrder.BIG_ENDIAN, false, Layout.IQ, false),
            1,
            0x12,
            0x34,
            0xff,
            0xfe);
    assertArrayEquals(new double[] {0x1234}, out[0]);
    assertArrayEquals(new double[] {-2}, out[1]);
    out =
        decode(
            format(Type.I16, ByteOrder.LITTLE_ENDIAN, true, Layout.IQ, false),
            1,
            0x00,
            0x80,
            0x00,
            0x00);
    assertArrayEquals(new double[] {0}, out[0]);
    assertArrayEquals(new double[] {-32768}, out[1]);
  }

  @Test
  void planarHoldsAllOfOneFirst() {
    double[][] out =
        decode(
            format(Type.I16, ByteOrder.BIG_ENDIAN, false, Layout.PLANAR, false),
            2,
            0,
            1,
            0,
            2,
            0,
            3,
            0,
            4);
    assertArrayEquals(new double[] {1, 2}, out[0]);
    assertArrayEquals(new double[] {3, 4}, out[1]);
  }

  @Test
  void twentyFourBits() {
    double[][] out =
        decode(
            format(Type.I24, ByteOrder.BIG_ENDIAN, false, Layout.IQ, false),
            1,
            0x01,
            0x02,
            0x03,
            0xff,
            0xff,
            0xff);
    assertArrayEquals(new double[] {0x010203}, out[0]);
    assertArrayEquals(new double[] {-1}, out[1]);
    out =
        decode(
            format(Type.I24, ByteOrder.LITTLE_ENDIAN, true, Layout.IQ, false),
            1,
            0x00,
            0x00,
            0x80,
            0x00,
            0x00,
            0x00);
    assertArrayEquals(new double[] {0}, out[0]);
    assertArrayEquals(new double[] {-8388608}, out[1]);
  }

  @Test
  void thirtyTwoBitsAndFloats() {
    for (ByteOrder order : new ByteOrder[] {ByteOrder.BIG_ENDIAN, ByteOrder.LITTLE_ENDIAN}) {
      ByteBuffer bytes = ByteBuffer.allocate(8).order(order);
      bytes.putInt(-123456789).putInt(Integer.MAX_VALUE);
      double[][] out = new double[2][1];
      SampleDecoder decoder = new SampleDecoder(format(Type.I32, order, false, Layout.IQ, false));
      decoder.complex(bytes.array(), 0, 1, out[0], out[1]);
      assertEquals(-123456789, out[0][0]);
      assertEquals(Integer.MAX_VALUE, out[1][0]);
      assertEquals(1, decoder.clipped());

      bytes.clear();
      bytes.putFloat(0.25f).putFloat(Float.NaN);
      decoder = new SampleDecoder(format(Type.F32, order, false, Layout.IQ, false));
      decoder.complex(bytes.array(), 0, 1, out[0], out[1]);
      assertEquals(0.25, out[0][0]);
      assertEquals(0, out[1][0]);
      assertEquals(1, decoder.notNumbers());
      assertEquals(0.25, decoder.peakFraction());
    }
  }

  @Test
  void bothRailsCountAsClipped() {
    SampleDecoder decoder =
        new SampleDecoder(format(Type.I16, ByteOrder.BIG_ENDIAN, false, Layout.IQ, false));
    byte[] bytes = {0x7f, (byte) 0xff, (byte) 0x80, 0, 0x7f, (byte) 0xfe, 0, 0};
    decoder.complex(bytes, 0, 2, new double[2], new double[2]);
    assertEquals(2, decoder.clipped());
    assertEquals(1, decoder.peakFraction());
  }

  @Test
  void realSamples() {
    double[] out = new double[2];
    new SampleDecoder(format(Type.I16, ByteOrder.BIG_ENDIAN, false, Layout.REAL, false))
        .real(new byte[] {0, 5, (byte) 0xff, (byte) 0xfb}, 0, 2, out);
    assertArrayEquals(new double[] {5, -5}, out);
  }
}
