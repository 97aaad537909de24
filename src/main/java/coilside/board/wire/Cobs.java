package coilside.board.wire;

import java.util.Arrays;

/**
 * Consistent-overhead byte stuffing: bytes without a zero, so that a zero can end a frame.
 *
 * <p>Source: S. Cheshire, M. Baker, "Consistent overhead byte stuffing", IEEE/ACM Transactions on
 * Networking 7(2), 159-172 (1999).
 */
public final class Cobs {
  private Cobs() {}

  /** Longest encoding of so many bytes, without the delimiter. */
  public static int longestEncoding(int bytes) {
    return bytes + bytes / 254 + 1;
  }

  /** Encodes, without the delimiter. A last full group of 254 is not followed by an empty one. */
  public static byte[] encode(byte[] bytes) {
    byte[] out = new byte[longestEncoding(bytes.length)];
    int code = 0;
    int at = 1;
    for (int i = 0; i < bytes.length; i++) {
      if (bytes[i] == 0) {
        out[code] = (byte) (at - code);
        code = at++;
      } else {
        out[at++] = bytes[i];
        if (at - code == 255 && i + 1 < bytes.length) {
          out[code] = (byte) 255;
          code = at++;
        }
      }
    }
    out[code] = (byte) (at - code);
    return Arrays.copyOf(out, at);
  }

  /**
   * Decodes one frame without its delimiter.
   *
   * @param into where the bytes go; as long as the encoding is enough
   * @return how many bytes came out, or -1 where the encoding is damaged
   */
  public static int decode(byte[] encoded, int length, byte[] into) {
    int out = 0;
    int i = 0;
    while (i < length) {
      int code = encoded[i] & 0xff;
      if (code == 0 || i + code > length) {
        return -1;
      }
      System.arraycopy(encoded, i + 1, into, out, code - 1);
      out += code - 1;
      i += code;
      if (code != 255 && i < length) {
        into[out++] = 0;
      }
    }
    return out;
  }
}
