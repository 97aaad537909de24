package coilside.terminal;

import coilside.bench.Picture;
import coilside.bench.Progress;
import coilside.bench.Rung;
import coilside.bench.RungStatus;
import coilside.bench.Work;
import coilside.quantity.Measured;
import coilside.shot.Shot;
import coilside.signal.Scan;
import java.time.Instant;
import java.time.InstantSource;
import java.util.ArrayDeque;
import java.util.Deque;
import java.util.EnumMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.function.Consumer;

/**
 * Keeps the latest state of the bench from its events. Events come on the bench's thread and only
 * ever wait for a snapshot being copied; the drawing thread takes snapshots. Many events between
 * two frames become one state.
 */
final class Watch implements Consumer<Progress> {
  private static final int NOTES_KEPT = 500;
  private final InstantSource clock;
  private long version;
  private List<RungStatus> ladder = List.of();
  private final Map<Rung, Picture> pictures = new EnumMap<>(Rung.class);
  private Picture live;
  private Work work;
  private Rung measuring;
  private Shot shot;
  private Instant shotStarted = Instant.EPOCH;
  private boolean shotRunning;
  private int scan;
  private int scans;
  private double peakFraction = Double.NaN;
  private int clippedSamples;
  private Scan lastScan;
  private Instant stepTaken = Instant.EPOCH;
  private Progress.Step step;
  private final Deque<Snapshot.Note> notes = new ArrayDeque<>();
  private final LogSeries log = new LogSeries();
  private final Map<Headline, HeadlineHistory> headlines = new EnumMap<>(Headline.class);

  Watch(InstantSource clock) {
    this.clock = clock;
    clearHeadlines();
  }

  @Override
  public synchronized void accept(Progress event) {
    version++;
    take(event);
  }

  private void take(Progress event) {
    if (event instanceof Progress.RungStarted e) {
      measuring = e.rung();
      pictures.remove(e.rung());
    } else if (event instanceof Progress.ShotStarted e) {
      shot = e.shot();
      shotStarted = clock.instant();
      shotRunning = true;
      scan = e.scan();
      scans = e.scans();
    } else if (event instanceof Progress.ScanArrived e) {
      peakFraction = e.scan().peakFraction();
      clippedSamples = e.scan().clippedSamples();
      lastScan = e.scan();
    } else if (event instanceof Progress.PictureChanged e) {
      if (work instanceof Work.Live || work instanceof Work.TakeFid || work instanceof Work.Log) {
        live = e.picture();
      } else {
        pictures.put(e.picture().rung(), e.picture());
      }
    } else if (event instanceof Progress.Step e) {
      step = e;
      stepTaken = clock.instant();
    } else if (event instanceof Progress.RungEnded e) {
      measuring = null;
    } else if (event instanceof Progress.LadderChanged e) {
      ladder = List.copyOf(e.ladder());
    } else if (event instanceof Progress.LogRowKept e) {
      log.add(e.row());
    } else if (event instanceof Progress.Message e) {
      note(e.warning(), e.text());
    } else if (event instanceof Progress.WorkEnded e) {
      String what = e.reason().orElse(e.done() ? doneText() : "Ended.");
      work = null;
      measuring = null;
      shotRunning = false;
      step = null;
      note(!e.done(), what);
    }
  }

  private String doneText() {
    if (work instanceof Work.Ready) {
      return "The bench is ready: every rung is up to date.";
    }
    if (work instanceof Work.Measure m) {
      return "Measured: " + m.rung().id() + ".";
    }
    return work instanceof Work.TakeFid ? "The FID is taken and kept." : "Done.";
  }

  synchronized void note(boolean warning, String text) {
    version++;
    if (notes.size() == NOTES_KEPT) {
      notes.removeFirst();
    }
    notes.addLast(new Snapshot.Note(clock.instant(), warning, text));
  }

  synchronized void workBegun(Work begun) {
    version++;
    work = begun;
    step = null;
    shotRunning = false;
  }

  /** Called when the desk turned the work down after all. */
  synchronized void workRefused() {
    version++;
    work = null;
  }

  synchronized void ladder(List<RungStatus> now) {
    version++;
    ladder = List.copyOf(now);
  }

  synchronized void picture(Picture picture) {
    version++;
    pictures.putIfAbsent(picture.rung(), picture);
  }

  /** The picture of what runs live, for the drawing thread to take its numbers from. */
  synchronized Optional<Picture> livePicture() {
    return Optional.ofNullable(live);
  }

  synchronized void headlines(Map<Headline, Measured> numbers) {
    version++;
    numbers.forEach((name, value) -> headlines.get(name).add(value));
  }

  synchronized void clearHeadlines() {
    version++;
    for (Headline h : Headline.values()) {
      headlines.put(h, new HeadlineHistory(h));
    }
  }

  synchronized long version() {
    return version;
  }

  synchronized Optional<Work> snapshotWork() {
    return Optional.ofNullable(work);
  }

  synchronized Optional<Rung> snapshotMeasuring() {
    return Optional.ofNullable(measuring);
  }

  synchronized boolean hasPicture(Rung rung) {
    return pictures.containsKey(rung);
  }

  synchronized Snapshot snapshot() {
    Map<Headline, HeadlineHistory> copies = new EnumMap<>(Headline.class);
    headlines.forEach((k, v) -> copies.put(k, v.copy()));
    return new Snapshot(
        version,
        ladder,
        new EnumMap<>(pictures),
        Optional.ofNullable(live),
        Optional.ofNullable(work),
        Optional.ofNullable(measuring),
        Optional.ofNullable(shot),
        shotStarted,
        shotRunning,
        scan,
        scans,
        peakFraction,
        clippedSamples,
        Optional.ofNullable(lastScan),
        Optional.ofNullable(step),
        stepTaken,
        List.copyOf(notes),
        log,
        copies);
  }
}
