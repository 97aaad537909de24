package coilside.board.wire;

import coilside.board.profile.ChecksumKind;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.Framing;
import coilside.board.profile.NumberFormat;
import coilside.board.profile.Template;
import coilside.board.profile.ValueName;
import coilside.board.profile.WireValue;
import java.io.ByteArrayOutputStream;
import java.math.BigDecimal;
import java.nio.ByteOrder;
import java.nio.charset.StandardCharsets;
import java.util.Arrays;
import java.util.Locale;
import java.util.Map;

/** Writes commands of a profile as bytes, with their line end or in their frame. Stateless. */
public final class CommandEncoder {
  private static final WireValue PLAIN_COUNT =
      new WireValue(
          ValueName.COUNT, "count", 1, 1, 0, 1, new NumberFormat(NumberFormat.Kind.INTEGER, 0));

  private final DeviceProfile profile;

  public CommandEncoder(DeviceProfile profile) {
    this.profile = profile;
  }

  /** A value that the profile's number format cannot carry; the message says which and why. */
  public static final class Unencodable extends Exception {
    private static final long serialVersionUID = 1L;

    Unencodable(String message) {
      super(message);
    }
  }

  /** A template without values. */
  public byte[] encode(Template template) throws Unencodable {
    return encode(template, Map.of());
  }

  /**
   * The bytes of one command.
   *
   * @param values every value the template names, in SI
   */
  public byte[] encode(Template template, Map<ValueName, Double> values) throws Unencodable {
    ByteArrayOutputStream out = new ByteArrayOutputStream();
    for (Template.Part part : template.parts()) {
      if (part instanceof Template.Literal literal) {
        out.writeBytes(literal.text().getBytes(StandardCharsets.ISO_8859_1));
      } else if (part instanceof Template.Slot slot) {
        ValueName name =
            ValueName.ofWord(slot.name())
                .orElseThrow(() -> new IllegalArgumentException("{" + slot.name() + "}"));
        Double value = values.get(name);
        if (value == null) {
          throw new IllegalArgumentException("no value for {" + slot.name() + "}");
        }
        out.writeBytes(field(name, slot, value));
      }
    }
    return wrap(out.toByteArray());
  }

  private byte[] wrap(byte[] body) {
    if (profile.framing() instanceof Framing.Lines lines) {
      byte[] end = lines.endOut().getBytes(StandardCharsets.ISO_8859_1);
      byte[] out = Arrays.copyOf(body, body.length + end.length);
      System.arraycopy(end, 0, out, body.length, end.length);
      return out;
    }
    Framing.Cobs cobs = (Framing.Cobs) profile.framing();
    byte[] whole = body;
    if (cobs.checksum().isPresent()) {
      ChecksumKind kind = cobs.checksum().get();
      whole = Arrays.copyOf(body, body.length + kind.bytes());
      Fields.put(
          Checksum.of(kind, body, 0, body.length),
          whole,
          body.length,
          kind.bytes(),
          cobs.byteOrder());
    }
    byte[] stuffed = Cobs.encode(whole);
    return Arrays.copyOf(stuffed, stuffed.length + 1);
  }

  private byte[] field(ValueName name, Template.Slot slot, double si) throws Unencodable {
    WireValue rule = rule(name);
    NumberFormat format = slot.format().orElse(rule.format());
    double number = number(rule, si) + 0.0;
    String text =
        switch (format.kind()) {
          case INTEGER -> plain(number, 0);
          case DECIMAL -> plain(number, format.digits());
          case EXPONENT -> String.format(Locale.ROOT, "%." + format.digits() + "E", number);
          case HEX -> hex(name, number, format.digits());
          default -> null;
        };
    if (text != null) {
      return text.getBytes(StandardCharsets.ISO_8859_1);
    }
    ByteOrder order =
        profile.framing() instanceof Framing.Cobs cobs ? cobs.byteOrder() : ByteOrder.BIG_ENDIAN;
    byte[] out = new byte[format.kind().bytes()];
    if (format.kind() == NumberFormat.Kind.F32) {
      Fields.put(Float.floatToIntBits((float) number), out, 0, out.length, order);
      return out;
    }
    long whole = Math.round(number);
    if (!Fields.fits(whole, format)) {
      throw new Unencodable(
          name.word()
              + " needs the number "
              + whole
              + " on the wire, which does not fit the profile's "
              + format.word()
              + "; narrow its limits or take a wider field");
    }
    Fields.put(whole, out, 0, out.length, order);
    return out;
  }

  private static String plain(double number, int decimals) {
    String text =
        new BigDecimal(number).setScale(decimals, java.math.RoundingMode.HALF_EVEN).toPlainString();
    return text.startsWith("-") && text.chars().allMatch(c -> c == '-' || c == '0' || c == '.')
        ? text.substring(1)
        : text;
  }

  private static String hex(ValueName name, double number, int digits) throws Unencodable {
    long whole = Math.round(number);
    String text = String.format(Locale.ROOT, "%0" + digits + "X", Math.max(0, whole));
    if (whole < 0 || text.length() > 8) {
      throw new Unencodable(
          name.word() + " needs the number " + whole + ", which cannot be written in hexadecimal");
    }
    return text;
  }

  private WireValue rule(ValueName name) {
    return profile.values().getOrDefault(name, PLAIN_COUNT);
  }

  /** The number on the wire before it is formatted. */
  private static double number(WireValue rule, double si) {
    boolean angle = rule.name().dimension() == ValueName.Dimension.ANGLE;
    double turn = 2 * Math.PI;
    double x = angle ? si - turn * Math.floor(si / turn) : si;
    double number = rounded(rule, x);
    if (angle
        && number >= rounded(rule, turn) - 1e-9 * Math.abs(rule.scale())
        && rule.scale() > 0) {
      number = rounded(rule, 0);
    }
    return number;
  }

  private static double rounded(WireValue rule, double si) {
    double inverse = Math.rint(1 / rule.unitInSi());
    boolean exact = rule.unitInSi() < 1 && Math.abs(inverse * rule.unitInSi() - 1) < 1e-12;
    double units = exact ? si * inverse : si / rule.unitInSi();
    double number = units * rule.scale() + rule.offset();
    double grain = grain(rule);
    if (grain == 0) {
      return number;
    }
    double perUnit = Math.rint(1 / grain);
    return grain < 1 && Math.abs(perUnit * grain - 1) < 1e-9
        ? Math.rint(number * perUnit) / perUnit
        : Math.rint(number / grain) * grain;
  }

  /** The coarser of the value's step and what its format can write. */
  private static double grain(WireValue rule) {
    double format =
        switch (rule.format().kind()) {
          case DECIMAL -> Math.pow(10, -rule.format().digits());
          case EXPONENT, F32 -> 0;
          default -> 1;
        };
    return Math.max(format, rule.step());
  }

  /** The value that the board will understand, SI: what is left after rounding on the wire. */
  public double asSent(ValueName name, double si) {
    WireValue rule = rule(name);
    return (number(rule, si) - rule.offset()) / rule.scale() * rule.unitInSi();
  }
}
