package coilside.terminal;

import coilside.quantity.Measured;
import java.util.Optional;

/** One headline number over the whole screen, with its trend, its best, and its recent course. */
final class BigPanel implements Panel {
  private final Look look;
  private final Runnable clear;

  BigPanel(Look look, Runnable clear) {
    this.look = look;
    this.clear = clear;
  }

  @Override
  public String title() {
    return look.headline.words;
  }

  @Override
  public String keys() {
    return "n/b other number  c clear the best  k bell " + (look.bell ? "off" : "on") + "  q back";
  }

  @Override
  public boolean fillsScreen() {
    return true;
  }

  @Override
  public void draw(Canvas canvas, Area area, Snapshot state) {
    Glyphs g = canvas.glyphs();
    Headline h = look.headline;
    HeadlineHistory history = state.headlines().get(h);
    Optional<Measured> latest = history.latest();
    int y = area.y();
    if (latest.isEmpty()) {
      canvas.put(
          area.x(), y, h.words + ": no value yet; start live with l.", Ink.STRONG, area.right());
      return;
    }
    Measured m = latest.get();
    String unit = m.unit().pretty();
    int e = Numbers.exponent(m.value(), unit);
    double scale = Math.pow(10, e);
    String label = h.words + (unit.isEmpty() ? "" : " in " + Numbers.prefix(e) + unit);
    boolean best = history.best().filter(b -> b.equals(m)).isPresent();
    int x = canvas.put(area.x(), y, label, Ink.TITLE, area.right());
    String trend = trendWords(history.trend(), h.better);
    x = canvas.put(x + 3, y, g.arrow(history.trend()) + " " + trend, Ink.STRONG, area.right());
    if (best) {
      canvas.put(x + 3, y, "* BEST SO FAR *", Ink.GOOD, area.right());
    }
    String digits = digits(m, scale, h == Headline.FREQUENCY);
    Area big = new Area(area.x(), y + 2, area.width(), area.height() - 6);
    BigDigits.draw(canvas, big, digits, best ? Ink.GOOD : Ink.STRONG);
    String line = "now " + Numbers.concise(m, g.unicode());
    if (history.best().isPresent()) {
      line += "    best " + Numbers.concise(history.best().get(), g.unicode());
    }
    canvas.put(area.x(), area.bottom() - 3, line, Ink.PLAIN, area.right());
    course(canvas, new Area(area.x(), area.bottom() - 2, area.width(), 2), history.values());
  }

  private static String trendWords(int trend, int better) {
    if (trend == 0) {
      return "steady";
    }
    String way = trend > 0 ? "rising" : "falling";
    return better == 0 ? way : way + (trend == better ? ", better" : ", worse");
  }

  /** Four digits at most, fewer where the uncertainty makes them noise; frequency in full Hz. */
  static String digits(Measured m, double scale, boolean frequency) {
    double v = m.value() / scale;
    int whole = (int) Math.max(1, Math.floor(Math.log10(Math.max(Math.abs(v), 1e-9))) + 1);
    int most = frequency ? 6 : Math.max(0, 4 - whole);
    double u = m.u() / scale;
    int byNoise = u > 0 ? (int) Math.max(0, -Math.floor(Math.log10(u))) : most;
    return String.format(java.util.Locale.ROOT, "%." + Math.min(most, byNoise) + "f", v);
  }

  private void course(Canvas canvas, Area area, double[] values) {
    if (values.length < 2) {
      return;
    }
    Dots dots = new Dots(canvas, area, look.style);
    int n = Math.min(values.length, dots.width());
    double low = Double.POSITIVE_INFINITY;
    double high = Double.NEGATIVE_INFINITY;
    for (int i = values.length - n; i < values.length; i++) {
      low = Math.min(low, values[i]);
      high = Math.max(high, values[i]);
    }
    Axis axis = new Axis(low, high, "");
    for (int i = 1; i < n; i++) {
      double a = values[values.length - n + i - 1];
      double b = values[values.length - n + i];
      double top = dots.height() - 1.0;
      dots.line(i - 1, (1 - axis.fraction(a)) * top, i, (1 - axis.fraction(b)) * top, Ink.SIGNAL);
    }
    dots.paint();
  }

  @Override
  public boolean key(Key key) {
    if (key.is('n') || key.is(Key.Name.RIGHT) || key.is(Key.Name.DOWN)) {
      look.headline = look.headline.next(1);
    } else if (key.is('b') || key.is(Key.Name.LEFT) || key.is(Key.Name.UP)) {
      look.headline = look.headline.next(-1);
    } else if (key.is('c')) {
      clear.run();
    } else if (key.is('k')) {
      look.bell = !look.bell;
    } else {
      return !(key.goesBack() || key.is('g'));
    }
    return true;
  }
}
