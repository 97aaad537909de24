package coilside.command;

import coilside.bench.Progress;
import java.time.Duration;
import java.time.Instant;
import java.util.Locale;
import java.util.function.Consumer;

/**
 * Progress of long work on the error stream: on a terminal a line with a bar that is overwritten,
 * elsewhere one line a rung.
 */
final class ProgressLine implements Consumer<Progress> {
  private static final int WIDTH = 24;
  private static final Duration BETWEEN = Duration.ofMillis(100);

  private final Output output;
  private String rung = "";
  private double fraction = Double.NaN;
  private double secondsLeft = Double.NaN;
  private int scans;
  private Instant last = Instant.EPOCH;

  ProgressLine(Output output) {
    this.output = output;
  }

  @Override
  public void accept(Progress event) {
    if (event instanceof Progress.RungStarted e) {
      rung = e.rung().id();
      scans = 0;
      if (!output.progressTerminal()) {
        output.aside("measuring " + rung + " (" + e.rung().title() + ")");
      }
    } else if (event instanceof Progress.Step e) {
      if (!Double.isNaN(e.fraction())) {
        fraction = e.fraction();
      }
      secondsLeft = e.secondsLeft();
    } else if (event instanceof Progress.ScanArrived) {
      scans++;
      draw();
    } else if (event instanceof Progress.Message e && e.warning()) {
      output.clearProgress();
      output.aside(e.text());
    } else if (event instanceof Progress.RungEnded e) {
      output.clearProgress();
      if (output.progressTerminal()) {
        output.aside(
            String.format(
                Locale.ROOT,
                "%-10s %-8s %3d scans, %.1f s",
                e.finding().rung().id(),
                e.finding().refused() ? "refused" : "fresh",
                e.finding().scans(),
                e.finding().seconds()));
      }
    }
  }

  private void draw() {
    Instant now = Instant.now();
    if (Duration.between(last, now).compareTo(BETWEEN) < 0) {
      return;
    }
    last = now;
    StringBuilder bar = new StringBuilder();
    int full = Double.isNaN(fraction) ? 0 : (int) Math.round(fraction * WIDTH);
    bar.append('[').append("#".repeat(full)).append(".".repeat(WIDTH - full)).append("] ");
    bar.append(rung).append(", scan ").append(scans);
    if (!Double.isNaN(secondsLeft)) {
      bar.append(String.format(Locale.ROOT, ", about %.0f s left", secondsLeft));
    }
    output.progress(bar.toString());
  }
}
