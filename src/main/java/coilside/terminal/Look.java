package coilside.terminal;

import coilside.bench.Rung;
import java.util.HashMap;
import java.util.Map;

/**
 * How the operator likes the screen, and the small numbers it starts work with; kept in the store.
 */
final class Look {
  private final SettingsStore store;
  private final boolean unicode;
  private final Map<String, String> written = new HashMap<>();
  DrawingStyle style;
  Part part;
  Rung chosen;
  Headline headline;
  boolean residuals;
  boolean wide;
  boolean ppm;
  boolean mouse;
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
    ppm = flag("ppm", false);
    mouse = flag("mouse", false);
    light = flag("light", lightByDefault);
    bell = flag("bell", bellByDefault);
    memoryScans = (int) number("memory", 1, 1, 1000);
    fidScans = (int) number("fid-scans", 16, 1, 1_000_000);
    logScans = (int) number("log-scans", 1, 1, 100_000);
    logEverySeconds = number("log-every", 30, 0.1, 86400);
  }

  private <E extends Enum<E>> E choice(String name, E otherwise) {
    String text = store.get(name).orElse("");
    for (E e : otherwise.getDeclaringClass().getEnumConstants()) {
      if (e.name().equals(text)) {
        return e;
      }
    }
    return otherwise;
  }

  private boolean flag(String name, boolean otherwise) {
    return store.get(name).map("true"::equals).orElse(otherwise);
  }

  private double number(String name, double otherwise, double min, double max) {
    try {
      double v = Double.parseDouble(store.get(name).orElse(""));
      return v >= min && v <= max ? v : otherwise;
    } catch (NumberFormatException e) {
      return otherwise;
    }
  }

  void keep() {
    if (unicode) {
      put("style", style.name());
    }
    put("part", part.name());
    put("rung", chosen.name());
    put("headline", headline.name());
    put("residuals", Boolean.toString(residuals));
    put("wide", Boolean.toString(wide));
    put("ppm", Boolean.toString(ppm));
    put("mouse", Boolean.toString(mouse));
    put("light", Boolean.toString(light));
    put("bell", Boolean.toString(bell));
    put("memory", Integer.toString(memoryScans));
    put("fid-scans", Integer.toString(fidScans));
    put("log-scans", Integer.toString(logScans));
    put("log-every", Double.toString(logEverySeconds));
  }

  /** Writing may cost a disk sync: only what changed is written. */
  private void put(String name, String value) {
    if (!value.equals(written.put(name, value))) {
      store.set(name, value);
    }
  }
}
