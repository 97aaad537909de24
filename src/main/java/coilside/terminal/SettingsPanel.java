package coilside.terminal;

import coilside.bench.Desk;
import coilside.bench.Rung;
import coilside.board.BoardLimits;
import java.util.ArrayList;
import java.util.List;
import java.util.function.BiConsumer;
import java.util.function.Supplier;
import java.util.stream.Collectors;

/** Sample and settings, edited in place; shows what a change would make stale before it is made. */
final class SettingsPanel implements Panel {
  private static final int LONGEST = 100;

  /** A line of the panel: a bench setting, or a number of the screen's own. */
  private record Row(
      String name,
      Supplier<String> shown,
      String allowed,
      java.util.function.Function<String, List<Rung>> stale,
      java.util.function.Consumer<String> apply) {}

  private final Desk desk;
  private final BiConsumer<Boolean, String> tell;
  private final List<Row> rows = new ArrayList<>();
  private int chosen;
  private StringBuilder typed;

  SettingsPanel(Desk desk, Look look, BiConsumer<Boolean, String> tell) {
    this.desk = desk;
    this.tell = tell;
    for (SettingField f : SettingField.all(desk.limits())) {
      rows.add(
          new Row(
              f.name(),
              () -> f.shown().apply(desk.settings()),
              f.allowed(),
              t -> desk.wouldGoStale(f.change().apply(desk.settings(), t)),
              t -> desk.apply(f.change().apply(desk.settings(), t))));
    }
    rows.add(
        own(
            "live memory",
            () -> look.memoryScans + (look.memoryScans == 1 ? " scan" : " scans"),
            1,
            1000,
            v -> look.memoryScans = (int) v));
    rows.add(
        own(
            "FID scans",
            () -> Integer.toString(look.fidScans),
            1,
            1e6,
            v -> look.fidScans = (int) v));
    rows.add(
        own(
            "log scans",
            () -> Integer.toString(look.logScans),
            1,
            1e5,
            v -> look.logScans = (int) v));
    rows.add(
        new Row(
            "log every",
            () -> Numbers.trimmed(look.logEverySeconds, "s"),
            "0.1 s to 24 h",
            t ->
                checked(
                    SettingField.within(t, "s", 1, new BoardLimits.Range(0.1, 86400, 0), "30 s")),
            t ->
                look.logEverySeconds =
                    SettingField.within(t, "s", 1, new BoardLimits.Range(0.1, 86400, 0), "30 s")));
  }

  private static List<Rung> checked(double ignored) {
    return List.of();
  }

  private static Row own(
      String name,
      Supplier<String> shown,
      double min,
      double max,
      java.util.function.DoubleConsumer set) {
    BoardLimits.Range range = new BoardLimits.Range(min, max, 1);
    return new Row(
        name,
        shown,
        Numbers.si(min, "", 1) + " to " + (long) max,
        t -> checked(SettingField.within(t.replaceFirst("scans?", ""), "", 1, range, "16")),
        t -> set.accept(SettingField.within(t.replaceFirst("scans?", ""), "", 1, range, "16")));
  }

  @Override
  public String title() {
    return "Sample and settings";
  }

  @Override
  public String keys() {
    return typed == null
        ? "up/down or n/b choose  Enter or e edit  q back"
        : "Enter take it over  Ctrl-U empty it  Esc or Ctrl-G leave it as it was";
  }

  @Override
  public void draw(Canvas canvas, Area area, Snapshot state) {
    int top = Math.max(0, chosen - Math.max(1, area.height() - 5) + 1);
    int y = area.y();
    for (int i = top; i < rows.size() && y < area.bottom() - 4; i++) {
      Row row = rows.get(i);
      boolean here = i == chosen;
      canvas.put(area.x(), y, here ? canvas.glyphs().pointer() : ' ', Ink.STRONG);
      canvas.put(area.x() + 2, y, row.name(), here ? Ink.TITLE : Ink.PLAIN, area.x() + 21);
      if (here && typed != null) {
        int room = Math.max(1, area.right() - area.x() - 23);
        String text = typed.substring(Math.max(0, typed.length() - room));
        int x = canvas.put(area.x() + 22, y, text, Ink.STRONG, area.right());
        canvas.put(x, y, '_', Ink.NEXT);
      } else {
        canvas.put(
            area.x() + 22, y, row.shown().get(), here ? Ink.STRONG : Ink.PLAIN, area.right());
      }
      y++;
    }
    Row row = rows.get(chosen);
    canvas.put(area.x(), area.bottom() - 3, "Allowed: " + row.allowed(), Ink.FAINT, area.right());
    if (typed != null) {
      consequence(canvas, area, row);
    } else if (desk.busy()) {
      canvas.put(
          area.x(),
          area.bottom() - 1,
          "Busy: stop (s) before changing bench settings.",
          Ink.CARE,
          area.right());
    }
  }

  private void consequence(Canvas canvas, Area area, Row row) {
    String text;
    Ink ink;
    try {
      List<Rung> stale = row.stale().apply(typed.toString());
      text =
          stale.isEmpty()
              ? "Makes nothing stale."
              : "Would make stale: "
                  + stale.stream().map(Rung::id).collect(Collectors.joining(", "));
      ink = stale.isEmpty() ? Ink.GOOD : Ink.CARE;
    } catch (IllegalArgumentException e) {
      text = e.getMessage();
      ink = Ink.BAD;
    }
    List<String> lines = Wrap.wrap(text, area.width());
    for (int i = 0; i < Math.min(2, lines.size()); i++) {
      canvas.put(area.x(), area.bottom() - 2 + i, lines.get(i), ink, area.right());
    }
  }

  @Override
  public boolean key(Key key) {
    if (typed != null) {
      type(key);
      return true;
    }
    if (key.is(Key.Name.DOWN) || key.is('n') || key.is(Key.Name.TAB)) {
      chosen = (chosen + 1) % rows.size();
    } else if (key.is(Key.Name.UP) || key.is('b') || key.is(Key.Name.BACK_TAB)) {
      chosen = Math.floorMod(chosen - 1, rows.size());
    } else if (key.is(Key.Name.ENTER) || key.is('e')) {
      typed = new StringBuilder(rows.get(chosen).shown().get());
    } else {
      return !key.goesBack();
    }
    return true;
  }

  private void type(Key key) {
    if (key.is(Key.Name.ENTER)) {
      Row row = rows.get(chosen);
      try {
        List<Rung> stale = row.stale().apply(typed.toString());
        row.apply().accept(typed.toString());
        tell.accept(
            false,
            row.name()
                + " is now "
                + row.shown().get()
                + (stale.isEmpty()
                    ? "."
                    : "; "
                        + stale.size()
                        + (stale.size() == 1 ? " rung is" : " rungs are")
                        + " stale, r measures."));
        typed = null;
      } catch (IllegalArgumentException | IllegalStateException e) {
        tell.accept(true, e.getMessage());
      }
    } else if (key.is(Key.Name.ESCAPE) || key.isCtrl('g')) {
      typed = null;
    } else if (key.isCtrl('u')) {
      typed.setLength(0);
    } else if (key.is(Key.Name.BACKSPACE)) {
      typed.setLength(Math.max(0, typed.length() - 1));
    } else if (key.is(Key.Name.CHARACTER)
        && !key.ctrl()
        && !Character.isISOControl(key.character())
        && typed.length() < LONGEST) {
      typed.append(key.character());
    }
  }
}
