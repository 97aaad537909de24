package coilside.board.profile;

import java.nio.ByteOrder;
import java.util.Optional;
import java.util.OptionalDouble;

/**
 * What the sample bytes mean.
 *
 * @param type number type of one component
 * @param byteOrder little or big endian
 * @param offsetBinary true when the integer is unsigned with zero volts at half its range
 * @param layout I-Q, Q-I, planar, or real
 * @param voltsPerCount voltage at the ADC for one count, V (for f32: for the number 1); divided by
 *     10^(gain/20) it is the voltage at the receiver input
 * @param fullScaleCounts count at the positive rail, for the level shown and clipping
 * @param conjugated true when the board delivers I - iQ where the convention of the signal package
 *     wants I + iQ
 * @param lostSamples samples (complex points, or real samples) at the start of each window that the
 *     board's receive filter spoils: they are sent, and thrown away
 * @param filterDelaySamples group delay of that filter, in the same samples: sample k shows what
 *     was at the input {@code filterDelaySamples} samples earlier
 * @param real for real samples: rate and intermediate frequency
 */
public record SampleFormat(
    Type type,
    ByteOrder byteOrder,
    boolean offsetBinary,
    Layout layout,
    double voltsPerCount,
    double fullScaleCounts,
    boolean conjugated,
    int lostSamples,
    double filterDelaySamples,
    Optional<RealSampling> real) {
  /** Number type of one component. */
  public enum Type {
    I8(1),
    I16(2),
    I24(3),
    I32(4),
    F32(4);

    private final int bytes;

    Type(int bytes) {
      this.bytes = bytes;
    }

    public int bytes() {
      return bytes;
    }
  }

  /** Order of components. */
  public enum Layout {
    /** I0 Q0 I1 Q1 ... */
    IQ(2),
    /** Q0 I0 Q1 I1 ... */
    QI(2),
    /** All I of the window, then all Q. */
    PLANAR(2),
    /** One real number a sample. */
    REAL(1);

    private final int components;

    Layout(int components) {
      this.components = components;
    }

    public int components() {
      return components;
    }
  }

  /**
   * Real samples, which the host mixes down, filters and decimates.
   *
   * @param rateHertz samples a second; every dwell time is a whole number of samples
   * @param intermediateHertz where the carrier appears among the real samples, Hz: sample n of a
   *     window is Re(s exp(2 pi i f n / rate)), phase zero at the window's first sample. Empty when
   *     the ADC looks at the carrier itself, folded into the first Nyquist zone
   */
  public record RealSampling(double rateHertz, OptionalDouble intermediateHertz) {}

  /** Bytes of one sample: both components, or one real number. */
  public int bytesPerSample() {
    return type.bytes() * layout.components();
  }
}
