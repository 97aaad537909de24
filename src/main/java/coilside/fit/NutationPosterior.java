package coilside.fit;

import java.util.List;

/**
 * The posterior of nutation rate and damping on a grid, logarithmic in the 90-degree pulse, the
 * complex amplitude integrated out under a broad prior.
 */
final class NutationPosterior {
  private static final int RATES = 361;
  private static final double[] DAMPINGS = {0, 0.05, 0.1, 0.2};

  private final NutationFit.Options options;
  private final List<NutationPoint> points;
  private final double[] t90 = new double[RATES];
  private final double[][] weight = new double[RATES][DAMPINGS.length];
  private final double[][] cRe = new double[RATES][DAMPINGS.length];
  private final double[][] cIm = new double[RATES][DAMPINGS.length];
  private final double[][] cVariance = new double[RATES][DAMPINGS.length];

  NutationPosterior(List<NutationPoint> points, NutationFit.Options options) {
    this.points = points;
    this.options = options;
    NutationModel model =
        new NutationModel(points, options.recovery(), NutationFit.Spread.EXPONENTIAL);
    int n = points.size();
    double[] re = new double[n];
    double[] im = new double[n];
    double largest = 0;
    for (NutationPoint p : points) {
      if (p.counted()) {
        largest = Math.max(largest, Math.max(Math.hypot(p.re(), p.im()), p.u()));
      }
    }
    double prior = 1 / (9 * largest * largest);
    double top = Double.NEGATIVE_INFINITY;
    for (int g = 0; g < RATES; g++) {
      double x = g / (RATES - 1.0);
      t90[g] =
          options.shortest90Seconds()
              * Math.pow(options.longest90Seconds() / options.shortest90Seconds(), x);
      for (int d = 0; d < DAMPINGS.length; d++) {
        model.fill(1 / (4 * t90[g]), DAMPINGS[d], options.t1Seconds(), re, im);
        double norm = prior;
        double br = 0;
        double bi = 0;
        for (int j = 0; j < n; j++) {
          NutationPoint p = points.get(j);
          if (p.counted()) {
            double w = 1 / (p.u() * p.u());
            norm += w * (re[j] * re[j] + im[j] * im[j]);
            br += w * (re[j] * p.re() + im[j] * p.im());
            bi += w * (re[j] * p.im() - im[j] * p.re());
          }
        }
        cRe[g][d] = br / norm;
        cIm[g][d] = bi / norm;
        cVariance[g][d] = 1 / norm;
        weight[g][d] = 0.5 * (br * br + bi * bi) / norm - Math.log(norm / prior);
        top = Math.max(top, weight[g][d]);
      }
    }
    double sum = 0;
    for (double[] row : weight) {
      for (int d = 0; d < row.length; d++) {
        row[d] = Math.exp(row[d] - top);
        sum += row[d];
      }
    }
    for (double[] row : weight) {
      for (int d = 0; d < row.length; d++) {
        row[d] /= sum;
      }
    }
  }

  /** Standard deviation of the logarithm of the 90-degree pulse. */
  double relativeDeviation() {
    double mean = 0;
    double square = 0;
    for (int g = 0; g < RATES; g++) {
      for (double w : weight[g]) {
        double x = Math.log(t90[g]);
        mean += w * x;
        square += w * x * x;
      }
    }
    return Math.sqrt(Math.max(0, square - mean * mean));
  }

  /** The 90-degree pulse that is longer with a probability of one in ten. */
  double upper90() {
    double above = 0;
    for (int g = RATES - 1; g > 0; g--) {
      for (double w : weight[g]) {
        above += w;
      }
      if (above > 0.1) {
        return t90[g];
      }
    }
    return t90[0];
  }

  /** Probability that the 90-degree pulse lies farther than {@code relative} from this one. */
  double outside(double near90, double relative) {
    double sum = 0;
    for (int g = 0; g < RATES; g++) {
      if (Math.abs(t90[g] / near90 - 1) > relative) {
        for (double w : weight[g]) {
          sum += w;
        }
      }
    }
    return sum;
  }

  /** The pulse width whose signal has the largest predicted variance. */
  double leastPredictable(List<Double> widths) {
    NutationPoint last = points.get(points.size() - 1);
    double best = widths.get(0);
    double most = -1;
    for (double width : widths) {
      NutationPoint p =
          new NutationPoint(width, 0, 0, 1, Double.POSITIVE_INFINITY, last.offsetHertz());
      NutationModel model =
          new NutationModel(
              List.of(p), NutationFit.Recovery.STEADY_STATE, NutationFit.Spread.EXPONENTIAL);
      double meanRe = 0;
      double meanIm = 0;
      double square = 0;
      double[] re = new double[1];
      double[] im = new double[1];
      for (int g = 0; g < RATES; g++) {
        for (int d = 0; d < DAMPINGS.length; d++) {
          double w = weight[g][d];
          if (w < 1e-7) {
            continue;
          }
          model.fill(1 / (4 * t90[g]), DAMPINGS[d], options.t1Seconds(), re, im);
          double size = re[0] * re[0] + im[0] * im[0];
          double sr = cRe[g][d] * re[0] - cIm[g][d] * im[0];
          double si = cRe[g][d] * im[0] + cIm[g][d] * re[0];
          meanRe += w * sr;
          meanIm += w * si;
          square += w * (sr * sr + si * si + 2 * cVariance[g][d] * size);
        }
      }
      double variance = square - meanRe * meanRe - meanIm * meanIm;
      if (variance > most) {
        most = variance;
        best = width;
      }
    }
    return best;
  }
}
