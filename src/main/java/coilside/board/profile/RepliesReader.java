package coilside.board.profile;

import coilside.board.profile.Replies.Mode;
import coilside.board.profile.ValueName.Dimension;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.regex.PatternSyntaxException;

/** Reads the section on replies. */
record RepliesReader(Section section, Speech speech) {
  Replies read() {
    Mode mode =
        section
            .requiredChoice(
                "mode",
                w ->
                    switch (w) {
                      case "each" -> Optional.of(Mode.EACH);
                      case "asked" -> Optional.of(Mode.ASKED);
                      case "none" -> Optional.of(Mode.NONE);
                      default -> Optional.empty();
                    },
                "each, asked, none")
            .orElse(Mode.NONE);
    int ahead = section.whole("ahead", 1, 1024, 1);
    Optional<Expectation> success =
        speech.expectation(section, "success", "success = 'OK'", List.of());
    Optional<Expectation> error =
        speech.expectation(
            section, "error", "error = 'ERR (?<code>[0-9]+) (?<text>.*)'", List.of("code", "text"));
    Optional<Template> question = speech.template(section, "question", "question = \"SYST:ERR?\"");
    double limit =
        section
            .quantity("time_limit", Dimension.TIME, 1e-3, 600, "time_limit = \"500ms\"")
            .orElse(1);
    if (mode != Mode.NONE && !section.has("success")) {
      section.missing("success", "what says that all went well, with this mode", "success = 'OK'");
    }
    if (mode == Mode.ASKED && !section.has("question")) {
      section.missing("question", "what is asked", "question = \"SYST:ERR?\"");
    }
    if (mode != Mode.ASKED && section.has("question")) {
      section.problem("question", "only with mode = \"asked\"", "mode = \"asked\"");
    }
    if (mode != Mode.EACH && section.has("ahead")) {
      section.problem("ahead", "only with mode = \"each\"", "mode = \"each\"");
    }
    return new Replies(mode, ahead, success, error, question, ignored(), limit);
  }

  private List<BoundedPattern> ignored() {
    List<BoundedPattern> out = new ArrayList<>();
    for (String source : section.texts("ignore", "a list of patterns", "ignore = ['#.*']")) {
      try {
        out.add(BoundedPattern.of(source));
      } catch (PatternSyntaxException e) {
        section.problem("ignore", "regular expressions", "ignore = ['#.*']");
      }
    }
    if (!speech.lines() && section.has("ignore")) {
      section.problem("ignore", "only with lines", "");
    }
    return out;
  }
}
