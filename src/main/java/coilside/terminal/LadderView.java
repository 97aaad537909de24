package coilside.terminal;

import coilside.bench.Finding;
import coilside.bench.Rung;
import coilside.bench.RungStatus;
import coilside.quantity.Measured;
import java.time.Duration;
import java.time.Instant;
import java.util.List;
import java.util.Locale;
import java.util.Optional;

/** Draws the ladder: each rung with mark, state, age and its chief value. */
final class LadderView {
  private LadderView() {}

  /** The values shown first, the most important at the front. */
  static List<String> chief(Rung rung) {
    return switch (rung) {
      case NOISE -> List.of("noise_density", "dc_offset");
      case RESONANCE -> List.of("larmor_frequency", "field", "snr");
      case GAIN -> List.of("receiver_gain", "peak_fraction");
      case RINGDOWN -> List.of("receive_delay", "ring_down_time");
      case NUTATION -> List.of("pulse_90", "nutation_rate", "b1", "b1_spread");
      case T1 -> List.of("t1", "repetition_time");
      case T2STAR -> List.of("t2_star", "linewidth", "snr", "field_spread");
      case T2 -> List.of("t2", "echo_spacing");
    };
  }

  static Ink ink(RungStatus.State state) {
    return switch (state) {
      case FRESH -> Ink.GOOD;
      case STALE -> Ink.CARE;
      case REFUSED -> Ink.BAD;
      case MISSING -> Ink.FAINT;
    };
  }

  static String word(RungStatus.State state) {
    return state.name().toLowerCase(Locale.ROOT);
  }

  static String age(Optional<Finding> finding, Instant now) {
    return finding.map(f -> Numbers.age(Duration.between(f.started(), now))).orElse("");
  }

  /** A short label before the value, where the rung's name does not say what it is. */
  private static String label(String name, Glyphs glyphs) {
    return switch (name) {
      case "pulse_90" -> "90" + glyphs.degree() + " ";
      case "receive_delay" -> "delay ";
      case "field" -> "B0 ";
      case "repetition_time" -> "repeat every ";
      case "dc_offset" -> "DC ";
      case "peak_fraction" -> "peak ";
      case "ring_down_time" -> "rings ";
      case "nutation_rate" -> "rate ";
      case "b1_spread" -> "B1 spread ";
      case "b1" -> "B1 ";
      case "snr" -> "SNR ";
      case "linewidth" -> "width ";
      case "field_spread" -> "spread ";
      case "echo_spacing" -> "spacing ";
      default -> "";
    };
  }

  static String value(Finding finding, String name, Glyphs glyphs) {
    Measured m = finding.values().get(name);
    return m == null ? "" : label(name, glyphs) + Numbers.named(name, m, glyphs.unicode());
  }

  private static int linesEach(Area area) {
    return Math.max(1, Math.min(5, area.height() / Rung.values().length));
  }

  static Optional<Rung> rungAt(Area area, int row) {
    int i = Math.floorDiv(row - area.y(), linesEach(area));
    return i >= 0 && i < Rung.values().length ? Optional.of(Rung.values()[i]) : Optional.empty();
  }

  static void draw(Canvas canvas, Area area, Snapshot state, Rung chosen, Instant now) {
    Glyphs glyphs = canvas.glyphs();
    Rung[] rungs = Rung.values();
    int lines = linesEach(area);
    int y = area.y();
    for (Rung rung : rungs) {
      RungStatus s = state.status(rung);
      boolean here = rung == chosen;
      boolean measuring = state.measuring().filter(r -> r == rung).isPresent();
      canvas.put(area.x(), y, here ? glyphs.pointer() : ' ', Ink.STRONG);
      canvas.put(
          area.x() + 1, y, rung.ordinal() + 1 + " " + rung.id(), here ? Ink.CHOSEN : Ink.STRONG);
      Ink ink = measuring ? Ink.NEXT : ink(s.state());
      String word = measuring ? "measuring" : word(s.state());
      canvas.put(area.x() + 13, y, glyphs.mark(s.state()) + " " + word, ink, area.right());
      if (!measuring) {
        canvas.putRight(area.right(), y, age(s.finding(), now), Ink.FAINT, area.x() + 23);
      }
      int line = 1;
      if (s.finding().isPresent() && !s.finding().get().refused()) {
        for (String name : chief(rung)) {
          String text = value(s.finding().get(), name, glyphs);
          if (line < lines && !text.isEmpty()) {
            Ink valueInk = s.state() == RungStatus.State.FRESH ? Ink.PLAIN : Ink.FAINT;
            canvas.put(area.x() + 4, y + line++, text, valueInk, area.right());
          }
        }
      }
      if (line < lines && !s.reasons().isEmpty() && s.state() != RungStatus.State.MISSING) {
        canvas.put(area.x() + 4, y + line, s.reasons().get(0), ink(s.state()), area.right());
      }
      y += lines;
    }
  }
}
