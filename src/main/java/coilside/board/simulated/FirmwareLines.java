package coilside.board.simulated;

import coilside.board.profile.Expectation;
import coilside.board.profile.Framing;
import coilside.board.profile.NumberFormat;
import coilside.board.profile.Template;
import coilside.board.profile.WireValue;
import java.nio.charset.StandardCharsets;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;

/** Text lines from the board's side. */
final class FirmwareLines implements FirmwareDialect {
  private static final int LONGEST_LINE = 4096;

  private final Framing.Lines framing;
  private final StringBuilder heard = new StringBuilder();
  private boolean skipping;

  FirmwareLines(Framing.Lines framing) {
    this.framing = framing;
  }

  @Override
  public void hear(byte[] bytes, int offset, int length) {
    heard.append(new String(bytes, offset, length, StandardCharsets.ISO_8859_1));
  }

  @Override
  public void forget() {
    heard.setLength(0);
    skipping = false;
  }

  @Override
  public Optional<String> nextMessage() throws FirmwareRefusal {
    while (true) {
      int end = heard.indexOf(framing.endOut());
      if (end < 0) {
        if (heard.length() > LONGEST_LINE) {
          heard.delete(0, heard.length() - framing.endOut().length());
          skipping = true;
        }
        return Optional.empty();
      }
      String line = heard.substring(0, end);
      heard.delete(0, end + framing.endOut().length());
      if (skipping || line.length() > LONGEST_LINE) {
        skipping = false;
        throw FirmwareRefusal.tooMuch("a line longer than " + LONGEST_LINE + " characters");
      }
      if (!line.isEmpty()) {
        return Optional.of(line);
      }
    }
  }

  @Override
  public byte[] wrap(String message) {
    return (message + framing.endIn()).getBytes(StandardCharsets.ISO_8859_1);
  }

  @Override
  public Optional<Map<String, Double>> understand(
      Template template, String message, Map<String, WireValue> values) throws FirmwareRefusal {
    Map<String, String> texts = new HashMap<>();
    Map<String, Template.Slot> slots = new HashMap<>();
    int at = 0;
    List<Template.Part> parts = template.parts();
    for (int k = 0; k < parts.size(); k++) {
      if (parts.get(k) instanceof Template.Literal literal) {
        if (!message.startsWith(literal.text(), at)) {
          return Optional.empty();
        }
        at += literal.text().length();
      } else if (parts.get(k) instanceof Template.Slot slot) {
        int end = endOfSlot(parts, k, message, at);
        if (end < 0) {
          return Optional.empty();
        }
        texts.put(slot.name(), message.substring(at, end));
        slots.put(slot.name(), slot);
        at = end;
      }
    }
    if (at != message.length()) {
      return Optional.empty();
    }
    Map<String, Double> out = new HashMap<>();
    for (Map.Entry<String, String> text : texts.entrySet()) {
      String name = text.getKey();
      out.put(name, number(slots.get(name), values.get(name), text.getValue()));
    }
    return Optional.of(out);
  }

  private static int endOfSlot(List<Template.Part> parts, int k, String message, int at) {
    if (k + 1 == parts.size()) {
      return message.length();
    }
    if (parts.get(k + 1) instanceof Template.Literal next) {
      return k + 2 == parts.size() && message.endsWith(next.text())
          ? Math.max(at, message.length() - next.text().length())
          : message.indexOf(next.text(), at);
    }
    return -1;
  }

  private static double number(Template.Slot slot, WireValue value, String text)
      throws FirmwareRefusal {
    NumberFormat format =
        slot.format()
            .orElseGet(
                () ->
                    value == null
                        ? new NumberFormat(NumberFormat.Kind.INTEGER, 0)
                        : value.format());
    double onWire = FirmwareNumbers.fromText(format, text);
    return value == null ? onWire : FirmwareDialect.inSi(value, onWire);
  }

  @Override
  public String say(Expectation expectation, Map<String, Object> said) {
    if (!(expectation instanceof Expectation.LinePattern line)) {
      throw new IllegalArgumentException("a frame layout in a profile of text lines");
    }
    if (line.example().isEmpty()) {
      return plain(line);
    }
    StringBuilder out = new StringBuilder();
    for (Template.Part part : line.example().get().parts()) {
      if (part instanceof Template.Literal literal) {
        out.append(literal.text());
      } else if (part instanceof Template.Slot slot) {
        out.append(text(slot, said.get(slot.name())));
      }
    }
    return out.toString();
  }

  /** A pattern without special characters is its own example. */
  private static String plain(Expectation.LinePattern line) {
    String source = line.pattern().source();
    if (line.pattern().match(source).isEmpty()) {
      throw new IllegalArgumentException(
          "the pattern '" + source + "' needs an example before its board can be simulated");
    }
    return source;
  }

  private static String text(Template.Slot slot, Object value) {
    if (value == null) {
      throw new IllegalArgumentException("nothing to say for {" + slot.name() + "}");
    }
    if (slot.format().isPresent() && value instanceof Number number) {
      return FirmwareNumbers.toText(slot.format().get(), number.doubleValue());
    }
    return String.valueOf(value);
  }
}
