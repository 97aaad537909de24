package coilside.board.wire;

import coilside.board.profile.NumberFormat;
import coilside.board.profile.NumberFormat.Kind;
import coilside.board.profile.Template;
import java.nio.ByteOrder;
import java.nio.charset.StandardCharsets;
import java.util.LinkedHashMap;
import java.util.Map;
import java.util.Optional;

/** Fixed binary fields of a frame. */
final class Fields {
  private Fields() {}

  /**
   * What a frame holds when it has this layout.
   *
   * @param values numbers in decimal, text as it is
   * @param samplesAt where the sample bytes begin; -1 without
   */
  record Match(Map<String, String> values, int samplesAt) {}

  /** The fields, when the whole frame has this layout. */
  static Optional<Match> match(Template layout, byte[] frame, int length, ByteOrder order) {
    Map<String, String> values = new LinkedHashMap<>();
    int samplesAt = -1;
    int at = 0;
    for (Template.Part part : layout.parts()) {
      if (part instanceof Template.Literal literal) {
        for (int i = 0; i < literal.text().length(); i++) {
          if (at >= length || (frame[at++] & 0xff) != literal.text().charAt(i)) {
            return Optional.empty();
          }
        }
      } else if (part instanceof Template.Slot slot) {
        Kind kind = slot.format().orElseThrow().kind();
        if (kind == Kind.TEXT) {
          values.put(slot.name(), new String(frame, at, length - at, StandardCharsets.ISO_8859_1));
          at = length;
        } else if (kind == Kind.SAMPLES) {
          samplesAt = at;
          at = length;
        } else {
          if (at + kind.bytes() > length) {
            return Optional.empty();
          }
          values.put(slot.name(), number(kind, frame, at, order));
          at += kind.bytes();
        }
      }
    }
    return at == length ? Optional.of(new Match(values, samplesAt)) : Optional.empty();
  }

  private static String number(Kind kind, byte[] frame, int at, ByteOrder order) {
    long raw = unsigned(frame, at, kind.bytes(), order);
    if (kind == Kind.F32) {
      return Float.toString(Float.intBitsToFloat((int) raw));
    }
    int unused = 64 - 8 * kind.bytes();
    return Long.toString(kind.signed() ? raw << unused >> unused : raw);
  }

  static long unsigned(byte[] bytes, int at, int n, ByteOrder order) {
    long out = 0;
    for (int i = 0; i < n; i++) {
      int k = order == ByteOrder.BIG_ENDIAN ? at + i : at + n - 1 - i;
      out = out << 8 | bytes[k] & 0xff;
    }
    return out;
  }

  static void put(long value, byte[] into, int at, int n, ByteOrder order) {
    for (int i = 0; i < n; i++) {
      int k = order == ByteOrder.LITTLE_ENDIAN ? at + i : at + n - 1 - i;
      into[k] = (byte) (value >> 8 * i);
    }
  }

  /** Whether a whole number fits a binary field. */
  static boolean fits(long value, NumberFormat format) {
    int bits = 8 * format.kind().bytes();
    return format.kind().signed()
        ? value >= -(1L << bits - 1) && value < 1L << bits - 1
        : value >= 0 && value < 1L << bits;
  }
}
