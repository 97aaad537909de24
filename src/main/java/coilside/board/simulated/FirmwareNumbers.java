package coilside.board.simulated;

import coilside.board.profile.NumberFormat;
import java.math.BigDecimal;
import java.math.RoundingMode;
import java.nio.ByteOrder;
import java.util.Locale;

/**
 * Numbers as the board reads and writes them, by a profile's number format. Written for the board's
 * side alone: it shares no code with the host's side, so that a mistake of either shows.
 */
final class FirmwareNumbers {
  private FirmwareNumbers() {}

  /** Reads a number in text; it must have exactly the form that the format writes. */
  static double fromText(NumberFormat format, String text) throws FirmwareRefusal {
    String form =
        switch (format.kind()) {
          case INTEGER -> "[-+]?[0-9]{1,18}";
          case DECIMAL ->
              format.digits() == 0
                  ? "[-+]?[0-9]{1,18}"
                  : "[-+]?[0-9]{1,18}\\.[0-9]{" + format.digits() + "}";
          case EXPONENT ->
              format.digits() == 0
                  ? "[-+]?[0-9][eE][-+][0-9]{1,3}"
                  : "[-+]?[0-9]\\.[0-9]{" + format.digits() + "}[eE][-+][0-9]{1,3}";
          case HEX -> "[0-9A-F]{" + format.digits() + ",8}";
          default -> throw new IllegalArgumentException(format.word() + " is no text format");
        };
    if (!text.matches(form)) {
      throw FirmwareRefusal.number("'" + text + "' is not written as " + format.word());
    }
    return format.kind() == NumberFormat.Kind.HEX
        ? Long.parseLong(text, 16)
        : new BigDecimal(text).doubleValue();
  }

  /** Writes a number in text. */
  static String toText(NumberFormat format, double value) {
    return switch (format.kind()) {
      case INTEGER -> new BigDecimal(value).setScale(0, RoundingMode.HALF_EVEN).toPlainString();
      case DECIMAL ->
          new BigDecimal(value).setScale(format.digits(), RoundingMode.HALF_EVEN).toPlainString();
      case EXPONENT -> String.format(Locale.ROOT, "%." + format.digits() + "E", value);
      case HEX -> String.format(Locale.ROOT, "%0" + format.digits() + "X", Math.round(value));
      default -> throw new IllegalArgumentException(format.word() + " is no text format");
    };
  }

  /**
   * Reads a binary field.
   *
   * @param bytes one character a byte
   */
  static double fromField(NumberFormat format, String bytes, ByteOrder order) {
    long bits = 0;
    for (int k = 0; k < bytes.length(); k++) {
      int from = order == ByteOrder.BIG_ENDIAN ? k : bytes.length() - 1 - k;
      bits = bits << 8 | bytes.charAt(from);
    }
    if (format.kind() == NumberFormat.Kind.F32) {
      return Float.intBitsToFloat((int) bits);
    }
    int unused = 64 - 8 * bytes.length();
    return format.kind().signed() ? bits << unused >> unused : bits;
  }

  /** Writes a binary field, one character a byte. */
  static String toField(NumberFormat format, double value, ByteOrder order) {
    int width = format.kind().bytes();
    long bits =
        format.kind() == NumberFormat.Kind.F32
            ? Float.floatToRawIntBits((float) value)
            : Math.round(value);
    return bytes(bits, width, order);
  }

  /** The low {@code width} bytes of a number, one character a byte. */
  static String bytes(long bits, int width, ByteOrder order) {
    StringBuilder out = new StringBuilder(width);
    for (int k = 0; k < width; k++) {
      int place = order == ByteOrder.BIG_ENDIAN ? width - 1 - k : k;
      out.append((char) (bits >>> 8 * place & 0xff));
    }
    return out.toString();
  }
}
