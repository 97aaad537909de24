package coilside.board.simulated;

import java.io.ByteArrayOutputStream;

/**
 * Consistent-overhead byte stuffing as the board does it (S. Cheshire, M. Baker, IEEE/ACM Trans.
 * Netw. 7(2), 159-172 (1999)): no zero byte inside a frame, one zero byte after it.
 */
final class FirmwareCobs {
  private static final int LONGEST_RUN = 254;

  private FirmwareCobs() {}

  /** The stuffed bytes, without the delimiter. */
  static byte[] stuff(byte[] plain) {
    ByteArrayOutputStream out = new ByteArrayOutputStream(plain.length + plain.length / 254 + 2);
    int start = 0;
    while (start <= plain.length) {
      int end = start;
      while (end < plain.length && end - start < LONGEST_RUN && plain[end] != 0) {
        end++;
      }
      out.write(end - start + 1);
      out.write(plain, start, end - start);
      boolean full = end - start == LONGEST_RUN;
      if (end == plain.length) {
        break;
      }
      start = full ? end : end + 1;
    }
    return out.toByteArray();
  }

  /** The plain bytes of a frame without its delimiter; null where it is malformed. */
  static byte[] unstuff(byte[] stuffed) {
    ByteArrayOutputStream out = new ByteArrayOutputStream(stuffed.length);
    int at = 0;
    while (at < stuffed.length) {
      int code = stuffed[at] & 0xff;
      if (code == 0 || at + code > stuffed.length) {
        return null;
      }
      out.write(stuffed, at + 1, code - 1);
      at += code;
      if (code <= LONGEST_RUN && at < stuffed.length) {
        out.write(0);
      }
    }
    return stuffed.length == 0 ? null : out.toByteArray();
  }
}
