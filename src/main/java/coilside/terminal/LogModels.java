package coilside.terminal;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;

/** The strip charts of a log, one plot for each quantity that has values. */
final class LogModels {
  private LogModels() {}

  static List<PlotModel> of(LogSeries log) {
    List<PlotModel> out = new ArrayList<>();
    if (log.size() == 0) {
      return out;
    }
    double[] t = log.seconds();
    for (int i = 0; i < LogSeries.NAMES.size(); i++) {
      double[] y = log.column(i);
      double first = Arrays.stream(y).filter(Double::isFinite).findFirst().orElse(Double.NaN);
      if (Double.isNaN(first) || t.length != y.length) {
        continue;
      }
      String name = Numbers.words(LogSeries.NAMES.get(i));
      String title = name;
      if (i == 0) {
        for (int k = 0; k < y.length; k++) {
          y[k] -= first;
        }
        title = name + " less " + Numbers.si(first, "Hz", 8);
      }
      String caption =
          log.size()
              + (log.size() == 1 ? " row" : " rows")
              + (log.gaps() > 0 ? ", " + log.gaps() + " of them gaps" : "");
      out.add(
          new PlotModel(
              "log." + LogSeries.NAMES.get(i),
              title,
              "time",
              "s",
              name,
              LogSeries.UNITS.get(i),
              y.length > 1
                  ? List.of(Series.line("", Ink.SIGNAL, t, y))
                  : List.of(Series.points("", Ink.SIGNAL, t, y, new double[0])),
              List.of(),
              0,
              Double.NaN,
              Double.NaN,
              caption));
    }
    return out;
  }
}
