package coilside.board.profile;

import coilside.board.BoardLimits;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.EnumMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.stream.Collectors;

/** Reads the section on commands and checks that they make up a board that can play a shot. */
final class CommandsReader {
  private final Section section;
  private final Speech speech;
  private final Map<ValueName, WireValue> values;
  private final Map<CommandName, Command> commands = new EnumMap<>(CommandName.class);
  private boolean keepsShot;

  CommandsReader(Section section, Speech speech, Map<ValueName, WireValue> values) {
    this.section = section;
    this.speech = speech;
    this.values = values;
  }

  boolean keepsShot() {
    return keepsShot;
  }

  Map<CommandName, Command> read() {
    keepsShot = section.flag("keeps_shot", false);
    Section any = section.section("NAME");
    speech.template(any, "send", "send = \"RUN\"");
    speech.expectation(any, "answer", "answer = 'DONE'", List.of());
    any.flag("silent", false);
    for (CommandName name : CommandName.values()) {
      if (section.has(name.word())) {
        one(name).ifPresent(c -> commands.put(name, c));
      } else {
        section.know(name.word());
      }
    }
    return commands;
  }

  private Optional<Command> one(CommandName name) {
    String key = name.word();
    String example = key + " = \"...\"";
    if (!section.isTable(key)) {
      Optional<Template> template = speech.template(section, key, example);
      template.ifPresent(t -> checkSlots(section, key, name, t));
      if (name == CommandName.TEMPERATURE) {
        section.problem(key, "a table with send and answer", "[commands.temperature]");
      }
      return template.map(t -> new Command(t, Optional.empty(), false));
    }
    Section s = section.section(key, "NAME");
    Optional<Template> template = speech.template(s, "send", "send = \"RUN\"");
    if (!s.has("send")) {
      s.missing("send", "what is sent", "send = \"RUN\"");
    }
    template.ifPresent(t -> checkSlots(s, "send", name, t));
    List<String> groups = name == CommandName.TEMPERATURE ? List.of("celsius") : List.of();
    Optional<Expectation> answer = speech.expectation(s, "answer", "answer = 'DONE'", groups);
    boolean silent = s.flag("silent", false);
    if (silent && answer.isPresent()) {
      s.problem("silent", "either silent or an answer", "silent = false");
    }
    if (name == CommandName.TEMPERATURE && answer.isEmpty() && !s.has("answer")) {
      s.missing(
          "answer", "a pattern with the group celsius", "answer = 'TEMP (?<celsius>[-+0-9.]+)'");
    }
    return template.map(t -> new Command(t, answer, silent));
  }

  private void checkSlots(Section at, String key, CommandName name, Template template) {
    for (Template.Slot slot : template.slots()) {
      Optional<ValueName> value = ValueName.ofWord(slot.name()).filter(name.slots()::contains);
      if (value.isEmpty()) {
        List<String> words = name.slots().stream().map(ValueName::word).toList();
        at.problem(
            key,
            words.isEmpty()
                ? "no values in " + name.word() + ", but it has {" + slot.name() + "}"
                : "the values " + String.join(", ", words) + ", not {" + slot.name() + "}",
            Spelling.nearest(slot.name(), words).map(w -> "{" + w + "}").orElse(""));
        continue;
      }
      boolean plainCount =
          value.get().dimension() == ValueName.Dimension.COUNT
              && (speech.lines() || slot.format().isPresent());
      if (!values.containsKey(value.get()) && !plainCount) {
        at.problem(
            key,
            "a value described in [values." + slot.name() + "]",
            "[values." + slot.name() + "]");
      }
      if (slot.format().isPresent()
          && (slot.format().get().kind().textual() != speech.lines()
              || slot.format().get().kind().takesTheRest())) {
        at.problem(key, "a number format of this framing in {" + slot.name() + "}", "");
      }
    }
  }

  /** What one command alone cannot tell. */
  void checkTogether(
      Replies replies, SampleBlocks blocks, BoardLimits limits, SampleFormat samples) {
    boolean fixed = section.has(CommandName.PULSE_AND_RECEIVE.word());
    if (fixed) {
      forbid(
          "beside pulse_and_receive",
          CommandName.BEGIN,
          CommandName.PULSE,
          CommandName.WAIT,
          CommandName.RECEIVE,
          CommandName.REPEAT,
          CommandName.END_REPEAT,
          CommandName.END,
          CommandName.RUN);
      requireSlots(CommandName.PULSE_AND_RECEIVE, ValueName.WIDTH);
    } else {
      require(
          "a board that builds shots (or give pulse_and_receive)",
          CommandName.PULSE,
          CommandName.WAIT,
          CommandName.RECEIVE,
          CommandName.RUN,
          CommandName.STOP);
      forbid("without pulse_and_receive", CommandName.RECEIVE_ONLY);
      requireSlots(CommandName.PULSE, ValueName.WIDTH);
      requireSlots(CommandName.WAIT, ValueName.WAIT);
      requireOne(CommandName.RECEIVE, ValueName.POINTS, ValueName.SAMPLES);
    }
    if (section.has("repeat") != section.has("end_repeat")) {
      section.missing(
          section.has("repeat") ? "end_repeat" : "repeat",
          "repeat and end_repeat together or neither",
          "end_repeat = \"END\"");
    }
    if (!mentions(ValueName.CARRIER)
        && !commands.isEmpty()
        && limits.carrierHertz().min() < limits.carrierHertz().max()) {
      section.missing(
          "carrier",
          "a way to set the carrier, since limits.carrier is a range",
          "carrier = \"FREQ {carrier}\"");
    }
    if (!mentions(ValueName.GAIN)
        && !commands.isEmpty()
        && limits.gainDecibels().min() < limits.gainDecibels().max()) {
      section.missing(
          "gain", "a way to set the gain, since limits.gain is a range", "gain = \"GAIN {gain}\"");
    }
    boolean asksPerWindow =
        Optional.ofNullable(commands.get(CommandName.FETCH))
            .map(c -> c.template().mentions(ValueName.WINDOW))
            .orElse(false);
    if (asksPerWindow && blocks.per() == SampleBlocks.Per.SCAN) {
      section.problem("fetch", "{window} only with samples.block.per = \"window\"", "");
    }
    for (Map.Entry<CommandName, Command> entry : commands.entrySet()) {
      if (entry.getValue().template().mentions(ValueName.SAMPLES) && samples.real().isEmpty()) {
        section.problem(
            entry.getKey().word(), "{samples} only with samples.layout = \"real\"", "{points}");
      }
    }
    if (!Double.isFinite(replies.timeLimitSeconds())) {
      throw new IllegalStateException("time limit " + replies.timeLimitSeconds());
    }
  }

  private boolean mentions(ValueName value) {
    return commands.values().stream().anyMatch(c -> c.template().mentions(value));
  }

  private void require(String why, CommandName... names) {
    for (CommandName name : names) {
      if (!section.has(name.word())) {
        section.missing(name.word(), "needed by " + why, name.word() + " = \"...\"");
      }
    }
  }

  private void forbid(String why, CommandName... names) {
    for (CommandName name : names) {
      if (section.has(name.word())) {
        section.problem(name.word(), "nothing " + why, "");
      }
    }
  }

  private void requireSlots(CommandName name, ValueName... needed) {
    List<ValueName> lacking = new ArrayList<>();
    Command command = commands.get(name);
    for (ValueName value : needed) {
      if (command != null && !command.template().mentions(value)) {
        lacking.add(value);
      }
    }
    if (!lacking.isEmpty()) {
      String words =
          lacking.stream().map(v -> "{" + v.word() + "}").collect(Collectors.joining(", "));
      section.problem(name.word(), "a template that names " + words, "");
    }
  }

  private void requireOne(CommandName name, ValueName... either) {
    Command command = commands.get(name);
    if (command != null && Arrays.stream(either).noneMatch(command.template()::mentions)) {
      String words =
          Arrays.stream(either).map(v -> "{" + v.word() + "}").collect(Collectors.joining(" or "));
      section.problem(name.word(), "a template that names " + words, "");
    }
  }
}
