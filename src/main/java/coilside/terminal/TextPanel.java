package coilside.terminal;

import java.util.ArrayList;
import java.util.List;
import java.util.function.Function;

/** A panel of text lines that can be scrolled. */
final class TextPanel implements Panel {
  /** One line and what its colour stands for. */
  record Line(String text, Ink ink) {}

  private final String title;
  private final Function<Snapshot, List<Line>> lines;
  private int top;
  private int rows = 10;
  private int total;

  TextPanel(String title, Function<Snapshot, List<Line>> lines, boolean atEnd) {
    this.title = title;
    this.lines = lines;
    top = atEnd ? Integer.MAX_VALUE : 0;
  }

  @Override
  public String title() {
    return title;
  }

  @Override
  public String keys() {
    return total > rows ? "up/down scroll  q back" : "q back";
  }

  @Override
  public void draw(Canvas canvas, Area area, Snapshot state) {
    List<Line> wrapped = new ArrayList<>();
    for (Line line : lines.apply(state)) {
      for (String part : Wrap.wrap(line.text(), area.width())) {
        wrapped.add(new Line(part, line.ink()));
      }
    }
    total = wrapped.size();
    rows = Math.max(1, area.height());
    top = Math.max(0, Math.min(top, total - rows));
    for (int i = 0; i < rows && top + i < total; i++) {
      Line line = wrapped.get(top + i);
      canvas.put(area.x(), area.y() + i, line.text(), line.ink(), area.right());
    }
    if (top + rows < total) {
      canvas.putRight(
          area.right(),
          area.bottom() - 1,
          " " + (total - top - rows) + " more ",
          Ink.CHOSEN,
          area.x());
    }
  }

  @Override
  public boolean key(Key key) {
    if (key.is(Key.Name.DOWN) || key.is('n')) {
      top++;
    } else if (key.is(Key.Name.UP) || key.is('b')) {
      top = Math.max(0, top - 1);
    } else if (key.is(Key.Name.PAGE_DOWN) || key.is(' ')) {
      top += rows - 1;
    } else if (key.is(Key.Name.PAGE_UP)) {
      top = Math.max(0, top - rows + 1);
    } else if (key.is(Key.Name.HOME)) {
      top = 0;
    } else if (key.is(Key.Name.END)) {
      top = Integer.MAX_VALUE / 2;
    } else {
      return !(key.goesBack() || key.is(Key.Name.ENTER));
    }
    return true;
  }
}
