package coilside.terminal;

import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Repeat;
import coilside.shot.Shot;
import coilside.shot.Step;
import coilside.shot.Wait;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;

/**
 * Lays a shot out on a time axis: which columns each part takes, to scale where that can be, wider
 * or cut short where it cannot, and marked so.
 */
final class ShotStrip {
  enum Kind {
    REST,
    PULSE,
    WAIT,
    DEAD_TIME,
    RECEIVE,
    /** Several repeats left out of the drawing. */
    LEFT_OUT
  }

  /**
   * One part of the drawing.
   *
   * @param from when it starts after the start of the scan, s
   * @param seconds how long it takes
   * @param column first column
   * @param columns how many columns
   * @param toScale whether the columns tell its length
   * @param cut whether it is longer than drawn
   */
  record Part(
      Kind kind,
      double from,
      double seconds,
      String above,
      int column,
      int columns,
      boolean toScale,
      boolean cut) {
    private Part at(int firstColumn, int count, boolean scaled, boolean shortened) {
      return new Part(kind, from, seconds, above, firstColumn, count, scaled, shortened);
    }
  }

  private ShotStrip() {}

  /**
   * @param t90Seconds 90-degree pulse at full pulse amplitude of this bench, s; NaN when unknown
   */
  static List<Part> layOut(
      Shot shot, int width, double t90Seconds, double t90Amplitude, Glyphs glyphs) {
    List<Part> parts = new ArrayList<>();
    if (shot.restSeconds() > 0) {
      parts.add(part(Kind.REST, 0, shot.restSeconds(), "rest"));
    }
    int budget = Math.max(4, width / 9);
    collect(shot.steps(), shot.restSeconds(), parts, t90Seconds, t90Amplitude, glyphs, budget);
    nameDeadTime(parts);
    return spread(parts, width);
  }

  private static Part part(Kind kind, double from, double seconds, String above) {
    return new Part(kind, from, seconds, above, 0, 0, false, false);
  }

  private static void collect(
      List<Step> steps,
      double from,
      List<Part> parts,
      double t90,
      double t90Amplitude,
      Glyphs glyphs,
      int budget) {
    double t = from;
    for (Step step : steps) {
      if (step instanceof Pulse p) {
        parts.add(part(Kind.PULSE, t, p.seconds(), pulseText(p, t90, t90Amplitude, glyphs)));
      } else if (step instanceof Wait w) {
        if (w.seconds() > 0) {
          parts.add(part(Kind.WAIT, t, w.seconds(), ""));
        }
      } else if (step instanceof Receive r) {
        parts.add(part(Kind.RECEIVE, t, r.seconds(), "receive " + r.points() + "|" + r.points()));
      } else if (step instanceof Repeat r) {
        int perTurn = r.steps().size();
        int shown = Math.max(1, Math.min(r.count(), (budget - 2) / Math.max(1, perTurn)));
        double once = r.seconds() / r.count();
        double at = t;
        if (shown < r.count()) {
          for (int i = 0; i < shown; i++) {
            collect(r.steps(), at, parts, t90, t90Amplitude, glyphs, budget);
            at += once;
          }
          int left = r.count() - shown;
          parts.add(
              part(
                  Kind.LEFT_OUT,
                  at,
                  left * once,
                  glyphs.times() + left + " more|" + glyphs.times() + left));
        } else {
          for (int i = 0; i < r.count(); i++) {
            collect(r.steps(), at, parts, t90, t90Amplitude, glyphs, budget);
            at += once;
          }
        }
      }
      t += step.seconds();
    }
  }

  /** A wait between a pulse and a receive window is the dead time. */
  private static void nameDeadTime(List<Part> parts) {
    for (int i = 1; i + 1 < parts.size(); i++) {
      Part p = parts.get(i);
      if (p.kind() == Kind.WAIT
          && parts.get(i - 1).kind() == Kind.PULSE
          && parts.get(i + 1).kind() == Kind.RECEIVE) {
        parts.set(i, part(Kind.DEAD_TIME, p.from(), p.seconds(), "dead"));
      }
    }
  }

  private static String pulseText(Pulse p, double t90, double t90Amplitude, Glyphs glyphs) {
    String phase = phaseText(p.phaseRadians(), glyphs);
    if (t90 > 0 && t90Amplitude > 0) {
      double degrees = 90 * p.seconds() / t90 * p.amplitude() / t90Amplitude;
      return Math.round(degrees) + glyphs.degree() + phase;
    }
    return Numbers.si(p.seconds(), "s", 3).replace(" ", "") + phase;
  }

  /** Phases in quarters are named by axis: x, y, -x, -y. */
  private static String phaseText(double radians, Glyphs glyphs) {
    double quarter = radians / (Math.PI / 2);
    long q = Math.round(quarter);
    if (Math.abs(quarter - q) < 1e-6) {
      return " " + new String[] {"x", "y", "-x", "-y"}[(int) Math.floorMod(q, 4L)];
    }
    return String.format(Locale.ROOT, " %.0f%s", Math.toDegrees(radians), glyphs.degree());
  }

  private static int least(Part p) {
    return switch (p.kind()) {
      case PULSE -> Math.max(7, Math.min(10, p.above().length() + 2));
      case WAIT, DEAD_TIME -> 5;
      case RECEIVE -> 7;
      case REST -> 7;
      case LEFT_OUT -> 9;
    };
  }

  private static List<Part> spread(List<Part> parts, int width) {
    double total = parts.stream().mapToDouble(Part::seconds).sum();
    int[] least = parts.stream().mapToInt(ShotStrip::least).toArray();
    int needed = java.util.Arrays.stream(least).sum();
    if (needed > width) {
      for (int i = 0; i < least.length; i++) {
        least[i] = Math.max(1, least[i] * width / needed);
      }
    }
    double scale = scale(parts, least, width, total);
    List<Part> out = new ArrayList<>();
    int column = 0;
    for (int i = 0; i < parts.size(); i++) {
      Part p = parts.get(i);
      double ideal = p.seconds() / scale;
      int longest = longest(p, width);
      int columns = (int) Math.max(least[i], Math.min(longest, Math.round(ideal)));
      columns = Math.min(columns, width - column);
      boolean cut = ideal > longest + 1;
      boolean toScale = !cut && ideal > least[i] - 0.5 && p.kind() != Kind.LEFT_OUT;
      out.add(p.at(column, Math.max(0, columns), toScale, cut));
      column += columns;
    }
    return out;
  }

  private static int longest(Part p, int width) {
    return switch (p.kind()) {
      case REST -> Math.max(7, width / 4);
      case LEFT_OUT -> 14;
      case WAIT, DEAD_TIME -> Math.max(5, width / 3);
      case PULSE, RECEIVE -> width;
    };
  }

  /** Seconds a column: the finest scale at which everything fits into the width. */
  private static double scale(List<Part> parts, int[] least, int width, double total) {
    double fine = total / width * 1e-6;
    double coarse = total;
    for (int i = 0; i < 60; i++) {
      double middle = Math.sqrt(fine * coarse);
      int sum = 0;
      for (int k = 0; k < parts.size(); k++) {
        double ideal = parts.get(k).seconds() / middle;
        sum += (int) Math.max(least[k], Math.min(longest(parts.get(k), width), Math.round(ideal)));
      }
      if (sum <= width) {
        coarse = middle;
      } else {
        fine = middle;
      }
    }
    return coarse;
  }

  /** The column of a moment after the start of the scan. */
  static int column(List<Part> parts, double seconds) {
    int last = 0;
    for (Part p : parts) {
      if (seconds < p.from()) {
        break;
      }
      double f = p.seconds() > 0 ? (seconds - p.from()) / p.seconds() : 0;
      last = p.column() + (int) Math.min(Math.max(0, p.columns() - 1), Math.floor(f * p.columns()));
    }
    return last;
  }
}
