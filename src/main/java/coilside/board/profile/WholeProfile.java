package coilside.board.profile;

import coilside.board.BoardLimits;
import coilside.board.profile.ValueName.Dimension;
import java.util.ArrayList;
import java.util.EnumMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalInt;
import java.util.regex.Pattern;

/** Reads the sections of a profile in turn and puts them together. */
final class WholeProfile {
  private static final Pattern USB_ID = Pattern.compile("[0-9a-fA-F]{4}:[0-9a-fA-F]{4}");

  private final ProblemList problems;
  private final Section top;
  private final String digest;

  WholeProfile(ProblemList problems, Section top, String digest) {
    this.problems = problems;
    this.top = top;
    this.digest = digest;
  }

  /** The profile; empty, with problems listed, where it is not sound. */
  Optional<DeviceProfile> read() {
    Optional<String> name = top.requiredText("name", "a short name", "name = \"my-board\"");
    String note = top.text("note", "one line", "note = \"blue box on the shelf\"").orElse("");
    Optional<SerialAttachment> serial = serial(top.section("serial"));
    Optional<TcpAttachment> tcp = tcp(top.section("tcp"));

    Framing framing = new FramingReader(top.section("framing")).read();
    boolean lines = framing instanceof Framing.Lines;
    Speech speech = new Speech(lines);

    LimitsReader limitsReader = new LimitsReader(top.section("limits"), top.section("operator"));
    double tick = limitsReader.tickSeconds();
    Section valuesSection = top.section("values");
    Map<ValueName, WireValue> values = new ValuesReader(valuesSection, lines, tick).read();
    CommandsReader commandsReader = new CommandsReader(top.section("commands"), speech, values);
    Map<CommandName, Command> commands = commandsReader.read();

    Section open = top.section("open");
    double settle = open.quantity("settle", Dimension.TIME, 0, 60, "settle = \"2s\"").orElse(0);
    Optional<Expectation> greeting =
        speech.expectation(open, "greeting", "greeting = 'Ready.*'", List.of());
    List<Template> setup = templates(open, speech, "setup", "setup = [\"*CLS\"]");
    List<Template> farewell = templates(open, speech, "farewell", "farewell = [\"RF OFF\"]");

    Section identify = top.section("identify");
    Optional<Template> ask = speech.template(identify, "ask", "ask = \"*IDN?\"");
    Optional<Expectation> expect =
        speech.expectation(identify, "expect", "expect = '(?<name>My board.*)'", List.of("name"));
    if (!identify.has("expect")) {
      identify.missing("expect", "a pattern the answer must match", "expect = '(?<name>.*)'");
    }
    if (!identify.has("ask") && !open.has("greeting")) {
      identify.missing("ask", "the question, where no greeting tells", "ask = \"*IDN?\"");
    }

    Replies replies = new RepliesReader(top.section("replies"), speech).read();
    SamplesReader samplesReader = new SamplesReader(top.section("samples"), speech);
    SampleFormat samples = samplesReader.format();
    SampleBlocks blocks = samplesReader.blocks();

    BoardLimits board = limitsReader.board(commands, samples);
    BoardLimits limits = limitsReader.narrowed(board);
    OperatorSection operator = limitsReader.operator(limits);
    new FieldWidths(valuesSection, values).check(board);
    commandsReader.checkTogether(replies, blocks, board, samples);

    if (!problems.isEmpty()) {
      return Optional.empty();
    }
    return Optional.of(
        new DeviceProfile(
            name.orElseThrow(),
            note,
            digest,
            serial,
            tcp,
            settle,
            greeting,
            framing,
            new Identification(ask, expect.orElseThrow()),
            replies,
            values,
            commands,
            setup,
            farewell,
            commandsReader.keepsShot(),
            blocks,
            samples,
            tick,
            board,
            limits,
            operator));
  }

  private static List<Template> templates(
      Section section, Speech speech, String key, String example) {
    List<Template> out = new ArrayList<>();
    for (String source : section.texts(key, "a list of texts", example)) {
      Optional<Template> template = speech.parse(section, key, source, example);
      template.ifPresent(out::add);
      if (template.isPresent() && !template.get().slots().isEmpty()) {
        section.problem(key, "texts without named values", example);
      }
    }
    return out;
  }

  private static Optional<SerialAttachment> serial(Section s) {
    List<String> usb = s.texts("usb", "a list of \"vendor:product\"", "usb = [\"1209:0001\"]");
    for (String id : usb) {
      if (!USB_ID.matcher(id).matches()) {
        s.problem("usb", "four hexadecimal digits, a colon, four more", "usb = [\"1209:0001\"]");
      }
    }
    Optional<String> path = s.text("path", "a port's name, * and ? allowed", "path = \"ttyACM*\"");
    int speed = s.whole("speed", 50, 20_000_000, 115_200);
    boolean dtr = s.flag("dtr", true);
    boolean rts = s.flag("rts", true);
    List<String> ids = usb.stream().map(u -> u.toLowerCase(java.util.Locale.ROOT)).toList();
    return s.present()
        ? Optional.of(new SerialAttachment(ids, path, speed, dtr, rts))
        : Optional.empty();
  }

  private static Optional<TcpAttachment> tcp(Section s) {
    Optional<String> host = s.text("host", "a host's name or address", "host = \"127.0.0.1\"");
    OptionalInt port = s.whole("port", 1, 65_535);
    if (!s.present()) {
      return Optional.empty();
    }
    if (port.isEmpty() && !s.has("port")) {
      s.missing("port", "a whole number from 1 to 65535", "port = 5025");
    }
    return Optional.of(new TcpAttachment(host.orElse("127.0.0.1"), port.orElse(1)));
  }

  /** The values of a profile and how they travel. */
  private record ValuesReader(Section section, boolean lines, double tick) {
    Map<ValueName, WireValue> read() {
      Map<ValueName, WireValue> out = new EnumMap<>(ValueName.class);
      // Walks one absent table, so that its keys are known even in an empty file.
      one(section.section("NAME"), ValueName.POINTS, !section.has("NAME"));
      for (String key : section.keys()) {
        Optional<ValueName> name = ValueName.ofWord(key);
        if (name.isPresent()) {
          one(section.section(key, "NAME"), name.get(), false).ifPresent(v -> out.put(v.name(), v));
        } else {
          section.problem(
              key,
              "the name of a value: "
                  + String.join(
                      ", ",
                      java.util.Arrays.stream(ValueName.values()).map(ValueName::word).toList()),
              Spelling.nearest(
                      key,
                      java.util.Arrays.stream(ValueName.values()).map(ValueName::word).toList())
                  .map(n -> "[values." + n + "]")
                  .orElse(""));
          section.section(key, "NAME").markAllAsked();
        }
      }
      return out;
    }

    private Optional<WireValue> one(Section s, ValueName name, boolean quiet) {
      Map<String, Double> units = Quantities.units(name.dimension(), tick);
      String words = String.join(", ", units.keySet());
      Optional<String> unit =
          s.choice("unit", u -> units.containsKey(u) ? Optional.of(u) : Optional.empty(), words);
      if (unit.isEmpty() && !s.has("unit") && name.dimension() != Dimension.COUNT && !quiet) {
        s.missing("unit", "one of " + words, "unit = \"" + words.split(", ")[0] + "\"");
      }
      double scale = s.number("scale", -1e12, 1e12, 1);
      if (scale == 0) {
        s.problem("scale", "a number other than 0", "scale = 1");
        scale = 1;
      }
      double offset = s.number("offset", -1e12, 1e12, 0);
      double step = s.number("step", 0, 1e12, 0);
      Optional<NumberFormat> format =
          s.choice(
              "format",
              f -> NumberFormat.parse(f).filter(this::fits),
              lines
                  ? "integer, decimal0..decimal9, exponent0..exponent12, hex1..hex8"
                  : "u8, u16, u24, u32, i8, i16, i24, i32, f32");
      if (format.isEmpty() && !s.has("format") && !lines && !quiet) {
        s.missing("format", "the type of the binary field", "format = \"u32\"");
      }
      String key = unit.orElse(name.dimension() == Dimension.COUNT ? "count" : null);
      Double size = key == null ? null : units.get(key);
      return size == null
          ? Optional.empty()
          : Optional.of(
              new WireValue(
                  name,
                  key,
                  size,
                  scale,
                  offset,
                  step,
                  format.orElse(new NumberFormat(NumberFormat.Kind.INTEGER, 0))));
    }

    private boolean fits(NumberFormat format) {
      return format.kind().textual() == lines && !format.kind().takesTheRest();
    }
  }
}
