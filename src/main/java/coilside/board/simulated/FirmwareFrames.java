package coilside.board.simulated;

import coilside.board.profile.ChecksumKind;
import coilside.board.profile.Expectation;
import coilside.board.profile.Framing;
import coilside.board.profile.NumberFormat;
import coilside.board.profile.Template;
import coilside.board.profile.WireValue;
import java.io.ByteArrayOutputStream;
import java.nio.charset.StandardCharsets;
import java.util.ArrayDeque;
import java.util.Arrays;
import java.util.Deque;
import java.util.HashMap;
import java.util.Map;
import java.util.Optional;

/** Stuffed binary frames from the board's side. */
final class FirmwareFrames implements FirmwareDialect {
  private static final int LONGEST_FRAME = 4096;

  private final Framing.Cobs framing;
  private final ByteArrayOutputStream heard = new ByteArrayOutputStream();
  private final Deque<byte[]> frames = new ArrayDeque<>();

  FirmwareFrames(Framing.Cobs framing) {
    this.framing = framing;
  }

  @Override
  public void hear(byte[] bytes, int offset, int length) {
    for (int k = offset; k < offset + length; k++) {
      if (bytes[k] == 0) {
        if (heard.size() > 0) {
          frames.add(heard.toByteArray());
          heard.reset();
        }
      } else if (heard.size() <= LONGEST_FRAME) {
        heard.write(bytes[k]);
      }
    }
  }

  @Override
  public void forget() {
    heard.reset();
    frames.clear();
  }

  @Override
  public Optional<String> nextMessage() throws FirmwareRefusal {
    if (frames.isEmpty()) {
      return Optional.empty();
    }
    byte[] plain = FirmwareCobs.unstuff(frames.remove());
    if (plain == null) {
      throw FirmwareRefusal.syntax("a frame that cannot be unstuffed");
    }
    int tail = framing.checksum().map(ChecksumKind::bytes).orElse(0);
    int length = plain.length - tail;
    if (length <= 0) {
      throw FirmwareRefusal.syntax("a frame of " + plain.length + " bytes");
    }
    if (tail > 0) {
      long wanted = FirmwareCrc.of(framing.checksum().get(), plain, 0, length);
      String there = new String(plain, length, tail, StandardCharsets.ISO_8859_1);
      if (!FirmwareNumbers.bytes(wanted, tail, framing.byteOrder()).equals(there)) {
        throw FirmwareRefusal.syntax("a frame with a wrong checksum");
      }
    }
    return Optional.of(new String(Arrays.copyOf(plain, length), StandardCharsets.ISO_8859_1));
  }

  @Override
  public byte[] wrap(String message) {
    byte[] plain = message.getBytes(StandardCharsets.ISO_8859_1);
    if (framing.checksum().isPresent()) {
      ChecksumKind kind = framing.checksum().get();
      long sum = FirmwareCrc.of(kind, plain, 0, plain.length);
      String tail = FirmwareNumbers.bytes(sum, kind.bytes(), framing.byteOrder());
      plain = (message + tail).getBytes(StandardCharsets.ISO_8859_1);
    }
    byte[] stuffed = FirmwareCobs.stuff(plain);
    return Arrays.copyOf(stuffed, stuffed.length + 1);
  }

  @Override
  public Optional<Map<String, Double>> understand(
      Template template, String message, Map<String, WireValue> values) throws FirmwareRefusal {
    Map<String, Double> out = new HashMap<>();
    int at = 0;
    for (Template.Part part : template.parts()) {
      if (part instanceof Template.Literal literal) {
        if (!message.startsWith(literal.text(), at)) {
          return Optional.empty();
        }
        at += literal.text().length();
      } else if (part instanceof Template.Slot slot) {
        WireValue value = values.get(slot.name());
        NumberFormat format = format(slot, value);
        int end = at + format.kind().bytes();
        if (end > message.length()) {
          return Optional.empty();
        }
        double onWire =
            FirmwareNumbers.fromField(format, message.substring(at, end), framing.byteOrder());
        out.put(slot.name(), value == null ? onWire : FirmwareDialect.inSi(value, onWire));
        at = end;
      }
    }
    return at == message.length() ? Optional.of(out) : Optional.empty();
  }

  private static NumberFormat format(Template.Slot slot, WireValue value) {
    return slot.format()
        .orElseGet(
            () -> {
              if (value == null) {
                throw new IllegalArgumentException("{" + slot.name() + "} has no format");
              }
              return value.format();
            });
  }

  @Override
  public String say(Expectation expectation, Map<String, Object> said) {
    if (!(expectation instanceof Expectation.FrameLayout frame)) {
      throw new IllegalArgumentException("a pattern in a profile of frames");
    }
    StringBuilder out = new StringBuilder();
    for (Template.Part part : frame.layout().parts()) {
      if (part instanceof Template.Literal literal) {
        out.append(literal.text());
      } else if (part instanceof Template.Slot slot) {
        out.append(field(slot, said.get(slot.name())));
      }
    }
    return out.toString();
  }

  private String field(Template.Slot slot, Object value) {
    NumberFormat format = slot.format().orElseThrow();
    if (value == null) {
      throw new IllegalArgumentException("nothing to say for {" + slot.name() + "}");
    }
    if (format.kind().takesTheRest()) {
      return String.valueOf(value);
    }
    double number = value instanceof Number n ? n.doubleValue() : 0;
    return FirmwareNumbers.toField(format, number, framing.byteOrder());
  }
}
