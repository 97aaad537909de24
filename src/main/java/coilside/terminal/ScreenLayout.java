package coilside.terminal;

import coilside.bench.Desk;
import coilside.bench.Finding;
import coilside.bench.Rung;
import coilside.bench.Work;
import coilside.quantity.Measured;
import java.time.Instant;
import java.time.InstantSource;
import java.time.ZoneId;
import java.time.format.DateTimeFormatter;
import java.util.List;
import java.util.Locale;
import java.util.Optional;

/** Divides the screen and draws its fixed parts: top line, shot, ladder, picture, message, keys. */
final class ScreenLayout {
  private static final DateTimeFormatter TIME =
      DateTimeFormatter.ofPattern("HH:mm:ss", Locale.ROOT).withZone(ZoneId.systemDefault());
  private static final int LADDER_WIDTH = 31;
  private final Desk desk;
  private final Look look;
  private final PictureView pictures;
  private final List<Action> actions;
  private final InstantSource clock;
  private Area ladderArea = new Area(0, 0, 0, 0);

  ScreenLayout(
      Desk desk, Look look, PictureView pictures, List<Action> actions, InstantSource clock) {
    this.desk = desk;
    this.look = look;
    this.pictures = pictures;
    this.actions = actions;
    this.clock = clock;
  }

  void draw(Canvas canvas, Snapshot state, Optional<Panel> panel) {
    Instant now = clock.instant();
    int w = canvas.width();
    int h = canvas.height();
    topLine(canvas, state);
    if (panel.isPresent() && panel.get().fillsScreen()) {
      panel.get().draw(canvas, new Area(1, 2, w - 2, h - 5), state);
    } else {
      int shotRows = h >= 40 ? 7 : h >= 30 ? 6 : 5;
      double[] t90 = t90(state);
      ShotView.draw(canvas, new Area(1, 1, w - 2, shotRows), state, t90[0], t90[1], now);
      Area middle = new Area(0, 1 + shotRows, w, h - 3 - shotRows);
      int ladder = look.wide && panel.isEmpty() ? 0 : w >= 120 ? LADDER_WIDTH + 10 : LADDER_WIDTH;
      ladderArea = new Area(0, middle.y(), Math.max(0, ladder - 1), middle.height());
      if (ladder > 0) {
        LadderView.draw(canvas, ladderArea, state, look.chosen, now);
      }
      Area rest = new Area(ladder, middle.y(), w - ladder, middle.height());
      if (panel.isPresent()) {
        canvas.put(rest.x() + 1, rest.y(), panel.get().title(), Ink.TITLE, rest.right());
        panel
            .get()
            .draw(
                canvas,
                new Area(rest.x() + 1, rest.y() + 1, rest.width() - 2, rest.height() - 1),
                state);
      } else {
        pictures.draw(canvas, rest, state);
      }
    }
    message(canvas, state, h - 2);
    keys(canvas, h - 1, panel);
  }

  /** The rung drawn at that cell. */
  Optional<Rung> rungAt(int column, int row) {
    if (column >= ladderArea.right()) {
      return Optional.empty();
    }
    return LadderView.rungAt(ladderArea, row);
  }

  /** The 90-degree pulse and the amplitude it holds at; NaN when the bench does not know it. */
  private static double[] t90(Snapshot state) {
    Optional<Finding> f = state.status(Rung.NUTATION).finding();
    if (f.isPresent() && f.get().values().containsKey("pulse_90")) {
      return new double[] {f.get().value("pulse_90").value(), f.get().conditions().amplitude()};
    }
    return new double[] {Double.NaN, Double.NaN};
  }

  private void topLine(Canvas canvas, Snapshot state) {
    int w = canvas.width();
    String right;
    boolean armed = desk.armed();
    boolean simulated = desk.board().simulated();
    if (simulated) {
      right = "SIMULATED, armed";
    } else {
      right = armed ? "ARMED, may transmit" : "locked, may not transmit";
    }
    String doing = doing(state);
    int x = w - 1 - right.length();
    canvas.put(x, 0, right, armed && !simulated ? Ink.CARE : Ink.STRONG, w);
    int end = x - 2;
    Ink doingInk = state.running() ? Ink.NEXT : Ink.FAINT;
    canvas.putRight(end, 0, doing, doingInk, end - doing.length());
    end -= doing.length() + 2;
    String carrier = carrier(state);
    String sample = desk.settings().sample();
    String name = desk.board().profileName();
    int left = 1;
    int room = end - left;
    int forName = Math.max(8, room - carrier.length() - Math.min(16, sample.length()) - 4);
    left = canvas.put(left, 0, name, Ink.TITLE, Math.min(end, left + forName)) + 2;
    left = canvas.put(left, 0, carrier, Ink.PLAIN, end) + 2;
    canvas.put(left, 0, sample.isEmpty() ? "no sample named" : sample, Ink.PLAIN, end);
  }

  private static String carrier(Snapshot state) {
    double hertz = Double.NaN;
    Optional<Finding> f = state.status(Rung.RESONANCE).finding();
    if (state.shot().isPresent()) {
      hertz = state.shot().get().carrierHertz();
    } else if (f.isPresent() && f.get().values().containsKey("larmor_frequency")) {
      Measured m = f.get().value("larmor_frequency");
      hertz = m.value();
    }
    return Double.isNaN(hertz) ? "no carrier yet" : Numbers.si(hertz, "Hz", 7);
  }

  static String doing(Snapshot state) {
    if (state.work().isEmpty()) {
      return "idle";
    }
    String rung = state.measuring().map(Rung::id).orElse("");
    Work work = state.work().get();
    if (work instanceof Work.Ready) {
      return rung.isEmpty() ? "ready" : "ready: " + rung;
    }
    if (work instanceof Work.Measure m) {
      return rung.isEmpty() ? m.rung().id() : rung;
    }
    if (work instanceof Work.Live live) {
      return live.transmit() ? "live" : "listening";
    }
    return work instanceof Work.Log ? "logging" : "taking FID";
  }

  static String noteText(Snapshot.Note n) {
    return TIME.format(n.when()) + (n.warning() ? " ! " : "   ") + n.text();
  }

  private static void message(Canvas canvas, Snapshot state, int y) {
    if (state.notes().isEmpty()) {
      canvas.put(1, y, "Press r to bring the bench up to date, ? for help.", Ink.FAINT);
      return;
    }
    Snapshot.Note last = state.notes().get(state.notes().size() - 1);
    String text = noteText(last);
    boolean cut = text.length() > canvas.width() - 2;
    String more = "  h: all of it";
    int end = cut ? canvas.width() - 1 - more.length() : canvas.width() - 1;
    canvas.put(1, y, text, last.warning() ? Ink.CARE : Ink.PLAIN, end);
    if (cut) {
      canvas.put(end, y, more, Ink.FAINT);
    }
  }

  private void keys(Canvas canvas, int y, Optional<Panel> panel) {
    int w = canvas.width();
    if (panel.isPresent()) {
      canvas.put(1, y, panel.get().keys(), Ink.FAINT);
      return;
    }
    String tail = "?help /find q quit";
    int end = w - 1 - tail.length();
    int x = 1;
    for (Action a : actions) {
      if (a.brief().isEmpty() || !a.works().getAsBoolean() || a.keyText().length() > 3) {
        continue;
      }
      if ("?/q".contains(a.keyText())
          || Character.isDigit(a.keyText().charAt(0)) && !a.key().is('0')) {
        continue;
      }
      int need = a.keyText().length() + 1 + a.brief().length() + 2;
      if (x + need > end) {
        break;
      }
      x = canvas.put(x, y, a.keyText(), Ink.STRONG);
      x = canvas.put(x + 1, y, a.brief(), Ink.FAINT) + 2;
    }
    canvas.put(end, y, tail, Ink.FAINT);
  }
}
