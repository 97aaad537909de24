package coilside.board.profile;

import coilside.board.profile.SampleBlocks.BlockChecksum;
import coilside.board.profile.SampleFormat.Layout;
import coilside.board.profile.SampleFormat.Type;
import coilside.board.profile.ValueName.Dimension;
import java.nio.ByteOrder;
import java.util.List;
import java.util.Locale;
import java.util.Optional;
import java.util.OptionalDouble;
import java.util.function.Function;

/** Reads what sample bytes mean and how they are wrapped. */
record SamplesReader(Section section, Speech speech) {
  SampleFormat format() {
    Type type =
        section
            .requiredChoice("type", words(Type.class), "i8, i16, i24, i32, f32")
            .orElse(Type.I16);
    ByteOrder order = FramingReader.byteOrder(section, "byte_order");
    boolean offsetBinary = section.flag("offset_binary", false);
    if (offsetBinary && type == Type.F32) {
      section.problem("offset_binary", "integer types only", "offset_binary = false");
    }
    Layout layout =
        section
            .requiredChoice("layout", words(Layout.class), "iq, qi, planar, real")
            .orElse(Layout.IQ);
    double volts = section.number("volts_per_count", 1e-15, 1e3, 1);
    if (!section.has("volts_per_count")) {
      section.missing(
          "volts_per_count", "volts at the ADC for one count", "volts_per_count = 3.05e-5");
    }
    double natural = type == Type.F32 ? 1 : Math.pow(2, 8 * type.bytes() - 1) - 1;
    double fullScale = section.number("full_scale", 1e-6, 2147483647.0, natural);
    boolean conjugated = section.flag("conjugated", false);
    int lost = section.whole("lost_samples", 0, 4096, 0);
    double delay = section.number("filter_delay_samples", 0, 4096, 0);
    OptionalDouble rate =
        section.quantity("rate", Dimension.FREQUENCY, 1e3, 1e9, "rate = \"1MHz\"");
    OptionalDouble intermediate =
        section.quantity("intermediate", Dimension.FREQUENCY, 1, 1e9, "intermediate = \"250kHz\"");
    boolean real = layout == Layout.REAL;
    if (real && rate.isEmpty() && !section.has("rate")) {
      section.missing("rate", "samples a second, with real samples", "rate = \"1MHz\"");
    }
    for (String key : List.of("rate", "intermediate")) {
      if (!real && section.has(key)) {
        section.problem(key, "only with layout = \"real\"", "");
      }
    }
    if (real
        && rate.isPresent()
        && intermediate.isPresent()
        && intermediate.getAsDouble() >= rate.getAsDouble() / 2) {
      section.problem("intermediate", "below half the rate", "intermediate = \"250kHz\"");
    }
    return new SampleFormat(
        type,
        order,
        offsetBinary,
        layout,
        volts,
        fullScale,
        conjugated,
        lost,
        delay,
        real
            ? Optional.of(new SampleFormat.RealSampling(rate.orElse(1), intermediate))
            : Optional.empty());
  }

  SampleBlocks blocks() {
    Section s = section.section("block");
    SampleBlocks.Kind kind =
        s.requiredChoice("kind", words(SampleBlocks.Kind.class), "line, block, frame")
            .orElse(speech.lines() ? SampleBlocks.Kind.LINE : SampleBlocks.Kind.FRAME);
    if ((kind == SampleBlocks.Kind.FRAME) == speech.lines()) {
      s.problem("kind", speech.lines() ? "line or block with lines" : "frame with cobs", "");
    }
    List<String> groups =
        kind == SampleBlocks.Kind.FRAME
            ? List.of("window", "first", "samples")
            : List.of("bytes", "points", "window", "checksum");
    Optional<Expectation> header =
        speech.expectation(s, "header", "header = 'DATA (?<bytes>[0-9]+)'", groups);
    checkHeader(s, kind, header);
    SampleBlocks.Per per =
        s.choice("per", words(SampleBlocks.Per.class), "window, scan")
            .orElse(SampleBlocks.Per.WINDOW);
    int frameSamples = s.whole("frame_samples", 1, 1 << 20, 256);
    if (kind != SampleBlocks.Kind.FRAME && s.has("frame_samples")) {
      s.problem("frame_samples", "only with kind = \"frame\"", "");
    }
    String after = s.text("after", "bytes after each block", "after = \"\\n\"").orElse("");
    if (after.length() > 8 || after.chars().anyMatch(c -> c > 0xff)) {
      s.problem("after", "at most 8 bytes", "after = \"\\n\"");
    }
    Optional<Expectation> endMark =
        speech.expectation(s, "end_mark", "end_mark = 'END'", List.of());
    return new SampleBlocks(
        kind,
        header,
        per,
        kind == SampleBlocks.Kind.FRAME ? frameSamples : 0,
        after,
        endMark,
        checksum(s, kind, header));
  }

  private static void checkHeader(Section s, SampleBlocks.Kind kind, Optional<Expectation> header) {
    if (kind == SampleBlocks.Kind.BLOCK) {
      if (s.has("header")) {
        s.problem("header", "none: an IEEE 488.2 block announces itself", "");
      }
      return;
    }
    if (!s.has("header")) {
      s.missing(
          "header",
          kind == SampleBlocks.Kind.LINE ? "the line before the bytes" : "the frame's layout",
          kind == SampleBlocks.Kind.LINE
              ? "header = 'DATA (?<bytes>[0-9]+)'"
              : "header = \"90 {window:u16} {first:u32} {samples:samples}\"");
      return;
    }
    header.ifPresent(
        h -> {
          if (h instanceof Expectation.LinePattern line
              && !line.pattern().groups().contains("bytes")
              && !line.pattern().groups().contains("points")) {
            s.problem(
                "header", "a group bytes or a group points", "header = 'DATA (?<bytes>[0-9]+)'");
          }
          if (h instanceof Expectation.FrameLayout frame
              && !frame.layout().slotNames().contains("samples")) {
            s.problem("header", "a last field {samples:samples}", "90 {samples:samples}");
          }
        });
  }

  private static Optional<BlockChecksum> checksum(
      Section s, SampleBlocks.Kind kind, Optional<Expectation> header) {
    Optional<ChecksumKind> which = FramingReader.checksum(s, "checksum");
    BlockChecksum.Covers covers =
        s.choice("covers", words(BlockChecksum.Covers.class), "samples, header-and-samples")
            .orElse(BlockChecksum.Covers.SAMPLES);
    BlockChecksum.Place place =
        s.choice(
                "place",
                words(BlockChecksum.Place.class),
                "after-little, after-big, after-hex, header")
            .orElse(BlockChecksum.Place.AFTER_LITTLE);
    if (kind == SampleBlocks.Kind.FRAME && s.has("checksum")) {
      s.problem("checksum", "framing.checksum, which covers every frame", "");
    }
    if (which.isEmpty()) {
      for (String key : List.of("covers", "place")) {
        if (s.has(key)) {
          s.problem(key, "only with a checksum", "checksum = \"crc-16/xmodem\"");
        }
      }
      return Optional.empty();
    }
    boolean inHeader = place == BlockChecksum.Place.HEADER;
    boolean named =
        header.isPresent()
            && header.get() instanceof Expectation.LinePattern line
            && line.pattern().groups().contains("checksum");
    if (inHeader && !named) {
      s.problem("place", "a header with a group checksum", "place = \"after-little\"");
    }
    if (inHeader && covers == BlockChecksum.Covers.HEADER_AND_SAMPLES) {
      s.problem("covers", "samples, since the checksum stands in the header", "");
    }
    return Optional.of(new BlockChecksum(which.get(), covers, place));
  }

  private static <E extends Enum<E>> Function<String, Optional<E>> words(Class<E> type) {
    return word -> {
      for (E value : type.getEnumConstants()) {
        if (value.name().toLowerCase(Locale.ROOT).replace('_', '-').equals(word)) {
          return Optional.of(value);
        }
      }
      return Optional.empty();
    };
  }
}
