package coilside.terminal;

import coilside.bench.Progress;
import coilside.bench.Work;
import coilside.shot.Shot;
import java.time.Duration;
import java.time.Instant;
import java.util.List;
import java.util.Locale;

/** Draws the shot with its moving mark, and the line that counts scans and time left below it. */
final class ShotView {
  private ShotView() {}

  static void draw(
      Canvas canvas, Area area, Snapshot state, double t90, double t90Amplitude, Instant now) {
    Glyphs g = canvas.glyphs();
    int boxRows = Math.max(1, area.height() - 4);
    int axisRow = area.y() + 1 + boxRows;
    if (state.shot().isPresent()) {
      Shot shot = state.shot().get();
      List<ShotStrip.Part> parts = ShotStrip.layOut(shot, area.width(), t90, t90Amplitude, g);
      for (ShotStrip.Part p : parts) {
        drawPart(canvas, area, p, boxRows, axisRow);
      }
      if (state.shotRunning()) {
        double elapsed = Duration.between(state.shotStarted(), now).toNanos() / 1e9;
        int column = ShotStrip.column(parts, Math.min(elapsed, shot.seconds()));
        canvas.put(area.x() + column, axisRow, g.here(), Ink.STRONG);
      }
    } else {
      canvas.put(
          area.x() + 2, area.y() + 1, "No shot has been played yet.", Ink.FAINT, area.right());
    }
    counts(canvas, area, state, area.bottom() - 1, now);
  }

  private static void drawPart(
      Canvas canvas, Area area, ShotStrip.Part p, int boxRows, int axisRow) {
    Glyphs g = canvas.glyphs();
    int x = area.x() + p.column();
    int end = x + p.columns();
    Ink ink =
        switch (p.kind()) {
          case PULSE -> Ink.CARE;
          case RECEIVE -> Ink.SIGNAL;
          default -> Ink.FAINT;
        };
    centre(canvas, x, end, area.y(), p.above(), ink);
    Area box = new Area(x, area.y() + 1, p.columns(), boxRows);
    switch (p.kind()) {
      case PULSE ->
          canvas.fill(new Area(x, box.y(), Math.max(1, p.columns() - 1), boxRows), g.pulse(), ink);
      case RECEIVE ->
          canvas.fill(
              new Area(x, box.bottom() - 1, Math.max(1, p.columns() - 1), 1), g.window(), ink);
      case LEFT_OUT -> centre(canvas, x, end, box.bottom() - 1, ". . .", ink);
      default -> {
        /* nothing is sent or received */
      }
    }
    for (int i = x; i < end; i++) {
      canvas.put(i, axisRow, p.toScale() ? g.horizontal() : g.dotted(), Ink.AXIS);
    }
    if (p.columns() > 0) {
      canvas.put(x, axisRow, g.tick(), Ink.AXIS);
    }
    if (p.cut() || p.kind() == ShotStrip.Kind.LEFT_OUT) {
      centre(canvas, x, end, axisRow, "//", Ink.AXIS);
    }
    String length = Numbers.si(p.seconds(), "s", 3).replace(" ", "");
    if (length.length() < p.columns()) {
      centre(canvas, x, end, axisRow + 1, length, Ink.FAINT);
    } else if (p.columns() > 3) {
      String shorter = Numbers.si(p.seconds(), "s", 2).replace(" ", "");
      if (shorter.length() < p.columns() + 1) {
        centre(canvas, x, end, axisRow + 1, shorter, Ink.FAINT);
      }
    }
  }

  /** Centres the first of the wordings, divided by bars, that fits; else the last, cut. */
  private static void centre(Canvas canvas, int from, int end, int y, String wordings, Ink ink) {
    String text = "";
    for (String wording : wordings.split("\\|")) {
      text = wording;
      if (text.length() < end - from) {
        break;
      }
    }
    int x = from + Math.max(0, (end - from - 1 - text.length()) / 2);
    canvas.put(x, y, text, ink, Math.max(x, end - (text.length() >= end - from ? 0 : 1)));
  }

  private static void counts(Canvas canvas, Area area, Snapshot state, int y, Instant now) {
    Glyphs g = canvas.glyphs();
    int x = area.x();
    if (state.running() && state.shot().isPresent() && state.shotRunning()) {
      String scan =
          state.scans() > 0
              ? "scan " + (state.scan() + 1) + " of " + state.scans()
              : "scan " + (state.scan() + 1);
      x = canvas.put(x, y, scan, Ink.STRONG, area.right()) + 2;
    }
    int end = area.right();
    if (!Double.isNaN(state.peakFraction())) {
      String adc = adcText(state, g);
      Ink ink =
          state.clippedSamples() > 0 ? Ink.BAD : state.peakFraction() > 0.9 ? Ink.CARE : Ink.GOOD;
      canvas.putRight(end, y, adc, ink, Math.max(x, end - adc.length()));
      end -= adc.length() + 2;
    }
    double rest = untilNextRow(state, now);
    if (rest > 0) {
      canvas.put(x, y, "waiting, next row in " + Numbers.clock(rest), Ink.PLAIN, end);
    } else if (state.step().isPresent()) {
      Progress.Step step = state.step().get();
      if (!Double.isNaN(step.fraction())) {
        int bar = Math.max(6, area.width() / 10);
        int full = (int) Math.round(bar * Math.max(0, Math.min(1, step.fraction())));
        for (int i = 0; i < bar; i++) {
          canvas.put(x + i, y, i < full ? g.full() : g.empty(), Ink.SIGNAL);
        }
        x += bar + 1;
        x = canvas.put(x, y, Math.round(100 * step.fraction()) + " %", Ink.PLAIN, end) + 2;
      }
      double left = state.secondsLeft(now);
      if (!Double.isNaN(left)) {
        x = canvas.put(x, y, Numbers.clock(left) + " left", Ink.PLAIN, end) + 2;
      }
      canvas.put(x, y, step.what(), Ink.PLAIN, end);
    }
  }

  /** Seconds until the log takes its next row, while it waits for that; else 0 or NaN. */
  private static double untilNextRow(Snapshot state, Instant now) {
    boolean shotOver =
        state.shot().isEmpty()
            || Duration.between(state.shotStarted(), now).toMillis() / 1e3
                > state.shot().get().seconds() + 1;
    if (shotOver && state.work().isPresent() && state.work().get() instanceof Work.Log log) {
      return state.log().newest() + log.every().toMillis() / 1e3 - now.toEpochMilli() / 1e3;
    }
    return 0;
  }

  private static String percent(double fraction) {
    double p = 100 * fraction;
    return p > 0 && p < 0.95
        ? String.format(Locale.ROOT, "%.1f %%", Math.max(0.1, p))
        : Math.round(p) + " %";
  }

  private static String adcText(Snapshot state, Glyphs g) {
    int full = (int) Math.round(8 * Math.max(0, Math.min(1, state.peakFraction())));
    String bar = String.valueOf(g.full()).repeat(full) + String.valueOf(g.empty()).repeat(8 - full);
    String text = "ADC " + bar + " " + percent(state.peakFraction());
    return state.clippedSamples() > 0 ? text + " CLIPS" : text;
  }
}
