package coilside.terminal;

import coilside.bench.Desk;
import coilside.bench.Work;
import java.util.Optional;
import java.util.function.Consumer;

/**
 * Starts, changes over and stops the bench's work, and asks for the arming before the first shot.
 * Belongs to the drawing thread.
 */
final class WorkControl {
  private final Desk desk;
  private final Watch watch;
  private final TerminalOptions options;
  private final Look look;
  private final PictureView pictures;
  private final Consumer<Panel> panels;
  private Work pending;
  private long bestsHeard;
  private boolean followed;

  /**
   * @param panels shows a panel that must be answered
   */
  WorkControl(
      Desk desk,
      Watch watch,
      TerminalOptions options,
      Look look,
      PictureView pictures,
      Consumer<Panel> panels) {
    this.desk = desk;
    this.watch = watch;
    this.options = options;
    this.look = look;
    this.pictures = pictures;
    this.panels = panels;
  }

  boolean running() {
    return watch.snapshotWork().isPresent() || pending != null;
  }

  /** True when live running can start, or be changed over from the other kind. */
  boolean canGoLive(boolean transmit) {
    Optional<Work> now = watch.snapshotWork();
    return !liveNow(transmit) && (now.isEmpty() || now.get() instanceof Work.Live);
  }

  boolean liveNow(boolean transmit) {
    return watch
        .snapshotWork()
        .filter(w -> w instanceof Work.Live l && l.transmit() == transmit)
        .isPresent();
  }

  /** True while the screen shows whatever rung is being measured. */
  boolean followed() {
    return followed;
  }

  /** The operator looks at a rung of choice from now on. */
  void stayHere() {
    followed = false;
  }

  /** Starts work that waited for the work before it to end. */
  void tick() {
    if (pending != null && watch.snapshotWork().isEmpty() && !desk.busy()) {
      Work next = pending;
      pending = null;
      begin(next);
    }
  }

  void forgetBests() {
    watch.clearHeadlines();
    bestsHeard = 0;
  }

  /** True once for each new best of the headline number while the bell is on. */
  boolean takeBell(Snapshot state) {
    long bests = state.headlines().get(look.headline).bests();
    boolean ring = look.bell && bests > bestsHeard && bests > 1;
    bestsHeard = bests;
    return ring;
  }

  void begin(Work work) {
    if (ScreenTexts.transmits(work) && !desk.armed()) {
      arm(() -> begin(work));
      return;
    }
    if (desk.busy()) {
      watch.note(true, "The bench is busy; s stops it.");
      return;
    }
    boolean live = work instanceof Work.Live || work instanceof Work.TakeFid;
    if (live) {
      forgetBests();
    }
    pictures.source(
        live
            ? PictureView.Source.LIVE
            : work instanceof Work.Log ? PictureView.Source.LOG : PictureView.Source.RUNG);
    followed = true;
    watch.workBegun(work);
    try {
      desk.begin(work);
    } catch (IllegalStateException | IllegalArgumentException e) {
      watch.workRefused();
      watch.note(true, e.getMessage());
    }
  }

  /** Starts or changes live running, after the live running in hand has ended. */
  void live(boolean transmit) {
    Optional<Work> now = watch.snapshotWork();
    Work wanted = new Work.Live(look.memoryScans, transmit);
    if (now.isEmpty()) {
      begin(wanted);
    } else if (now.get() instanceof Work.Live) {
      pending = wanted;
      desk.stop();
    } else {
      watch.note(true, "Not now: work in hand; s stops it.");
    }
  }

  void memory(double factor) {
    int before = look.memoryScans;
    look.memoryScans = (int) Math.max(1, Math.min(1000, Math.round(before * factor)));
    if (look.memoryScans == before) {
      watch.note(
          false, "The live average remembers " + before + (before == 1 ? " scan." : " scans."));
      return;
    }
    watch.note(
        false,
        "The live average remembers "
            + look.memoryScans
            + (look.memoryScans == 1 ? " scan." : " scans."));
    watch
        .snapshotWork()
        .filter(Work.Live.class::isInstance)
        .ifPresent(w -> live(((Work.Live) w).transmit()));
  }

  void stop() {
    pending = null;
    watch.note(false, "Stopping; what is finished is kept.");
    desk.stop();
  }

  void armOrLock() {
    if (desk.armed() && !desk.board().simulated()) {
      desk.disarm(options.operator());
      watch.note(false, "The transmitter is locked.");
    } else if (desk.armed()) {
      watch.note(false, "The simulated bench may always transmit: nothing leaves this computer.");
    } else {
      arm(() -> {});
    }
  }

  private void arm(Runnable then) {
    panels.accept(
        new ConfirmPanel(
            "Arm the transmitter? Read this first",
            Cautions.text(desk.limits()),
            "arm",
            () -> {
              desk.arm(options.operator());
              watch.note(true, "ARMED by " + options.operator() + ": the board may transmit.");
              then.run();
            }));
  }
}
