package coilside.bench;

import coilside.board.Board;
import coilside.board.BoardException;
import coilside.board.BoardIdentity;
import coilside.board.BoardLimits;
import java.time.InstantSource;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.Set;
import java.util.concurrent.ConcurrentHashMap;
import java.util.concurrent.CopyOnWriteArrayList;
import java.util.concurrent.ExecutorService;
import java.util.concurrent.Executors;
import java.util.concurrent.RejectedExecutionException;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.atomic.AtomicBoolean;
import java.util.function.Consumer;

/** The desk in front of a real bench: one worker thread, one piece of work at a time. */
public final class BenchDesk implements Desk {
  private static final int CLOSE_SECONDS = 5;

  private final Board board;
  private final Keeper keeper;
  private final InstantSource clock;
  private final Bench bench;
  private final List<Consumer<Progress>> listeners = new CopyOnWriteArrayList<>();
  private final AtomicBoolean busy = new AtomicBoolean();
  private final Set<Rung> asked = ConcurrentHashMap.newKeySet();
  private final ExecutorService worker = oneDaemon("bench");
  private final ExecutorService pictures = oneDaemon("pictures");

  private static ExecutorService oneDaemon(String name) {
    return Executors.newSingleThreadExecutor(
        task -> {
          Thread thread = new Thread(task, name);
          thread.setDaemon(true);
          return thread;
        });
  }

  public BenchDesk(
      Board board, Keeper keeper, BenchSettings settings, InstantSource clock, Waiter waiter)
      throws KeepException {
    this.board = board;
    this.keeper = keeper;
    this.clock = clock;
    this.bench = new Bench(board, keeper, settings, clock, waiter, this::tell);
  }

  private void tell(Progress event) {
    for (Consumer<Progress> listener : listeners) {
      listener.accept(event);
    }
  }

  @Override
  public BoardIdentity board() {
    return board.identity();
  }

  @Override
  public BoardLimits limits() {
    return board.limits();
  }

  @Override
  public BenchSettings settings() {
    return bench.settings();
  }

  @Override
  public List<Rung> wouldGoStale(BenchSettings changed) {
    List<RungStatus> now = bench.ladder();
    List<RungStatus> then = bench.ladderWith(changed);
    List<Rung> out = new ArrayList<>();
    for (int i = 0; i < now.size(); i++) {
      if (now.get(i).state() == RungStatus.State.FRESH
          && then.get(i).state() != RungStatus.State.FRESH) {
        out.add(now.get(i).rung());
      }
    }
    return out;
  }

  @Override
  public void apply(BenchSettings changed) {
    if (busy.get()) {
      throw new IllegalStateException("stop the work in hand before changing settings");
    }
    bench.apply(changed);
    remember("sample", changed.sample());
    remember("coil", changed.coil());
    remember("amplitude", Double.toString(changed.amplitude()));
    noteEvent("settings", "sample '" + changed.sample() + "', coil '" + changed.coil() + "'");
  }

  private void remember(String name, String value) {
    try {
      keeper.setSetting(name, value);
    } catch (KeepException e) {
      tell(new Progress.Message(true, e.getMessage()));
    }
  }

  private void noteEvent(String kind, String text) {
    try {
      keeper.note(clock.instant(), kind, text);
    } catch (KeepException e) {
      tell(new Progress.Message(true, e.getMessage()));
    }
  }

  @Override
  public List<RungStatus> ladder() {
    return bench.ladder();
  }

  @Override
  public List<Finding> history(Rung rung) {
    return bench.history(rung);
  }

  @Override
  public Optional<Picture> picture(Rung rung) {
    Optional<Picture> picture = bench.picture(rung);
    if (picture.isEmpty() && asked.add(rung)) {
      rebuild(rung);
    }
    return picture;
  }

  /**
   * Makes a rung's picture again from the capture of its newest finding, and tells it when done.
   */
  private void rebuild(Rung rung) {
    List<Finding> findings = bench.history(rung);
    String name = findings.isEmpty() ? "" : findings.get(findings.size() - 1).capture();
    if (name.isEmpty()) {
      return;
    }
    try {
      pictures.execute(
          () -> keeper.capture(name).flatMap(BenchDesk::picture).ifPresent(bench::showOld));
    } catch (RejectedExecutionException e) {
      // The desk is being closed: nobody will look.
    }
  }

  private static Optional<Picture> picture(Capture capture) {
    try {
      return Optional.of(Analysis.of(capture).picture());
    } catch (Analysis.Refused | IllegalArgumentException e) {
      return Optional.empty();
    }
  }

  @Override
  public boolean armed() {
    return board.armed();
  }

  @Override
  public void arm(String who) {
    noteEvent("armed", who);
    board.arm();
  }

  @Override
  public void disarm(String who) {
    board.disarm();
    noteEvent("disarmed", who);
  }

  @Override
  public boolean busy() {
    return busy.get();
  }

  @Override
  public void begin(Work work) {
    if (!busy.compareAndSet(false, true)) {
      throw new IllegalStateException("the bench is busy; stop the work in hand first");
    }
    try {
      bench.clearStop();
      worker.execute(() -> perform(work));
    } catch (RejectedExecutionException e) {
      busy.set(false);
      throw new IllegalStateException("the bench was closed", e);
    }
  }

  private void perform(Work work) {
    Progress.WorkEnded end;
    try {
      end = WorkRunner.run(bench, work);
    } catch (BoardException.Stopped e) {
      end = new Progress.WorkEnded(false, Optional.of("stopped; what was finished is kept"));
    } catch (BoardException | KeepException e) {
      end = new Progress.WorkEnded(false, Optional.of(e.getMessage()));
    } catch (RuntimeException | LinkageError | OutOfMemoryError e) {
      end =
          new Progress.WorkEnded(
              false, Optional.of("a mistake in coilside itself ended the work: " + e));
      tell(new Progress.Message(true, end.reason().orElseThrow()));
    }
    busy.set(false);
    tell(end);
  }

  @Override
  public void stop() {
    if (busy.get()) {
      bench.stop();
    }
  }

  @Override
  public void listen(Consumer<Progress> listener) {
    listeners.add(listener);
  }

  @Override
  public void close() {
    bench.stop();
    worker.shutdown();
    pictures.shutdownNow();
    try {
      worker.awaitTermination(CLOSE_SECONDS, TimeUnit.SECONDS);
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
    }
    board.close();
  }
}
