package coilside.terminal;

import coilside.bench.Desk;
import coilside.bench.Picture;
import coilside.bench.Rung;
import coilside.bench.RungStatus;
import java.time.InstantSource;
import java.util.ArrayList;
import java.util.EnumMap;
import java.util.List;
import java.util.Map;

/** Puts the state of the bench into sentences, and tells what changed since the last time. */
final class PlainText {
  private final Desk desk;
  private final InstantSource clock;
  private final Glyphs glyphs;
  private final Map<Rung, String> told = new EnumMap<>(Rung.class);
  private Snapshot.Note lastNote;
  private String doing = "";
  private String step = "";
  private int tenth = -1;

  PlainText(Desk desk, InstantSource clock, boolean unicode) {
    this.desk = desk;
    this.clock = clock;
    glyphs = new Glyphs(unicode);
  }

  List<String> overview(Snapshot s) {
    List<String> out = new ArrayList<>();
    out.add(
        "Board: "
            + shown(desk.board().name())
            + (desk.board().simulated() ? ", SIMULATED" : "")
            + ". Sample: "
            + shown(desk.settings().sample())
            + ". "
            + (desk.armed() ? "May transmit." : "The transmitter is locked."));
    out.add("Now: " + ScreenLayout.doing(s) + ".");
    s.step().ifPresent(p -> out.add(stepText(p.what(), p.fraction(), p.secondsLeft())));
    s.live().ifPresent(p -> out.add(shown(caption(p))));
    s.headlines()
        .forEach(
            (h, history) ->
                history
                    .latest()
                    .ifPresent(
                        m ->
                            out.add(
                                h.words
                                    + " "
                                    + shown(Numbers.concise(m, glyphs.unicode()))
                                    + (history.trend() == 0
                                        ? ", steady"
                                        : history.trend() > 0 ? ", rising" : ", falling"))));
    out.addAll(ladder(s));
    return out;
  }

  /** The headline number, its trend and the best so far, in one sentence; empty without one. */
  List<String> headline(Snapshot s, Headline headline) {
    HeadlineHistory history = s.headlines().get(headline);
    if (history.latest().isEmpty()) {
      return List.of();
    }
    String trend = history.trend() == 0 ? "steady" : history.trend() > 0 ? "rising" : "falling";
    String best =
        history
            .best()
            .map(
                m ->
                    history.best().equals(history.latest())
                        ? ", the best so far"
                        : ", best " + Numbers.concise(m, glyphs.unicode()))
            .orElse("");
    return List.of(
        shown(
            headline.words
                + " "
                + Numbers.concise(history.latest().get(), glyphs.unicode())
                + ", "
                + trend
                + best));
  }

  private static String caption(Picture picture) {
    return picture instanceof Picture.Trace t ? t.caption() : ((Picture.Curve) picture).caption();
  }

  List<String> ladder(Snapshot s) {
    List<String> out = new ArrayList<>();
    for (Rung rung : Rung.values()) {
      out.add(rung(s.status(rung)));
    }
    return out;
  }

  private String rung(RungStatus s) {
    StringBuilder out = new StringBuilder(s.rung().id() + ": " + LadderView.word(s.state()));
    s.finding()
        .filter(f -> !f.refused())
        .ifPresent(
            f ->
                f.values()
                    .forEach(
                        (name, m) ->
                            out.append(", ")
                                .append(Numbers.words(name))
                                .append(' ')
                                .append(Numbers.named(name, m, glyphs.unicode()))));
    String age = LadderView.age(s.finding(), clock.instant());
    if (!age.isEmpty()) {
      out.append(", ").append(age).append(" old");
    }
    if (s.state() != RungStatus.State.MISSING) {
      s.reasons().forEach(r -> out.append("; because ").append(r));
    }
    return shown(out.toString());
  }

  /** What is new since the last call. */
  List<String> changes(Snapshot s) {
    List<String> out = new ArrayList<>();
    String now = ScreenLayout.doing(s);
    if (!now.equals(doing)) {
      doing = now;
      out.add("Now: " + now + ".");
    }
    s.step().ifPresent(p -> steps(out, p.what(), p.fraction(), p.secondsLeft()));
    for (Rung rung : Rung.values()) {
      RungStatus status = s.status(rung);
      String key = status.state() + status.finding().map(f -> f.id()).orElse("") + status.reasons();
      String before = told.put(rung, key);
      if (before != null && !before.equals(key)) {
        out.add(rung(status));
      }
    }
    notes(out, s);
    return out;
  }

  private void steps(List<String> out, String what, double fraction, double left) {
    int t = Double.isNaN(fraction) ? -1 : (int) (fraction * 4);
    if (!what.equals(step) || t != tenth) {
      step = what;
      tenth = t;
      out.add(stepText(what, fraction, left));
    }
  }

  private String stepText(String what, double fraction, double left) {
    return shown(
        what
            + (Double.isNaN(fraction) ? "" : ", " + Math.round(100 * fraction) + " percent")
            + (Double.isNaN(left) ? "" : ", " + Numbers.clock(left) + " left"));
  }

  private void notes(List<String> out, Snapshot s) {
    int from = lastNote == null ? 0 : s.notes().lastIndexOf(lastNote) + 1;
    for (Snapshot.Note n : s.notes().subList(from, s.notes().size())) {
      out.add(shown((n.warning() ? "Warning: " : "Message: ") + n.text()));
      lastNote = n;
    }
  }

  private String shown(String text) {
    StringBuilder out = new StringBuilder();
    for (int i = 0; i < text.length(); i++) {
      out.append(glyphs.shown(text.charAt(i)));
    }
    return out.toString();
  }
}
