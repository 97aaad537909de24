package coilside.terminal;

import coilside.bench.Rung;

/**
 * How the operator likes the screen, and the small numbers it starts work with; kept in the store.
 */
final class Look {
  private final SettingsStore store;
  private final boolean unicode;
  DrawingStyle style;
  Part part;
  Rung chosen;
  Headline headline;
  boolean residuals;
  boolean wide;
  boolean light;
  boolean bell;
  int memoryScans;
  int fidScans;
  int logScans;
  double logEverySeconds;

  Look(SettingsStore store, boolean unicode, boolean lightByDefault, boolean bellByDefault) {
    this.store = store;
    this.unicode = unicode;
    style = choice("style", DrawingStyle.BRAILLE);
    if (!unicode) {
      style = DrawingStyle.ASCII;
    }
    part = choice("part", Part.REAL);
    chosen = choice("rung", Rung.RESONANCE);
    headline = choice("headline", Headline.LINEWIDTH);
    residuals = flag("residuals", true);
    wide = flag("wide", false);
    light = flag("light", lightByDefault);
    bell = flag("bell", bellByDefault);
    memoryScans = (int) number("memory", 1, 1, 1000);
    fidScans = (int) number("fid-scans", 16, 1, 1_000_000);
    logScans = (int) number("log-scans", 1, 1, 100_000);
    logEverySeconds = number("log-every", 30, 0.1, 86400);
  }

  private <E extends Enum<E>> E choice(String name, E otherwise) {
    String text = store.get("screen." + name).orElse("");
    for (E e : otherwise.getDeclaringClass().getEnumConstants()) {
      if (e.name().equals(text)) {
        return e;
      }
    }
    return otherwise;
  }

  private boolean flag(String name, boolean otherwise) {
    return store.get("screen." + name).map("true"::equals).orElse(otherwise);
  }

  private double number(String name, double otherwise, double min, double max) {
    try {
      double v = Double.parseDouble(store.get("screen." + name).orElse(""));
      return v >= min && v <= max ? v : otherwise;
    } catch (NumberFormatException e) {
      return otherwise;
    }
  }

  void keep() {
    if (unicode) {
      store.set("screen.style", style.name());
    }
    store.set("screen.part", part.name());
    store.set("screen.rung", chosen.name());
    store.set("screen.headline", headline.name());
    store.set("screen.residuals", Boolean.toString(residuals));
    store.set("screen.wide", Boolean.toString(wide));
    store.set("screen.light", Boolean.toString(light));
    store.set("screen.bell", Boolean.toString(bell));
    store.set("screen.memory", Integer.toString(memoryScans));
    store.set("screen.fid-scans", Integer.toString(fidScans));
    store.set("screen.log-scans", Integer.toString(logScans));
    store.set("screen.log-every", Double.toString(logEverySeconds));
  }
}
