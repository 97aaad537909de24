package coilside.benchmark;

import coilside.board.profile.SampleFormat;
import coilside.board.wire.SampleDecoder;
import java.nio.ByteOrder;
import java.util.Optional;
import java.util.Random;
import java.util.concurrent.TimeUnit;
import org.openjdk.jmh.annotations.Benchmark;
import org.openjdk.jmh.annotations.BenchmarkMode;
import org.openjdk.jmh.annotations.Fork;
import org.openjdk.jmh.annotations.Measurement;
import org.openjdk.jmh.annotations.Mode;
import org.openjdk.jmh.annotations.OutputTimeUnit;
import org.openjdk.jmh.annotations.Scope;
import org.openjdk.jmh.annotations.Setup;
import org.openjdk.jmh.annotations.State;
import org.openjdk.jmh.annotations.Warmup;

/**
 * Decoding a block of 65536 i16 complex samples (262144 bytes), against copying the same bytes. One
 * decode a microsecond would be 262 GB/s; 200 MB/s is 763 decodes a second.
 */
@State(Scope.Benchmark)
@BenchmarkMode(Mode.Throughput)
@OutputTimeUnit(TimeUnit.SECONDS)
@Warmup(iterations = 3, time = 1)
@Measurement(iterations = 5, time = 1)
@Fork(1)
public class BlockDecodeBenchmark {
  private static final int POINTS = 65_536;
  private final byte[] bytes = new byte[4 * POINTS];
  private final byte[] copy = new byte[4 * POINTS];
  private final double[] re = new double[POINTS];
  private final double[] im = new double[POINTS];
  private SampleFormat format;

  @Setup
  public void fill() {
    Random random = new Random(1);
    for (int k = 0; k < bytes.length; k += 2) {
      int count = (int) Math.rint(3000 * random.nextGaussian());
      bytes[k] = (byte) (count >> 8);
      bytes[k + 1] = (byte) count;
    }
    format =
        new SampleFormat(
            SampleFormat.Type.I16,
            ByteOrder.BIG_ENDIAN,
            false,
            SampleFormat.Layout.IQ,
            30.5e-6,
            32_767,
            false,
            0,
            0,
            Optional.empty());
  }

  @Benchmark
  public double decodeBigEndianPairs() {
    SampleDecoder decoder = new SampleDecoder(format);
    decoder.complex(bytes, 0, POINTS, re, im);
    return decoder.peakFraction();
  }

  @Benchmark
  public byte copyOnly() {
    System.arraycopy(bytes, 0, copy, 0, bytes.length);
    return copy[7];
  }
}
