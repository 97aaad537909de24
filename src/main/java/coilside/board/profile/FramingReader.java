package coilside.board.profile;

import java.nio.ByteOrder;
import java.util.Arrays;
import java.util.Optional;
import java.util.stream.Collectors;

/** Reads the section on framing: lines where nothing else is said. */
record FramingReader(Section section) {
  private static final String ENDS = "\"\\n\", \"\\r\\n\" or \"\\r\"";

  Framing read() {
    String kind =
        section
            .choice(
                "kind",
                k -> k.equals("lines") || k.equals("cobs") ? Optional.of(k) : Optional.empty(),
                "lines, cobs")
            .orElse("lines");
    boolean lines = kind.equals("lines");
    String out = lineEnd("line_end_out");
    String in = lineEnd("line_end_in");
    boolean echo = section.flag("echo", false);
    int longest = section.whole("longest", 16, lines ? 4096 : 1 << 20, lines ? 512 : 4096);
    ByteOrder order = byteOrder(section, "byte_order");
    Optional<ChecksumKind> checksum = checksum(section, "checksum");
    for (String key : new String[] {"line_end_out", "line_end_in", "echo"}) {
      if (!lines && section.has(key)) {
        section.problem(key, "only with kind = \"lines\"", "");
      }
    }
    for (String key : new String[] {"byte_order", "checksum"}) {
      if (lines && section.has(key)) {
        section.problem(
            key, "only with kind = \"cobs\" (see samples and samples.block for blocks)", "");
      }
    }
    return lines
        ? new Framing.Lines(out, in, longest, echo)
        : new Framing.Cobs(order, checksum, longest);
  }

  private String lineEnd(String key) {
    Optional<String> end = section.text(key, ENDS, key + " = \"\\n\"");
    if (end.isPresent() && !end.get().matches("\r\n|\n|\r")) {
      section.problem(key, ENDS, key + " = \"\\n\"");
    }
    return end.orElse("\n");
  }

  static ByteOrder byteOrder(Section section, String key) {
    return section
        .choice(
            key,
            w ->
                switch (w) {
                  case "little" -> Optional.of(ByteOrder.LITTLE_ENDIAN);
                  case "big" -> Optional.of(ByteOrder.BIG_ENDIAN);
                  default -> Optional.empty();
                },
            "little, big")
        .orElse(ByteOrder.LITTLE_ENDIAN);
  }

  static Optional<ChecksumKind> checksum(Section section, String key) {
    return section.choice(
        key,
        ChecksumKind::ofWord,
        Arrays.stream(ChecksumKind.values())
            .map(ChecksumKind::word)
            .collect(Collectors.joining(", ")));
  }
}
