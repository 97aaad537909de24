package coilside.board.profile;

import java.util.Locale;
import java.util.Optional;
import java.util.regex.Matcher;
import java.util.regex.Pattern;

/**
 * How a number (or the rest of a frame) is written on the wire.
 *
 * @param kind integer, decimal, exponent or hex in text; u8 .. f32 as fixed binary fields; text and
 *     samples for the rest of a frame
 * @param digits decimals for DECIMAL, digits after the point for EXPONENT, least number of digits
 *     for HEX (upper case, zero padded); 0 for all other kinds
 */
public record NumberFormat(Kind kind, int digits) {
  /** A way to write a number. */
  public enum Kind {
    /** "8090000". */
    INTEGER(true, 0),
    /** "12.50": a fixed number of decimals. */
    DECIMAL(true, 0),
    /** "8.090000E+06". */
    EXPONENT(true, 0),
    /** "007B71D0". */
    HEX(true, 0),
    U8(false, 1),
    U16(false, 2),
    U24(false, 3),
    U32(false, 4),
    I8(false, 1),
    I16(false, 2),
    I24(false, 3),
    I32(false, 4),
    /** IEEE 754 single precision. */
    F32(false, 4),
    /** ASCII text up to the end of the frame; only in what a board sends. */
    TEXT(false, 0),
    /** Sample bytes up to the end of the frame; only in what a board sends. */
    SAMPLES(false, 0);

    private final boolean textual;
    private final int bytes;

    Kind(boolean textual, int bytes) {
      this.textual = textual;
      this.bytes = bytes;
    }

    /** True for what is written in text lines, false for what is a field of a binary frame. */
    public boolean textual() {
      return textual;
    }

    /** Width of a fixed binary field; 0 for text kinds and for what takes the rest of a frame. */
    public int bytes() {
      return bytes;
    }

    /** True for an integer field that carries a sign. */
    public boolean signed() {
      return this == I8 || this == I16 || this == I24 || this == I32;
    }

    /** True for what takes all that is left of a frame. */
    public boolean takesTheRest() {
      return this == TEXT || this == SAMPLES;
    }
  }

  /** What may be written, for messages. */
  public static final String ALLOWED =
      "integer, decimal0..decimal9, exponent0..exponent12, hex1..hex8 in text lines;"
          + " u8 u16 u24 u32 i8 i16 i24 i32 f32 in frames";

  private static final Pattern WORD = Pattern.compile("([a-z]+?)([0-9]*)");

  /** Reads "integer", "decimal3", "exponent6", "hex4", "u16", "text". */
  public static Optional<NumberFormat> parse(String text) {
    for (Kind kind : Kind.values()) {
      if (!needsDigits(kind) && kind.name().toLowerCase(Locale.ROOT).equals(text)) {
        return Optional.of(new NumberFormat(kind, 0));
      }
    }
    Matcher m = WORD.matcher(text);
    if (!m.matches() || m.group(2).isEmpty() || m.group(2).length() > 2) {
      return Optional.empty();
    }
    int digits = Integer.parseInt(m.group(2));
    return switch (m.group(1)) {
      case "decimal" ->
          digits <= 9 ? Optional.of(new NumberFormat(Kind.DECIMAL, digits)) : Optional.empty();
      case "exponent" ->
          digits <= 12 ? Optional.of(new NumberFormat(Kind.EXPONENT, digits)) : Optional.empty();
      case "hex" ->
          digits >= 1 && digits <= 8
              ? Optional.of(new NumberFormat(Kind.HEX, digits))
              : Optional.empty();
      default -> Optional.empty();
    };
  }

  private static boolean needsDigits(Kind kind) {
    return kind == Kind.DECIMAL || kind == Kind.EXPONENT || kind == Kind.HEX;
  }

  /** The word in a profile. */
  public String word() {
    return kind.name().toLowerCase(Locale.ROOT) + (needsDigits(kind) ? digits : "");
  }
}
