package coilside.terminal;

import java.util.List;
import java.util.Locale;
import java.util.function.Consumer;

/** The searchable list of everything that can be done now. */
final class ActionsPanel implements Panel {
  private static final int LONGEST = 40;
  private final List<Action> actions;
  private final Consumer<Action> run;
  private final StringBuilder typed = new StringBuilder();
  private int chosen;

  ActionsPanel(List<Action> actions, Consumer<Action> run) {
    this.actions = List.copyOf(actions);
    this.run = run;
  }

  @Override
  public String title() {
    return "What do you want to do?";
  }

  @Override
  public String keys() {
    return "type to search  up/down choose  Enter do it  Esc or Ctrl-G back";
  }

  private List<Action> found() {
    String[] words = typed.toString().toLowerCase(Locale.ROOT).trim().split("\\s+");
    return actions.stream()
        .filter(a -> a.works().getAsBoolean())
        .filter(
            a -> {
              String text = (a.what() + " " + a.brief()).toLowerCase(Locale.ROOT);
              return List.of(words).stream().allMatch(text::contains);
            })
        .toList();
  }

  @Override
  public void draw(Canvas canvas, Area area, Snapshot state) {
    int x = canvas.put(area.x(), area.y(), "Search: " + typed, Ink.STRONG, area.right());
    canvas.put(x, area.y(), '_', Ink.STRONG);
    List<Action> found = found();
    chosen = Math.max(0, Math.min(chosen, found.size() - 1));
    int rows = area.height() - 2;
    int top = Math.max(0, chosen - rows + 1);
    for (int i = 0; i < rows && top + i < found.size(); i++) {
      Action a = found.get(top + i);
      int y = area.y() + 2 + i;
      canvas.put(area.x(), y, a.keyText(), Ink.TITLE, area.x() + 12);
      canvas.put(
          area.x() + 13, y, a.what(), top + i == chosen ? Ink.CHOSEN : Ink.PLAIN, area.right());
    }
    if (found.isEmpty()) {
      canvas.put(
          area.x(), area.y() + 2, "Nothing of that kind can be done now.", Ink.CARE, area.right());
    }
  }

  @Override
  public boolean key(Key key) {
    if (key.is(Key.Name.DOWN)) {
      chosen++;
    } else if (key.is(Key.Name.UP)) {
      chosen = Math.max(0, chosen - 1);
    } else if (key.is(Key.Name.ENTER)) {
      List<Action> found = found();
      if (!found.isEmpty()) {
        run.accept(found.get(Math.min(chosen, found.size() - 1)));
      }
      return false;
    } else if (key.is(Key.Name.BACKSPACE)) {
      typed.setLength(Math.max(0, typed.length() - 1));
    } else if (key.is(Key.Name.ESCAPE) || key.isCtrl('g')) {
      return false;
    } else if (key.is(Key.Name.CHARACTER) && !key.ctrl() && typed.length() < LONGEST) {
      typed.append(key.character());
      chosen = 0;
    }
    return true;
  }
}
