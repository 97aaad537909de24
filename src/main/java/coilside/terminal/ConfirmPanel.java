package coilside.terminal;

import java.util.List;

/** Asks before something that cannot be undone. */
final class ConfirmPanel implements Panel {
  private final String title;
  private final List<String> text;
  private final String yes;
  private final Runnable then;

  ConfirmPanel(String title, List<String> text, String yes, Runnable then) {
    this.title = title;
    this.text = List.copyOf(text);
    this.yes = yes;
    this.then = then;
  }

  @Override
  public String title() {
    return title;
  }

  @Override
  public String keys() {
    return "y " + yes + "  q back, nothing done";
  }

  @Override
  public void draw(Canvas canvas, Area area, Snapshot state) {
    int y = area.y();
    for (String paragraph : text) {
      for (String line : Wrap.wrap(paragraph, area.width())) {
        canvas.put(area.x(), y++, line, Ink.PLAIN, area.right());
      }
    }
    canvas.put(area.x(), y + 1, "Press y to " + yes + ", q to go back.", Ink.STRONG, area.right());
  }

  @Override
  public boolean key(Key key) {
    if (key.is('y')) {
      then.run();
      return false;
    }
    return !(key.goesBack() || key.is('n'));
  }
}
