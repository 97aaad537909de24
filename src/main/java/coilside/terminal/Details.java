package coilside.terminal;

import coilside.bench.Conditions;
import coilside.bench.Desk;
import coilside.bench.Finding;
import coilside.bench.Refusal;
import coilside.bench.Rung;
import coilside.bench.RungStatus;
import coilside.quantity.Measured;
import java.time.Instant;
import java.time.InstantSource;
import java.time.ZoneOffset;
import java.time.format.DateTimeFormatter;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.Optional;

/** The texts about one rung: why it stands as it does, what it rests on, its history. */
final class Details {
  private static final DateTimeFormatter UTC =
      DateTimeFormatter.ofPattern("yyyy-MM-dd HH:mm:ss", Locale.ROOT).withZone(ZoneOffset.UTC);
  private static final int HISTORY_SHOWN = 100;

  private Details() {}

  static TextPanel panel(Desk desk, Rung rung, InstantSource clock, boolean unicode) {
    List<Finding> history = desk.history(rung);
    Glyphs glyphs = new Glyphs(unicode);
    return new TextPanel(
        rung.id() + ": " + rung.title(),
        state -> lines(state, rung, history, clock.instant(), glyphs),
        false);
  }

  private static TextPanel.Line line(String text, Ink ink) {
    return new TextPanel.Line(text, ink);
  }

  private static List<TextPanel.Line> lines(
      Snapshot state, Rung rung, List<Finding> history, Instant now, Glyphs g) {
    List<TextPanel.Line> out = new ArrayList<>();
    RungStatus s = state.status(rung);
    String age = LadderView.age(s.finding(), now);
    out.add(
        line(
            g.mark(s.state())
                + " "
                + LadderView.word(s.state())
                + (age.isEmpty() ? "" : ", measured " + age + " ago"),
            LadderView.ink(s.state())));
    Optional<String> refused = s.finding().flatMap(Finding::refusal).map(Refusal::reason);
    s.reasons().stream()
        .filter(r -> refused.isEmpty() || !refused.get().equals(r))
        .forEach(r -> out.add(line("  because " + r, LadderView.ink(s.state()))));
    s.finding().ifPresent(f -> finding(out, f, g));
    out.add(line("", Ink.PLAIN));
    out.add(line("Rests on", Ink.TITLE));
    if (rung.restsOn().isEmpty()) {
      out.add(line("  nothing", Ink.FAINT));
    }
    rung.restsOn().forEach(r -> out.add(rested(state.status(r), g)));
    out.add(line("Rests on it", Ink.TITLE));
    boolean any = false;
    for (Rung r : Rung.values()) {
      if (r.restsOn().contains(rung)) {
        out.add(rested(state.status(r), g));
        any = true;
      }
    }
    if (!any) {
      out.add(line("  nothing", Ink.FAINT));
    }
    history(out, rung, history, g);
    return out;
  }

  private static TextPanel.Line rested(RungStatus s, Glyphs g) {
    return line(
        String.format(
            Locale.ROOT,
            "  %-10s %c %s",
            s.rung().id(),
            g.mark(s.state()),
            LadderView.word(s.state())),
        LadderView.ink(s.state()));
  }

  private static void finding(List<TextPanel.Line> out, Finding f, Glyphs g) {
    f.refusal()
        .ifPresent(
            r -> {
              out.add(line("Refused: " + r.reason(), Ink.BAD));
              r.likelyCauses().forEach(c -> out.add(line("  likely: " + c, Ink.CARE)));
            });
    if (!f.values().isEmpty()) {
      out.add(line("", Ink.PLAIN));
      out.add(line("Values (in brackets: standard uncertainty of the last digits)", Ink.TITLE));
    }
    for (Map.Entry<String, Measured> e : f.values().entrySet()) {
      Measured m = e.getValue();
      String text =
          String.format(
              Locale.ROOT,
              "  %-18s %s",
              Numbers.words(e.getKey()),
              Numbers.named(e.getKey(), m, g.unicode()));
      if (!m.hasUncertainty()) {
        text += "  no uncertainty: " + m.whyNoUncertainty();
      }
      out.add(line(text, Ink.PLAIN));
    }
    f.warnings().forEach(w -> out.add(line("  Note: " + w, Ink.CARE)));
    Conditions c = f.conditions();
    out.add(line("", Ink.PLAIN));
    out.add(line("Measured " + UTC.format(f.started()) + " UTC", Ink.TITLE));
    out.add(
        line(
            "  "
                + f.scans()
                + (f.scans() == 1 ? " scan in " : " scans in ")
                + Numbers.si(f.seconds(), "s", 3)
                + (f.simulated() ? ", SIMULATED bench" : ""),
            Ink.PLAIN));
    out.add(
        line(
            "  carrier "
                + Numbers.si(c.carrierHertz(), "Hz", 8)
                + ", amplitude "
                + Numbers.si(c.amplitude(), "", 3)
                + ", gain "
                + Numbers.si(c.gainDecibels(), "dB", 3),
            Ink.PLAIN));
    out.add(line("  sample " + orNone(c.sample()) + "; coil " + orNone(c.coil()), Ink.PLAIN));
    out.add(line("  board " + c.board(), Ink.PLAIN));
    if (c.temperatureCelsius().isPresent()) {
      out.add(line("  " + Numbers.si(c.temperatureCelsius().getAsDouble(), "°C", 3), Ink.PLAIN));
    }
    if (!f.capture().isEmpty()) {
      out.add(line("  capture " + f.capture(), Ink.PLAIN));
    }
  }

  private static String orNone(String text) {
    return text.isEmpty() ? "not named" : text;
  }

  private static void history(
      List<TextPanel.Line> out, Rung rung, List<Finding> history, Glyphs g) {
    out.add(line("", Ink.PLAIN));
    out.add(line("History, newest first", Ink.TITLE));
    if (history.isEmpty()) {
      out.add(line("  empty", Ink.FAINT));
    }
    String name = LadderView.chief(rung).get(0);
    for (int i = history.size() - 1; i >= Math.max(0, history.size() - HISTORY_SHOWN); i--) {
      Finding f = history.get(i);
      String value = f.refused() ? "refused" : LadderView.value(f, name, g);
      out.add(
          line(
              String.format(
                  Locale.ROOT,
                  "  %s  %-24s %s",
                  UTC.format(f.started()),
                  value,
                  f.conditions().sample()),
              f.refused() ? Ink.BAD : Ink.PLAIN));
    }
  }
}
