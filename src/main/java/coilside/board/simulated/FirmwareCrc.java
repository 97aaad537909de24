package coilside.board.simulated;

import coilside.board.profile.ChecksumKind;
import java.util.EnumMap;
import java.util.Map;

/**
 * Checksums as the board works them out, from the parameters of the CRC RevEng catalogue
 * (reveng.sourceforge.io). The register always shifts to the left; reflected kinds turn each byte
 * and the result round.
 */
final class FirmwareCrc {
  private static final Map<ChecksumKind, FirmwareCrc> KINDS = new EnumMap<>(ChecksumKind.class);

  static {
    put(ChecksumKind.CRC16_IBM_3740, 16, 0x1021, 0xffff, false, 0);
    put(ChecksumKind.CRC16_XMODEM, 16, 0x1021, 0, false, 0);
    put(ChecksumKind.CRC16_KERMIT, 16, 0x1021, 0, true, 0);
    put(ChecksumKind.CRC16_IBM_SDLC, 16, 0x1021, 0xffff, true, 0xffff);
    put(ChecksumKind.CRC16_MODBUS, 16, 0x8005, 0xffff, true, 0);
    put(ChecksumKind.CRC32_ISO_HDLC, 32, 0x04c11db7L, 0xffffffffL, true, 0xffffffffL);
    put(ChecksumKind.CRC32_ISCSI, 32, 0x1edc6f41L, 0xffffffffL, true, 0xffffffffL);
    put(ChecksumKind.CRC32_BZIP2, 32, 0x04c11db7L, 0xffffffffL, false, 0xffffffffL);
    put(ChecksumKind.CRC32_MPEG_2, 32, 0x04c11db7L, 0xffffffffL, false, 0);
  }

  private final int width;
  private final long mask;
  private final long start;
  private final boolean reflected;
  private final long flip;
  private final long[] table = new long[256];

  private FirmwareCrc(int width, long polynomial, long start, boolean reflected, long flip) {
    this.width = width;
    this.mask = (1L << width) - 1;
    this.start = start;
    this.reflected = reflected;
    this.flip = flip;
    for (int b = 0; b < 256; b++) {
      long register = (long) b << (width - 8);
      for (int bit = 0; bit < 8; bit++) {
        boolean carry = (register >>> (width - 1) & 1) != 0;
        register = register << 1 & mask ^ (carry ? polynomial : 0);
      }
      table[b] = register;
    }
  }

  private static void put(
      ChecksumKind kind, int width, long polynomial, long start, boolean reflected, long flip) {
    KINDS.put(kind, new FirmwareCrc(width, polynomial, start, reflected, flip));
  }

  private int turned(int b) {
    return reflected ? Integer.reverse(b) >>> 24 : b;
  }

  /** The checksum of {@code length} bytes. */
  static long of(ChecksumKind kind, byte[] bytes, int offset, int length) {
    return KINDS.get(kind).sum(bytes, offset, length);
  }

  private long sum(byte[] bytes, int offset, int length) {
    long register = start;
    for (int k = offset; k < offset + length; k++) {
      int top = (int) (register >>> (width - 8)) & 0xff;
      register = register << 8 & mask ^ table[top ^ turned(bytes[k] & 0xff)];
    }
    if (reflected) {
      register = Long.reverse(register) >>> (64 - width);
    }
    return register ^ flip;
  }
}
