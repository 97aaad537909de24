package coilside.command;

import coilside.bench.Analysis;
import coilside.bench.BenchSettings;
import coilside.bench.Conditions;
import coilside.bench.Desk;
import coilside.bench.Finding;
import coilside.bench.KeepException;
import coilside.bench.LogRow;
import coilside.bench.Picture;
import coilside.bench.Progress;
import coilside.bench.Rung;
import coilside.bench.RungStatus;
import coilside.bench.Work;
import coilside.board.BoardIdentity;
import coilside.board.BoardLimits;
import coilside.record.BenchRecord;
import coilside.record.CaptureException;
import coilside.record.CaptureReader;
import coilside.record.RecordHeld;
import coilside.record.RecordView;
import java.time.Duration;
import java.time.Instant;
import java.time.InstantSource;
import java.util.EnumMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.concurrent.CopyOnWriteArrayList;
import java.util.concurrent.Executors;
import java.util.concurrent.ScheduledExecutorService;
import java.util.concurrent.TimeUnit;
import java.util.function.BooleanSupplier;
import java.util.function.Consumer;

/**
 * The desk of a bench that another coilside holds: shows what that one keeps, soon after it was
 * kept, and turns down everything else. Reads the record and the captures, changes neither.
 *
 * <p>One thread of its own looks for news and tells them.
 */
final class WatchDesk implements Desk {
  private static final long POLL_MILLISECONDS = 500;
  private static final int PAGE = 500;
  private static final int ROWS_SHOWN_AT_FIRST = 2000;
  private static final Duration LADDER_ANEW = Duration.ofSeconds(10);

  private final KnownLadder known;
  private final RecordView view;
  private final CommonOptions options;
  private final WatchedBench bench;
  private final String holder;
  private final BooleanSupplier holderAlive;
  private final InstantSource clock;
  private final List<Consumer<Progress>> listeners = new CopyOnWriteArrayList<>();
  private final Map<Rung, Picture> pictures = new EnumMap<>(Rung.class);
  private final ScheduledExecutorService poller =
      Executors.newSingleThreadScheduledExecutor(
          task -> {
            Thread thread = new Thread(task, "watch");
            thread.setDaemon(true);
            return thread;
          });
  private volatile List<RungStatus> ladder;
  private volatile BenchSettings settings;
  private volatile BoardIdentity board;
  private volatile boolean armed;
  private boolean first = true;
  private boolean toldOfEnd;
  private String toldTrouble = "";
  private long seenFinding;
  private long seenRow;
  private long seenEvent;
  private Instant ladderMade = Instant.MIN;

  private WatchDesk(
      KnownLadder known,
      RecordView view,
      CommonOptions options,
      String holder,
      BooleanSupplier holderAlive,
      InstantSource clock)
      throws KeepException {
    this.known = known;
    this.view = view;
    this.options = options;
    this.holder = holder;
    this.holderAlive = holderAlive;
    this.clock = clock;
    Optional<Conditions> last = known.lastConditions();
    this.bench = WatchedBench.of(options, last);
    this.ladder = known.ladder();
    this.settings = bench.settings(view);
    this.board = bench.identity(last, newest(), holder);
  }

  /**
   * Opens the record that another program holds.
   *
   * @throws KeepException when it cannot be read
   */
  static WatchDesk open(CommonOptions options, RecordHeld held, InstantSource clock)
      throws KeepException {
    RecordView view = BenchRecord.watch(options.captures);
    BooleanSupplier alive =
        () ->
            held.process().isEmpty()
                || ProcessHandle.of(held.process().getAsLong())
                    .map(ProcessHandle::isAlive)
                    .orElse(false);
    try {
      return new WatchDesk(
          KnownLadder.on(view, options), view, options, held.holder(), alive, clock);
    } catch (KeepException | RuntimeException e) {
      view.close();
      throw e;
    }
  }

  /** From now on looks for news by itself. */
  void start() {
    poller.scheduleWithFixedDelay(this::poll, 0, POLL_MILLISECONDS, TimeUnit.MILLISECONDS);
  }

  /** Looks for what was kept since last time, and tells it. */
  synchronized void poll() {
    try {
      if (first) {
        begin();
      }
      events();
      findings();
      rows();
      if (Duration.between(ladderMade, clock.instant()).compareTo(LADDER_ANEW) > 0) {
        ladderAnew();
      }
      if (!toldOfEnd && !holderAlive.getAsBoolean()) {
        toldOfEnd = true;
        say(
            true,
            "The one that held the bench has ended ("
                + holder
                + "). Leave and start again to measure.");
      }
      toldTrouble = "";
    } catch (KeepException | RuntimeException e) {
      if (!toldTrouble.equals(e.getMessage())) {
        toldTrouble = String.valueOf(e.getMessage());
        say(true, "The record cannot be read just now: " + toldTrouble);
      }
    }
  }

  private void begin() throws KeepException {
    say(false, "Watching: " + holder + " holds this bench. Nothing can be measured from here.");
    List<RecordView.LogRun> runs = view.runs();
    if (!runs.isEmpty()) {
      RecordView.LogRun newest = runs.get(runs.size() - 1);
      seenRow = Math.max(0, view.lastRow() - Math.min(newest.rows(), ROWS_SHOWN_AT_FIRST));
    }
    for (RungStatus status : ladder) {
      if (status.finding().isPresent()) {
        picture(status.finding().get().capture());
      }
    }
    seenFinding = view.lastFinding();
    ladderAnew();
    events();
    first = false;
  }

  private void events() throws KeepException {
    List<RecordView.Kept<RecordView.Event>> page;
    do {
      page = view.eventsAfter(seenEvent, PAGE);
      for (RecordView.Kept<RecordView.Event> kept : page) {
        seenEvent = kept.number();
        RecordView.Event event = kept.what();
        if (event.kind().equals("armed") || event.kind().equals("disarmed")) {
          armed = event.kind().equals("armed");
        }
        if (!first && event.kind().startsWith("log ")) {
          say(false, event.kind() + ": " + event.text());
        }
      }
    } while (!page.isEmpty());
  }

  private void findings() throws KeepException {
    List<RecordView.Kept<Finding>> page;
    boolean news = false;
    do {
      page = view.findingsAfter(seenFinding, PAGE);
      for (RecordView.Kept<Finding> kept : page) {
        seenFinding = kept.number();
        news = true;
        tell(new Progress.RungEnded(kept.what()));
        picture(kept.what().capture());
      }
    } while (!page.isEmpty());
    if (news) {
      ladderAnew();
    }
  }

  private void rows() throws KeepException {
    List<RecordView.Kept<LogRow>> page;
    String capture = "";
    do {
      page = view.rowsAfter(seenRow, PAGE);
      for (RecordView.Kept<LogRow> kept : page) {
        seenRow = kept.number();
        capture = kept.what().values().isEmpty() ? capture : kept.what().capture();
        tell(new Progress.LogRowKept(kept.what()));
      }
    } while (!page.isEmpty());
    picture(capture);
  }

  private void picture(String capture) {
    if (capture.isEmpty()) {
      return;
    }
    try {
      Picture picture =
          Analysis.of(CaptureReader.read(options.captures.resolve(capture))).picture();
      synchronized (pictures) {
        pictures.put(picture.rung(), picture);
      }
      tell(new Progress.PictureChanged(picture));
    } catch (CaptureException | Analysis.Refused | IllegalArgumentException e) {
      // A refused rung has no picture, and a capture may have been moved: its numbers are shown.
    }
  }

  private void ladderAnew() throws KeepException {
    ladderMade = clock.instant();
    settings = bench.settings(view);
    board = bench.identity(known.lastConditions(), newest(), holder);
    ladder = known.ladder();
    tell(new Progress.LadderChanged(ladder));
  }

  private Optional<Finding> newest() {
    List<RungStatus> now = ladder;
    return now.stream().flatMap(s -> s.finding().stream()).findFirst();
  }

  private void say(boolean warning, String text) {
    tell(new Progress.Message(warning, text));
  }

  private void tell(Progress event) {
    listeners.forEach(listener -> listener.accept(event));
  }

  private IllegalStateException refusal() {
    return new IllegalStateException(
        "This coilside only watches: "
            + holder
            + " holds the bench. Measure there, or end that one and start again here.");
  }

  @Override
  public BoardIdentity board() {
    return board;
  }

  @Override
  public BoardLimits limits() {
    return bench.limits();
  }

  @Override
  public BenchSettings settings() {
    return settings;
  }

  @Override
  public List<Rung> wouldGoStale(BenchSettings changed) {
    return List.of();
  }

  @Override
  public void apply(BenchSettings changed) {
    throw refusal();
  }

  @Override
  public List<RungStatus> ladder() {
    return ladder;
  }

  @Override
  public List<Finding> history(Rung rung) {
    try {
      return known.history(rung);
    } catch (KeepException e) {
      return List.of();
    }
  }

  @Override
  public Optional<Picture> picture(Rung rung) {
    synchronized (pictures) {
      return Optional.ofNullable(pictures.get(rung));
    }
  }

  /** Whether the one that holds the bench may transmit. */
  @Override
  public boolean armed() {
    return armed || board.simulated();
  }

  @Override
  public void arm(String who) {
    say(true, refusal().getMessage());
  }

  @Override
  public void disarm(String who) {
    say(true, refusal().getMessage());
  }

  @Override
  public boolean busy() {
    return false;
  }

  @Override
  public Optional<String> watching() {
    return Optional.of(holder);
  }

  @Override
  public void begin(Work work) {
    throw refusal();
  }

  @Override
  public void stop() {
    // Nothing runs here, and what runs elsewhere is not ours to stop.
  }

  @Override
  public void listen(Consumer<Progress> listener) {
    listeners.add(listener);
  }

  @Override
  public void close() {
    poller.shutdownNow();
    try {
      poller.awaitTermination(2, TimeUnit.SECONDS);
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
    }
    known.close();
  }
}
