package coilside.terminal;

import coilside.bench.Rung;
import coilside.bench.Work;
import java.util.ArrayList;
import java.util.List;

/** The texts of the help and of the message log, and what is said about kinds of work. */
final class ScreenTexts {
  private ScreenTexts() {}

  static TextPanel messages() {
    return new TextPanel(
        "Messages, newest last",
        state -> {
          List<TextPanel.Line> lines = new ArrayList<>();
          for (Snapshot.Note n : state.notes()) {
            Ink ink = n.warning() ? Ink.CARE : Ink.PLAIN;
            lines.add(new TextPanel.Line(ScreenLayout.noteText(n), ink));
          }
          if (lines.isEmpty()) {
            lines.add(new TextPanel.Line("No messages yet.", Ink.FAINT));
          }
          return lines;
        },
        true);
  }

  /** The keys that work now. */
  static TextPanel help(List<Action> actions) {
    return new TextPanel(
        "Keys that work now",
        state -> {
          List<TextPanel.Line> lines = new ArrayList<>();
          for (Action a : actions) {
            if (a.works().getAsBoolean()) {
              String line = String.format("%7s  %s", a.keyText(), a.what());
              lines.add(new TextPanel.Line(line, Ink.PLAIN));
            }
          }
          lines.add(
              new TextPanel.Line(" Ctrl-C  Quit at once; work in hand is stopped", Ink.PLAIN));
          return lines;
        },
        false);
  }

  static boolean transmits(Work work) {
    if (work instanceof Work.Measure m) {
      return m.rung() != Rung.NOISE;
    }
    return !(work instanceof Work.Live live) || live.transmit();
  }
}
