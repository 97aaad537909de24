package coilside.terminal;

import coilside.bench.Rung;
import coilside.bench.Work;
import java.time.Duration;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.function.BooleanSupplier;

/** All actions of the main screen: the one place that ties keys to what they do. */
final class Actions {
  private final List<Action> all = new ArrayList<>();

  private Actions() {}

  static List<Action> of(Cockpit c) {
    Actions a = new Actions();
    a.bench(c);
    a.looking(c);
    a.rest(c);
    return List.copyOf(a.all);
  }

  private void add(char key, String brief, String what, BooleanSupplier works, Runnable run) {
    all.add(new Action(Key.of(key), String.valueOf(key), brief, what, works, run));
  }

  private void bench(Cockpit c) {
    Look look = c.look();
    BooleanSupplier idle = () -> !c.work().running();
    add(
        'm',
        "measure",
        "Measure the chosen rung, with what it rests on (also Enter)",
        idle,
        () -> c.work().begin(new Work.Measure(look.chosen)));
    add(
        'r',
        "ready",
        "Ready: bring every rung up to date",
        idle,
        () -> c.work().begin(new Work.Ready()));
    add(
        'l',
        "live",
        "Live: tune and shim, nothing is kept",
        () -> c.work().canGoLive(true),
        () -> c.work().live(true));
    add(
        'o',
        "listen",
        "Listen live with the transmitter off: hunt interference",
        () -> c.work().canGoLive(false),
        () -> c.work().live(false));
    add(
        'f',
        "FID",
        "Take and keep an averaged FID",
        idle,
        () -> c.work().begin(new Work.TakeFid(look.fidScans, 0, 0, "")));
    add(
        'k',
        "log",
        "Keep a log: repeat an acquisition and follow the resonance",
        idle,
        () -> {
          Duration every = Duration.ofMillis(Math.round(look.logEverySeconds * 1000));
          c.work().begin(new Work.Log(every, 0, Optional.empty(), look.logScans, true));
        });
    add(
        's',
        "stop",
        "Stop the work in hand; what is finished is kept",
        c.work()::running,
        c.work()::stop);
    add(
        'a',
        "arm/lock",
        "Arm the transmitter, or lock it again",
        () -> !c.simulated(),
        c.work()::armOrLock);
    add('e', "settings", "Edit sample and settings", () -> true, c::openSettings);
    add(
        'i',
        "why",
        "Why the chosen rung stands so: values, rests on, history",
        () -> true,
        c::openDetails);
  }

  private void looking(Cockpit c) {
    Look look = c.look();
    PictureView pictures = c.pictures();
    BooleanSupplier plot = () -> pictures.focused().isPresent();
    add(
        'n',
        "next",
        "Choose the next rung (also down, or its number)",
        () -> true,
        () -> c.choose(1));
    add('b', "before", "Choose the rung before (also up)", () -> true, () -> c.choose(-1));
    add(
        'g',
        "big digits",
        "Big digits: the headline number over the whole screen",
        () -> true,
        c::openBig);
    add('p', "picture", "Other picture: rung, live, log", () -> true, c::nextSource);
    add('u', "one/two", "One plot alone, or two", pictures::several, pictures::toggleAlone);
    all.add(
        new Action(
            Key.of(Key.Name.TAB),
            "Tab",
            "other plot",
            "Give the keys to the other plot",
            pictures::several,
            pictures::nextFocus));
    add(
        'v',
        "part",
        "Real, imaginary, magnitude, or both parts",
        plot,
        () -> look.part = look.part.next());
    add(
        'c',
        "cursor",
        "Cursor with reading on or off; left and right move it",
        plot,
        c::toggleCursor);
    add('z', "zoom in", "Zoom in, about the cursor if it is on", plot, () -> c.zoom(0.5));
    add('x', "zoom out", "Zoom out", plot, () -> c.zoom(2));
    add(
        ',',
        "left",
        "Move the view or the cursor left (also left arrow)",
        plot,
        () -> c.sideways(-1));
    add(
        '.',
        "right",
        "Move the view or the cursor right (also right arrow)",
        plot,
        () -> c.sideways(1));
    add('0', "all", "Show all of the plot; once more, the part around the peak", plot, c::showAll);
    add('y', "log scale", "Logarithmic or linear scale", plot, c::toggleLogarithmic);
    add('j', "Hz/ppm", "Spectrum in Hz or in ppm of the carrier", plot, () -> look.ppm = !look.ppm);
    add('d', "residuals", "Residuals on or off", plot, () -> look.residuals = !look.residuals);
    add(
        'w',
        "wide",
        "Wide picture, without the ladder, or with it",
        () -> true,
        () -> look.wide = !look.wide);
    add(
        't',
        "style",
        "Drawing style: Braille dots, blocks, ASCII",
        () -> c.unicode(),
        () -> look.style = look.style.next(true));
  }

  private void rest(Cockpit c) {
    Look look = c.look();
    add('+', "memory", "Longer memory of the live average", () -> true, () -> c.work().memory(2));
    add(
        '-',
        "memory",
        "Shorter memory of the live average",
        () -> true,
        () -> c.work().memory(0.5));
    add('B', "bell", "Bell at a new best on or off", () -> true, c::toggleBell);
    add(
        'L',
        "light",
        "Colours for a light or a dark background",
        () -> true,
        () -> look.light = !look.light);
    add(
        'M',
        "mouse",
        "Mouse on or off: a click chooses a rung or places the cursor",
        () -> true,
        c::toggleMouse);
    add('h', "messages", "All messages so far", () -> true, c::openMessages);
    add('?', "help", "The keys that work now", () -> true, c::openHelp);
    add('/', "find", "Search all actions by word", () -> true, c::openActions);
    all.add(
        new Action(
            Key.ctrl('l'),
            "Ctrl-L",
            "redraw",
            "Draw the whole screen anew",
            () -> true,
            c::redraw));
    all.add(
        new Action(
            Key.ctrl('z'),
            "Ctrl-Z",
            "suspend",
            "Back to the shell; fg returns",
            () -> !c.work().running(),
            c::suspend));
    add('q', "quit", "Quit", () -> true, c::quit);
    for (Rung rung : Rung.values()) {
      char digit = (char) ('1' + rung.ordinal());
      add(
          digit,
          rung.id(),
          "Choose " + rung.id() + ": " + rung.title(),
          () -> true,
          () -> c.choose(rung));
    }
  }
}
