package coilside.terminal;

import java.util.List;

/**
 * What a plot shows, in SI units.
 *
 * @param id names the plot, so that zoom and scale stay with it ("t2star.fid")
 * @param title what it is, short
 * @param xName name of the abscissa
 * @param xUnit unit of the abscissa
 * @param yName name of the ordinate
 * @param yUnit unit of the ordinate
 * @param series drawn in this order, later ones on top
 * @param residuals data minus fit, drawn in a panel of its own; empty when there is no fit
 * @param ppmOfHertz carrier for a reading in ppm; 0 where that makes no sense
 * @param shownFrom start of the part worth looking at first; NaN for all of it
 * @param shownTo its end
 * @param inset lines to write into a corner of a plot that has room for them
 * @param caption the result so far, one line
 */
record PlotModel(
    String id,
    String title,
    String xName,
    String xUnit,
    String yName,
    String yUnit,
    List<Series> series,
    List<Series> residuals,
    double ppmOfHertz,
    double shownFrom,
    double shownTo,
    List<String> inset,
    String caption) {
  PlotModel {
    series = List.copyOf(series);
    residuals = List.copyOf(residuals);
    inset = List.copyOf(inset);
  }

  /** A plot without lines in its corner. */
  PlotModel(
      String id,
      String title,
      String xName,
      String xUnit,
      String yName,
      String yUnit,
      List<Series> series,
      List<Series> residuals,
      double ppmOfHertz,
      double shownFrom,
      double shownTo,
      String caption) {
    this(
        id,
        title,
        xName,
        xUnit,
        yName,
        yUnit,
        series,
        residuals,
        ppmOfHertz,
        shownFrom,
        shownTo,
        List.of(),
        caption);
  }
}
