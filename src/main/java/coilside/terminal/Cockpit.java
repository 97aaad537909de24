package coilside.terminal;

import coilside.bench.Desk;
import coilside.bench.Picture;
import coilside.bench.Rung;
import coilside.bench.Work;
import java.util.ArrayDeque;
import java.util.Deque;
import java.util.List;
import java.util.Optional;

/**
 * What the screen shows and what the keys do, free of any terminal: keys come in by {@link #key},
 * pictures of the whole screen come out of {@link #frame}. Belongs to the drawing thread.
 */
final class Cockpit {
  static final int LEAST_WIDTH = 80;
  static final int LEAST_HEIGHT = 24;

  private final Desk desk;
  private final Watch watch;
  private final TerminalOptions options;
  private final Glyphs glyphs;
  private final Look look;
  private final PictureView pictures;
  private final List<Action> actions;
  private final Deque<Panel> panels = new ArrayDeque<>();
  private final ScreenLayout layout;
  private Work pending;
  private long bestsHeard;
  private Picture numbered;
  private boolean follow;
  private boolean done;
  private boolean interrupted;
  private boolean redraw;
  private boolean suspend;

  Cockpit(Desk desk, Watch watch, TerminalOptions options, boolean light) {
    this.desk = desk;
    this.watch = watch;
    this.options = options;
    boolean unicode = TextInterface.unicode(options);
    glyphs = new Glyphs(unicode);
    look = new Look(options.store(), unicode, light, options.bell());
    pictures = new PictureView(look, watch::snapshot);
    actions = Actions.of(this);
    layout = new ScreenLayout(desk, look, pictures, actions, options.clock());
    watch.ladder(desk.ladder());
    fetchPicture();
  }

  Look look() {
    return look;
  }

  PictureView pictures() {
    return pictures;
  }

  List<Action> actions() {
    return actions;
  }

  boolean simulated() {
    return desk.board().simulated();
  }

  boolean unicode() {
    return glyphs.unicode();
  }

  boolean done() {
    return done;
  }

  boolean panelOpen() {
    return !panels.isEmpty();
  }

  /** True when Ctrl-C ended it. */
  boolean interrupted() {
    return interrupted;
  }

  /** True once after a wish to draw everything anew. */
  boolean takeRedraw() {
    boolean r = redraw;
    redraw = false;
    return r;
  }

  /** True once after a wish to go back to the shell for a while. */
  boolean takeSuspend() {
    boolean r = suspend;
    suspend = false;
    return r;
  }

  /** True once for each new best of the headline number while the bell is on. */
  boolean takeBell(Snapshot state) {
    long bests = state.headlines().get(look.headline).bests();
    boolean ring = look.bell && bests > bestsHeard && bests > 1;
    bestsHeard = bests;
    return ring;
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

  Canvas frame(int width, int height, Snapshot state) {
    Canvas canvas = new Canvas(width, height, glyphs);
    if (width < LEAST_WIDTH || height < LEAST_HEIGHT) {
      String[] text = {
        "More room, please:",
        LEAST_WIDTH + " x " + LEAST_HEIGHT + " is needed,",
        "here is " + width + " x " + height + "."
      };
      for (int i = 0; i < text.length; i++) {
        canvas.put(0, i, text[i], Ink.STRONG);
      }
      return canvas;
    }
    layout.draw(canvas, state, Optional.ofNullable(panels.peek()));
    return canvas;
  }

  /** Starts work that waited for the work before it to end; follows the rung being measured. */
  void tick() {
    Optional<Picture> live = watch.livePicture();
    if (live.isPresent() && live.get() != numbered) {
      numbered = live.get();
      watch.headlines(Headline.of(numbered));
    }
    Optional<Rung> measured = watch.snapshotMeasuring();
    if (follow && measured.isPresent() && measured.get() != look.chosen) {
      show(measured.get());
    }
    if (pending != null && watch.snapshotWork().isEmpty() && !desk.busy()) {
      Work next = pending;
      pending = null;
      begin(next);
    }
  }

  void key(Key key) {
    if (key.isCtrl('c')) {
      interrupted = true;
      end();
      return;
    }
    if (key.isCtrl('l')) {
      redraw();
      return;
    }
    Panel panel = panels.peek();
    if (panel != null) {
      if (!panel.key(key)) {
        panels.remove(panel);
      }
      look.keep();
      return;
    }
    Key meant = meaning(key);
    for (Action action : actions) {
      if (action.key().equals(meant)) {
        run(action);
        return;
      }
    }
  }

  /** Arrows and Enter stand for letters. */
  private static Key meaning(Key key) {
    return switch (key.name()) {
      case UP -> Key.of('b');
      case DOWN -> Key.of('n');
      case LEFT -> Key.of(',');
      case RIGHT -> Key.of('.');
      case ENTER -> Key.of('m');
      default -> key;
    };
  }

  private void run(Action action) {
    if (action.works().getAsBoolean()) {
      action.run().run();
      look.keep();
    } else {
      watch.note(
          true, "Not now: " + action.what() + (running() ? " (work in hand; s stops it)." : "."));
    }
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
      watch.clearHeadlines();
      bestsHeard = 0;
    }
    pictures.source(
        live
            ? PictureView.Source.LIVE
            : work instanceof Work.Log ? PictureView.Source.LOG : PictureView.Source.RUNG);
    follow = true;
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
    panels.push(
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

  void choose(int by) {
    Rung[] all = Rung.values();
    choose(all[Math.floorMod(look.chosen.ordinal() + by, all.length)]);
  }

  void choose(Rung rung) {
    follow = false;
    show(rung);
  }

  private void show(Rung rung) {
    look.chosen = rung;
    pictures.rungChanged();
    fetchPicture();
  }

  /** A picture from before this start is asked for once it is looked at. */
  void fetchPicture() {
    if (!watch.hasPicture(look.chosen)) {
      Optional<Picture> kept = desk.picture(look.chosen);
      kept.ifPresent(watch::picture);
    }
  }

  void nextSource() {
    PictureView.Source[] all = PictureView.Source.values();
    pictures.source(all[(pictures.source().ordinal() + 1) % all.length]);
  }

  void toggleCursor() {
    pictures.focused().ifPresent(PlotView::toggleCursor);
  }

  void zoom(double factor) {
    pictures.focused().ifPresent(v -> v.zoom(factor));
  }

  void sideways(int direction) {
    pictures
        .focused()
        .ifPresent(
            v -> {
              if (v.cursorOn()) {
                v.moveCursor(direction * 0.01);
              } else {
                v.pan(direction * 0.25);
              }
            });
  }

  void showAll() {
    pictures.focused().ifPresent(PlotView::showAll);
  }

  void toggleLogarithmic() {
    pictures.focused().ifPresent(PlotView::toggleLogarithmic);
  }

  void toggleBell() {
    look.bell = !look.bell;
    watch.note(false, "The bell at a new best is " + (look.bell ? "on." : "off."));
  }

  void openBig() {
    panels.push(
        new BigPanel(
            look,
            () -> {
              watch.clearHeadlines();
              bestsHeard = 0;
            }));
  }

  void openSettings() {
    panels.push(new SettingsPanel(desk, look, watch::note));
  }

  void openDetails() {
    panels.push(Details.panel(desk, look.chosen, options.clock(), unicode()));
  }

  void openMessages() {
    panels.push(ScreenTexts.messages());
  }

  void openHelp() {
    panels.push(ScreenTexts.help(actions));
  }

  void openActions() {
    List<Action> useful = actions.stream().filter(a -> !a.key().is('/')).toList();
    panels.push(new ActionsPanel(useful, this::run));
  }

  void redraw() {
    redraw = true;
  }

  void suspend() {
    suspend = true;
  }

  void quit() {
    Optional<Work> work = watch.snapshotWork();
    if (work.isPresent() && !(work.get() instanceof Work.Live)) {
      panels.push(
          new ConfirmPanel(
              "Quit while the bench is at work?",
              List.of("The work in hand will be stopped. What is finished is kept."),
              "stop and quit",
              this::end));
    } else {
      end();
    }
  }

  void end() {
    look.keep();
    done = true;
  }
}
