package coilside.board.profile;

import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Optional;
import java.util.regex.Pattern;

/**
 * What is written on the wire, with named places: literal parts and slots in order.
 *
 * <p>In a text dialect the source reads {@code "FREQ {carrier}"}; {@code {{} and {@code }}} stand
 * for braces. In a framed dialect it is pairs of hexadecimal digits and slots, blanks between them:
 * {@code "10 {carrier} {gain}"}. A slot may carry its own number format: {@code {crc:hex4}}.
 *
 * @param source as written in the profile
 * @param parts literals and slots, in order
 */
public record Template(String source, List<Part> parts) {
  /** A literal or a slot. */
  public sealed interface Part permits Literal, Slot {}

  /**
   * Text (ISO 8859-1: one character a byte) sent as it stands.
   *
   * @param text characters 0..255
   */
  public record Literal(String text) implements Part {}

  /**
   * A named place.
   *
   * @param name the name between the braces
   * @param format the format after the colon, where there is one
   */
  public record Slot(String name, Optional<NumberFormat> format) implements Part {}

  /** A template that cannot be read; the message says why. */
  public static final class Malformed extends Exception {
    private static final long serialVersionUID = 1L;

    Malformed(String message) {
      super(message);
    }
  }

  private static final Pattern NAME = Pattern.compile("[a-z][a-z0-9_]{0,31}");
  private static final int LONGEST = 512;

  public Template {
    parts = List.copyOf(parts);
  }

  /** The names of all slots, in order. */
  public List<String> slotNames() {
    return slots().stream().map(Slot::name).toList();
  }

  /** All slots, in order. */
  public List<Slot> slots() {
    return parts.stream().filter(Slot.class::isInstance).map(Slot.class::cast).toList();
  }

  public boolean mentions(ValueName name) {
    return slotNames().contains(name.word());
  }

  /** Reads a template of a text dialect. */
  static Template ofText(String source) throws Malformed {
    return parse(source, false);
  }

  /** Reads a template of a framed dialect: hexadecimal bytes and slots. */
  static Template ofFrame(String source) throws Malformed {
    return parse(source, true);
  }

  private static Template parse(String source, boolean hex) throws Malformed {
    if (source.length() > LONGEST) {
      throw new Malformed("longer than " + LONGEST + " characters");
    }
    List<Part> parts = new ArrayList<>();
    StringBuilder literal = new StringBuilder();
    for (int i = 0; i < source.length(); i++) {
      char c = source.charAt(i);
      if (!hex && (c == '{' || c == '}') && i + 1 < source.length() && source.charAt(i + 1) == c) {
        literal.append(c);
        i++;
      } else if (c == '{') {
        int end = source.indexOf('}', i);
        if (end < 0) {
          throw new Malformed("'{' without '}'");
        }
        flush(parts, literal, hex);
        parts.add(slot(source.substring(i + 1, end)));
        i = end;
      } else if (c == '}') {
        throw new Malformed("'}' without '{'");
      } else if (c > 0xff) {
        throw new Malformed("character '" + c + "' does not fit in one byte");
      } else {
        literal.append(c);
      }
    }
    flush(parts, literal, hex);
    return new Template(source, parts);
  }

  private static Slot slot(String inside) throws Malformed {
    int colon = inside.indexOf(':');
    String name = colon < 0 ? inside : inside.substring(0, colon);
    if (!NAME.matcher(name).matches()) {
      throw new Malformed("'{" + inside + "}' is no name of a value");
    }
    if (colon < 0) {
      return new Slot(name, Optional.empty());
    }
    Optional<NumberFormat> format = NumberFormat.parse(inside.substring(colon + 1));
    if (format.isEmpty()) {
      throw new Malformed("'{" + inside + "}' has no known format; " + NumberFormat.ALLOWED);
    }
    return new Slot(name, format);
  }

  private static void flush(List<Part> parts, StringBuilder literal, boolean hex) throws Malformed {
    if (literal.length() == 0) {
      return;
    }
    String text = hex ? fromHex(literal.toString()) : literal.toString();
    if (!text.isEmpty()) {
      parts.add(new Literal(text));
    }
    literal.setLength(0);
  }

  private static String fromHex(String digits) throws Malformed {
    StringBuilder out = new StringBuilder();
    for (String word : digits.trim().split("\\s+")) {
      if (word.isEmpty()) {
        continue;
      }
      if (word.length() % 2 != 0 || !word.toLowerCase(Locale.ROOT).matches("[0-9a-f]+")) {
        throw new Malformed("'" + word + "' is not pairs of hexadecimal digits");
      }
      for (int i = 0; i < word.length(); i += 2) {
        out.append((char) Integer.parseInt(word.substring(i, i + 2), 16));
      }
    }
    return out.toString();
  }
}
