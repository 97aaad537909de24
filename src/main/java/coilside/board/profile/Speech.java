package coilside.board.profile;

import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.regex.PatternSyntaxException;

/**
 * Reads templates and expectations as the framing wants them: text and patterns for lines, bytes
 * and layouts for frames.
 *
 * @param lines true for text lines
 */
record Speech(boolean lines) {
  Optional<Template> template(Section section, String key, String example) {
    return section
        .text(key, "a template", example)
        .flatMap(source -> parse(section, key, source, example));
  }

  Optional<Template> parse(Section section, String key, String source, String example) {
    try {
      return Optional.of(lines ? Template.ofText(source) : Template.ofFrame(source));
    } catch (Template.Malformed e) {
      String kind =
          lines ? "a text with {values}" : "hexadecimal bytes and {values}, as in 10 {gain}";
      section.problem(key, kind + " (" + e.getMessage() + ")", example);
      return Optional.empty();
    }
  }

  /**
   * A pattern under {@code key} with its example under {@code key_example} (lines), or a layout
   * (frames).
   *
   * @param groups the groups that have a meaning here
   */
  Optional<Expectation> expectation(
      Section section, String key, String example, List<String> groups) {
    String exampleKey = key + "_example";
    Optional<String> source = section.text(key, lines ? "a pattern" : "a layout", example);
    Optional<String> sample = section.text(exampleKey, "a line the pattern matches", "");
    if (source.isEmpty()) {
      if (sample.isPresent() && !section.has(key)) {
        section.problem(exampleKey, "only together with " + key, example);
      }
      return Optional.empty();
    }
    return lines
        ? pattern(section, key, exampleKey, source.get(), sample, example, groups)
        : layout(section, key, exampleKey, source.get(), sample, example, groups);
  }

  private static Optional<Expectation> pattern(
      Section section,
      String key,
      String exampleKey,
      String source,
      Optional<String> sample,
      String example,
      List<String> groups) {
    BoundedPattern pattern;
    try {
      pattern = BoundedPattern.of(source);
    } catch (PatternSyntaxException e) {
      section.problem(key, "a regular expression (" + e.getDescription().strip() + ")", example);
      return Optional.empty();
    }
    unknownGroups(section, key, pattern.groups(), groups);
    Optional<Template> said = Optional.empty();
    if (sample.isPresent()) {
      try {
        Template template = Template.ofText(sample.get());
        Optional<String> why = disagreement(pattern, template, groups);
        if (why.isPresent()) {
          section.problem(
              exampleKey, "a line that the pattern " + source + " matches: " + why.get(), "");
        }
        said = Optional.of(template);
      } catch (Template.Malformed e) {
        section.problem(exampleKey, "a text with {groups} (" + e.getMessage() + ")", "");
      }
    }
    return Optional.of(new Expectation.LinePattern(pattern, said));
  }

  private static Optional<Expectation> layout(
      Section section,
      String key,
      String exampleKey,
      String source,
      Optional<String> sample,
      String example,
      List<String> groups) {
    if (sample.isPresent()) {
      section.problem(exampleKey, "nothing: a layout is its own example", "");
    }
    Template template;
    try {
      template = Template.ofFrame(source);
    } catch (Template.Malformed e) {
      section.problem(key, "hexadecimal bytes and {name:type} (" + e.getMessage() + ")", example);
      return Optional.empty();
    }
    unknownGroups(section, key, template.slotNames(), groups);
    for (int i = 0; i < template.parts().size(); i++) {
      if (template.parts().get(i) instanceof Template.Slot slot) {
        boolean last = i == template.parts().size() - 1;
        if (slot.format().isEmpty() || slot.format().get().kind().textual()) {
          section.problem(key, "a binary type for {" + slot.name() + "}", example);
        } else if (slot.format().get().kind().takesTheRest() && !last) {
          section.problem(key, "text and samples only as the last field", example);
        }
      }
    }
    return Optional.of(new Expectation.FrameLayout(template));
  }

  private static void unknownGroups(
      Section section, String key, Iterable<String> used, List<String> known) {
    for (String group : used) {
      if (!known.contains(group)) {
        section.problem(
            key,
            known.isEmpty()
                ? "no named groups here; write (?:...)"
                : "named groups " + String.join(", ", known) + " here, not " + group,
            "");
      }
    }
  }

  /** Why an example and its pattern do not fit; empty when they do. */
  private static Optional<String> disagreement(
      BoundedPattern pattern, Template example, List<String> groups) {
    Map<String, String> said = new HashMap<>();
    StringBuilder line = new StringBuilder();
    for (Template.Part part : example.parts()) {
      if (part instanceof Template.Literal literal) {
        line.append(literal.text());
      } else if (part instanceof Template.Slot slot) {
        if (!groups.contains(slot.name())) {
          return Optional.of("{" + slot.name() + "} has no meaning here");
        }
        String text = trial(slot);
        said.put(slot.name(), text);
        line.append(text);
      }
    }
    Optional<Map<String, String>> found = pattern.match(line.toString());
    if (found.isEmpty()) {
      return Optional.of("'" + line + "' does not match");
    }
    for (Map.Entry<String, String> entry : said.entrySet()) {
      String got = found.get().get(entry.getKey());
      if (!entry.getValue().equals(got)) {
        return Optional.of("group " + entry.getKey() + " reads '" + got + "' from '" + line + "'");
      }
    }
    return Optional.empty();
  }

  private static String trial(Template.Slot slot) {
    NumberFormat format = slot.format().orElse(null);
    if (format != null) {
      return switch (format.kind()) {
        case HEX -> "29B1CAFE".substring(0, format.digits());
        case DECIMAL ->
            format.digits() == 0 ? "21" : "21." + "512345678".substring(0, format.digits());
        default -> "64";
      };
    }
    return switch (slot.name()) {
      case "name" -> "board";
      case "text" -> "out of range";
      case "celsius" -> "21.5";
      default -> "64";
    };
  }
}
