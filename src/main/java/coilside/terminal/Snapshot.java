package coilside.terminal;

import coilside.bench.Picture;
import coilside.bench.Progress;
import coilside.bench.Rung;
import coilside.bench.RungStatus;
import coilside.bench.Work;
import coilside.shot.Shot;
import coilside.signal.Scan;
import java.time.Duration;
import java.time.Instant;
import java.util.List;
import java.util.Map;
import java.util.Optional;

/** The latest state of the bench as one frame shows it. */
record Snapshot(
    long version,
    List<RungStatus> ladder,
    Map<Rung, Picture> pictures,
    Optional<Picture> live,
    Optional<Work> work,
    Optional<Rung> measuring,
    Optional<Shot> shot,
    Instant shotStarted,
    boolean shotRunning,
    int scan,
    int scans,
    double peakFraction,
    int clippedSamples,
    Optional<Scan> lastScan,
    Optional<Progress.Step> step,
    Instant stepTaken,
    List<Note> notes,
    LogSeries log,
    Map<Headline, HeadlineHistory> headlines) {

  /** A message with its time. */
  record Note(Instant when, boolean warning, String text) {}

  /** Seconds left by the last estimate, counted down since it was made; NaN when unknown. */
  double secondsLeft(Instant now) {
    if (step.isEmpty() || Double.isNaN(step.get().secondsLeft())) {
      return Double.NaN;
    }
    double since = Math.max(0, Duration.between(stepTaken, now).toMillis() / 1e3);
    return Math.max(0, step.get().secondsLeft() - since);
  }

  boolean running() {
    return work.isPresent();
  }

  RungStatus status(Rung rung) {
    for (RungStatus s : ladder) {
      if (s.rung() == rung) {
        return s;
      }
    }
    return new RungStatus(rung, RungStatus.State.MISSING, Optional.empty(), List.of());
  }
}
