package coilside.terminal;

/**
 * What is drawn in a plot: one line, set of points, or row of marks.
 *
 * @param name what it is, for the legend
 * @param form how it is drawn
 * @param x abscissae; for {@code LINE} rising
 * @param y ordinates, same length; ignored by {@code MARKS}
 * @param u standard uncertainties for {@code POINTS}; half-width for {@code BAND}; may be empty
 */
record Series(String name, Form form, Ink ink, double[] x, double[] y, double[] u) {
  enum Form {
    LINE,
    POINTS,
    /** Grey band of y +- u. */
    BAND,
    /** Marks on the x axis. */
    MARKS
  }

  static Series line(String name, Ink ink, double[] x, double[] y) {
    return new Series(name, Form.LINE, ink, x, y, new double[0]);
  }

  static Series points(String name, Ink ink, double[] x, double[] y, double[] u) {
    return new Series(name, Form.POINTS, ink, x, y, u);
  }

  static Series band(String name, double[] x, double[] y, double[] u) {
    return new Series(name, Form.BAND, Ink.BAND, x, y, u);
  }

  static Series marks(String name, double[] x) {
    return new Series(name, Form.MARKS, Ink.NEXT, x, new double[x.length], new double[0]);
  }

  double uncertainty(int k) {
    return k < u.length && Double.isFinite(u[k]) ? u[k] : 0;
  }
}
