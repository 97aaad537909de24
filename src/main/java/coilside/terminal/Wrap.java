package coilside.terminal;

import java.util.ArrayList;
import java.util.List;

/** Breaks text into lines at blanks; continued lines keep the indent of the first. */
final class Wrap {
  private Wrap() {}

  static List<String> wrap(String text, int width) {
    List<String> out = new ArrayList<>();
    if (width < 4 || text.length() <= width) {
      out.add(text);
      return out;
    }
    int indent = 0;
    while (indent < text.length() && text.charAt(indent) == ' ') {
      indent++;
    }
    String margin = " ".repeat(Math.min(indent, width / 2));
    String rest = text;
    while (rest.length() > width) {
      int cut = rest.lastIndexOf(' ', width);
      if (cut <= margin.length()) {
        cut = width;
      }
      out.add(rest.substring(0, cut).stripTrailing());
      rest = margin + rest.substring(cut).stripLeading();
    }
    if (!rest.isBlank()) {
      out.add(rest);
    }
    return out;
  }
}
