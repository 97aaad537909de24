package coilside.terminal;

import coilside.bench.Picture;
import coilside.bench.Rung;
import coilside.bench.RungStatus;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.function.Supplier;

/** Chooses and draws the picture: of the chosen rung, of what runs live, or of the log. */
final class PictureView {
  enum Source {
    RUNG,
    LIVE,
    LOG
  }

  private final Look look;
  private final Supplier<Snapshot> latest;
  private boolean outdated;
  private final Map<String, PlotView> views = new HashMap<>();
  private Source source = Source.RUNG;
  private int focus;
  private Boolean alone;
  private boolean shownAlone;
  private List<PlotModel> shown = List.of();
  private List<Integer> drawnNow = List.of();

  PictureView(Look look, Supplier<Snapshot> latest) {
    this.look = look;
    this.latest = latest;
  }

  Source source() {
    return source;
  }

  void source(Source s) {
    if (s != source) {
      source = s;
      views.values().forEach(PlotView::rescale);
      outdated = true;
      focus = 0;
      alone = null;
    }
  }

  void rungChanged() {
    source = Source.RUNG;
    views.values().forEach(PlotView::rescale);
    outdated = true;
    focus = 0;
    alone = null;
  }

  void nextFocus() {
    focus = shown.isEmpty() ? 0 : (focus + 1) % shown.size();
  }

  void toggleAlone() {
    alone = !shownAlone;
  }

  /** Places the cursor of the plot at that cell and gives it the keys. */
  void click(int column, int row) {
    for (int i = 0; i < shown.size(); i++) {
      if (drawnNow.contains(i) && view(shown.get(i)).placeCursor(column, row)) {
        focus = i;
        return;
      }
    }
  }

  boolean several() {
    return shown.size() > 1;
  }

  /** The view of the plot that has the keys; empty when there is no plot. */
  Optional<PlotView> focused() {
    if (outdated) {
      // Keys may come faster than frames: they mean the picture chosen, not the one drawn last.
      choosePlots(latest.get());
    }
    if (shown.isEmpty()) {
      return Optional.empty();
    }
    return Optional.of(view(shown.get(Math.min(focus, shown.size() - 1))));
  }

  private PlotView view(PlotModel m) {
    return views.computeIfAbsent(
        m.id() + look.part + m.xUnit(), k -> new PlotView(k.contains("noise.spectrum")));
  }

  private void choosePlots(Snapshot state) {
    Optional<Picture> picture = picture(state);
    shown =
        source == Source.LOG
            ? LogModels.of(state.log())
            : picture
                .map(
                    p ->
                        PictureModels.of(
                            p, look.part, look.ppm, source == Source.LIVE ? "live." : ""))
                .orElse(List.of());
    outdated = false;
  }

  void draw(Canvas canvas, Area area, Snapshot state) {
    choosePlots(state);
    boolean measuring = state.measuring().filter(r -> r == look.chosen).isPresent();
    if (shown.isEmpty() && source == Source.RUNG && measuring && state.lastScan().isPresent()) {
      shown = List.of(PictureModels.scan(state.lastScan().get().fid(), look.part));
    }
    if (shown.isEmpty()) {
      empty(canvas, area, state);
      return;
    }
    focus = Math.min(focus, shown.size() - 1);
    Area plots = area;
    if (source == Source.LIVE && hasHeadlines(state)) {
      headlines(canvas, area.rows(0, 2), state);
      plots = new Area(area.x(), area.y() + 2, area.width(), area.height() - 2);
    }
    String caption = shown.get(0).caption();
    List<String> lines = caption.isEmpty() ? List.of() : Wrap.wrap(caption, area.width());
    int captionRows = Math.min(area.height() > 24 ? 3 : 2, lines.size());
    List<String> standing = standing(state, area.width());
    for (int i = 0; i < standing.size(); i++) {
      int y = area.bottom() - captionRows - standing.size() + i;
      Ink ink = LadderView.ink(state.status(look.chosen).state());
      canvas.put(area.x(), y, standing.get(i), ink, area.right());
    }
    for (int i = 0; i < captionRows; i++) {
      canvas.put(area.x(), area.bottom() - captionRows + i, lines.get(i), Ink.STRONG, area.right());
    }
    plots =
        new Area(
            plots.x(), plots.y(), plots.width(), plots.height() - captionRows - standing.size());
    drawPlots(canvas, plots);
  }

  /** Why the rung shown is stale or refused, short; the details panel has all of it. */
  private List<String> standing(Snapshot state, int width) {
    RungStatus status = state.status(look.chosen);
    boolean measuring = state.measuring().filter(r -> r == look.chosen).isPresent();
    if (source != Source.RUNG
        || measuring
        || status.reasons().isEmpty()
        || status.state() == RungStatus.State.FRESH
        || status.state() == RungStatus.State.MISSING) {
      return List.of();
    }
    String text = LadderView.word(status.state()) + ": " + String.join("; ", status.reasons());
    List<String> lines = Wrap.wrap(text, width);
    return lines.size() <= 2
        ? lines
        : List.of(lines.get(0), Wrap.wrap(lines.get(1), width - 14).get(0) + " (i: all of it)");
  }

  private void drawPlots(Canvas canvas, Area area) {
    boolean small = area.height() / 2 < 11 && area.width() < 130;
    boolean one =
        shown.size() == 1
            || (alone == null
                ? small
                    && source == Source.RUNG
                    && !shown.get(0).residuals().isEmpty()
                    && look.residuals
                : alone);
    shownAlone = one;
    Plot plot = new Plot(canvas, look.style);
    if (one) {
      PlotModel m = shown.get(focus);
      drawnNow = List.of(focus);
      plot.draw(m, view(m), area, look.residuals, true);
      return;
    }
    int first =
        focus == shown.size() - 1 && shown.size() > 2
            ? focus - 1
            : Math.min(focus, shown.size() - 2);
    List<PlotModel> two = List.of(shown.get(first), shown.get(first + 1));
    drawnNow = List.of(first, first + 1);
    boolean beside = area.width() >= 130;
    for (int i = 0; i < 2; i++) {
      int half = beside ? area.width() / 2 : area.height() / 2;
      Area part =
          beside
              ? new Area(area.x() + i * half, area.y(), half - 1, area.height())
              : new Area(
                  area.x(),
                  area.y() + i * half,
                  area.width(),
                  i == 0 ? half : area.height() - half);
      PlotModel m = two.get(i);
      plot.draw(m, view(m), part, look.residuals, first + i == focus);
    }
  }

  private Optional<Picture> picture(Snapshot state) {
    return source == Source.LIVE
        ? state.live()
        : Optional.ofNullable(state.pictures().get(look.chosen));
  }

  private void empty(Canvas canvas, Area area, Snapshot state) {
    List<String> text = new ArrayList<>();
    if (source == Source.LOG) {
      text.add("No log rows yet.");
      text.add("Press k to start a log.");
    } else if (source == Source.LIVE) {
      text.add("Nothing live yet.");
      text.add("Press l for live tuning and shimming, o to listen with the transmitter off.");
    } else {
      Rung rung = look.chosen;
      text.add(rung.id() + ": " + rung.title());
      boolean busy = state.measuring().filter(r -> r == rung).isPresent();
      text.add(
          busy
              ? "Measuring: the picture comes with the first points."
              : state.status(rung).finding().isPresent()
                  ? "Measured before this start; its picture is not at hand."
                  : "No picture of it yet.");
      if (!busy) {
        text.add("Press m to measure it, r to bring all rungs up to date.");
      }
      if (state.status(rung).state() != RungStatus.State.MISSING) {
        state.status(rung).reasons().forEach(r -> text.add("Because " + r));
      }
    }
    int y = area.y() + 1;
    for (String paragraph : text) {
      for (String line : Wrap.wrap(paragraph, area.width() - 2)) {
        canvas.put(area.x() + 2, y, line, y == area.y() + 1 ? Ink.TITLE : Ink.FAINT, area.right());
        y++;
      }
    }
  }

  private static boolean hasHeadlines(Snapshot state) {
    return state.headlines().values().stream().anyMatch(h -> h.latest().isPresent());
  }

  /** The headline number with trend and best on the first line, the others on the second. */
  private void headlines(Canvas canvas, Area area, Snapshot state) {
    Glyphs g = canvas.glyphs();
    HeadlineHistory chief = state.headlines().get(look.headline);
    int x = area.x();
    if (chief.latest().isPresent()) {
      x = canvas.put(x, area.y(), look.headline.words + " ", Ink.TITLE, area.right());
      x =
          canvas.put(
              x,
              area.y(),
              Numbers.concise(chief.latest().get(), g.unicode()),
              Ink.STRONG,
              area.right());
      x = canvas.put(x + 1, area.y(), g.arrow(chief.trend()), Ink.STRONG, area.right());
      if (chief.best().isPresent()) {
        boolean now = chief.best().equals(chief.latest());
        String best =
            now ? "* best so far" : "best " + Numbers.concise(chief.best().get(), g.unicode());
        canvas.put(x + 2, area.y(), best, now ? Ink.GOOD : Ink.FAINT, area.right());
      }
    }
    x = area.x();
    for (Headline h : Headline.values()) {
      HeadlineHistory history = state.headlines().get(h);
      if (h != look.headline && history.latest().isPresent()) {
        boolean named = h == Headline.T2STAR || h == Headline.SNR || area.width() >= 70;
        String text =
            (named ? h.words + " " : "")
                + Numbers.si(
                    history.latest().get().value(),
                    history.latest().get().unit().pretty(),
                    h == Headline.FREQUENCY ? 7 : 3)
                + g.arrow(history.trend()).charAt(0);
        if (x + text.length() <= area.right()) {
          x =
              canvas.put(x, area.y() + 1, text, Ink.PLAIN, area.right())
                  + (area.width() >= 70 ? 2 : 1);
        }
      }
    }
  }
}
