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
  private final WorkControl work;
  private final Glyphs glyphs;
  private final Look look;
  private final PictureView pictures;
  private final List<Action> actions;
  private final Deque<Panel> panels = new ArrayDeque<>();
  private final ScreenLayout layout;
  private Picture numbered;
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
    work = new WorkControl(desk, watch, options, look, pictures, panels::push);
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

  WorkControl work() {
    return work;
  }

  boolean running() {
    return work.running();
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
    if (work.followed() && measured.isPresent() && measured.get() != look.chosen) {
      show(measured.get());
    }
    work.tick();
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
    if (panel != null && key.is(Key.Name.CLICK)) {
      return;
    }
    if (panel != null) {
      if (!panel.key(key)) {
        panels.remove(panel);
      }
      look.keep();
      return;
    }
    if (key.is(Key.Name.CLICK)) {
      click(key.column(), key.row());
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

  private void click(int column, int row) {
    Optional<Rung> rung = layout.rungAt(column, row);
    if (rung.isPresent()) {
      choose(rung.get());
    } else {
      pictures.click(column, row);
    }
  }

  private void run(Action action) {
    if (action.works().getAsBoolean()) {
      action.run().run();
      look.keep();
    } else {
      watch.note(
          true,
          "Not now: " + action.what() + (work.running() ? " (work in hand; s stops it)." : "."));
    }
  }

  void choose(int by) {
    Rung[] all = Rung.values();
    choose(all[Math.floorMod(look.chosen.ordinal() + by, all.length)]);
  }

  void choose(Rung rung) {
    work.stayHere();
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

  void toggleMouse() {
    look.mouse = !look.mouse;
    watch.note(
        false,
        look.mouse
            ? "The mouse is on: a click chooses a rung or places the cursor. M turns it off."
            : "The mouse is off: the terminal marks and copies text again.");
  }

  void openBig() {
    panels.push(new BigPanel(look, work::forgetBests));
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
    Optional<Work> now = watch.snapshotWork();
    if (now.isPresent() && !(now.get() instanceof Work.Live)) {
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
