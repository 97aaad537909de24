package coilside.board.wire;

import coilside.board.profile.ChecksumKind;
import java.util.zip.CRC32;
import java.util.zip.CRC32C;

/** A running checksum. Not thread-safe. */
public final class Checksum {
  /** Width, polynomial (as written, highest power left out), start, reflected, final XOR. */
  private record Rule(int width, int polynomial, int start, boolean reflected, int finalXor) {}

  private final ChecksumKind kind;
  private final Rule rule;
  private final int[] table;
  private final java.util.zip.Checksum platform;
  private int register;

  public Checksum(ChecksumKind kind) {
    this.kind = kind;
    this.platform =
        switch (kind) {
          case CRC32_ISO_HDLC -> new CRC32();
          case CRC32_ISCSI -> new CRC32C();
          default -> null;
        };
    this.rule = rule(kind);
    this.table = platform == null ? table(rule) : new int[0];
    reset();
  }

  private static Rule rule(ChecksumKind kind) {
    return switch (kind) {
      case CRC16_IBM_3740 -> new Rule(16, 0x1021, 0xffff, false, 0);
      case CRC16_XMODEM -> new Rule(16, 0x1021, 0, false, 0);
      case CRC16_KERMIT -> new Rule(16, 0x1021, 0, true, 0);
      case CRC16_IBM_SDLC -> new Rule(16, 0x1021, 0xffff, true, 0xffff);
      case CRC16_MODBUS -> new Rule(16, 0x8005, 0xffff, true, 0);
      case CRC32_ISO_HDLC -> new Rule(32, 0x04c11db7, -1, true, -1);
      case CRC32_ISCSI -> new Rule(32, 0x1edc6f41, -1, true, -1);
      case CRC32_BZIP2 -> new Rule(32, 0x04c11db7, -1, false, -1);
      case CRC32_MPEG_2 -> new Rule(32, 0x04c11db7, -1, false, 0);
    };
  }

  private static int[] table(Rule rule) {
    int[] out = new int[256];
    int top = rule.width - 1;
    int reflectedPolynomial = Integer.reverse(rule.polynomial) >>> (32 - rule.width);
    for (int i = 0; i < 256; i++) {
      int r = rule.reflected ? i : i << (rule.width - 8);
      for (int bit = 0; bit < 8; bit++) {
        if (rule.reflected) {
          r = (r & 1) != 0 ? r >>> 1 ^ reflectedPolynomial : r >>> 1;
        } else {
          r = (r >>> top & 1) != 0 ? r << 1 ^ rule.polynomial : r << 1;
        }
      }
      out[i] = r & mask(rule);
    }
    return out;
  }

  private static int mask(Rule rule) {
    return rule.width == 32 ? -1 : (1 << rule.width) - 1;
  }

  public void reset() {
    register = rule.start;
    if (platform != null) {
      platform.reset();
    }
  }

  public void update(byte[] bytes, int offset, int length) {
    if (platform != null) {
      platform.update(bytes, offset, length);
      return;
    }
    int r = register;
    int end = offset + length;
    if (rule.reflected) {
      for (int i = offset; i < end; i++) {
        r = table[(r ^ bytes[i]) & 0xff] ^ r >>> 8;
      }
    } else {
      int shift = rule.width - 8;
      int mask = mask(rule);
      for (int i = offset; i < end; i++) {
        r = (table[(r >>> shift ^ bytes[i]) & 0xff] ^ r << 8) & mask;
      }
    }
    register = r;
  }

  /** The checksum of everything so far, as an unsigned number. */
  public long value() {
    if (platform != null) {
      return platform.getValue();
    }
    return (register ^ rule.finalXor) & mask(rule) & 0xffffffffL;
  }

  public ChecksumKind kind() {
    return kind;
  }

  /** The checksum of a piece of bytes. */
  public static long of(ChecksumKind kind, byte[] bytes, int offset, int length) {
    Checksum sum = new Checksum(kind);
    sum.update(bytes, offset, length);
    return sum.value();
  }
}
