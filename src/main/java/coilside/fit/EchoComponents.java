package coilside.fit;

/**
 * Two decays of one phase in an echo train, with the time after which their sum has fallen to 1/e.
 *
 * @param firstT2 of the larger part, s
 * @param secondT2 of the smaller part, s
 * @param secondFraction the smaller part, 0..0.5
 * @param amplitude at time zero, V
 * @param uAmplitude its standard uncertainty, V
 * @param oneOverE s
 * @param uOneOverE its standard uncertainty, s
 * @param chiSquare squared residuals over uncertainties
 */
record EchoComponents(
    double firstT2,
    double secondT2,
    double secondFraction,
    double amplitude,
    double uAmplitude,
    double oneOverE,
    double uOneOverE,
    double chiSquare) {

  /** Null when two decays cannot be told apart. */
  static EchoComponents fit(EchoTrainFit.Echoes e, double[] y, double[] u, double[] single) {
    LeastSquares.Solution best = null;
    for (double ratio : new double[] {2, 4, 8}) {
      double log = Math.log(ratio) / 2;
      double[] start = {
        single[0] / 2, single[1] / 2, single[2] + log, 1, single[2] - log, single[3]
      };
      try {
        LeastSquares.Solution s = LeastSquares.solve(model(e), y, u, start);
        if (best == null || s.weightedSquares() < best.weightedSquares()) {
          best = s;
        }
      } catch (NotDetermined notThisOne) {
        continue;
      }
    }
    if (best == null || !(best.parameters()[3] > 0)) {
      return null;
    }
    double[] p = best.parameters();
    double a = Math.hypot(p[0], p[1]);
    double r = p[3];
    double amplitude = a * (1 + r);
    double t = oneOverE(p);
    double[] gT = new double[6];
    double[] gA = new double[6];
    for (int k = 0; k < 6; k++) {
      double h = 1e-3 * best.u(k);
      double[] up = p.clone();
      double[] down = p.clone();
      up[k] += h;
      down[k] -= h;
      gT[k] = (oneOverE(up) - oneOverE(down)) / (2 * h);
      gA[k] =
          (Math.hypot(up[0], up[1]) * (1 + up[3]) - Math.hypot(down[0], down[1]) * (1 + down[3]))
              / (2 * h);
    }
    double vT = 0;
    double vA = 0;
    for (int i = 0; i < 6; i++) {
      for (int j = 0; j < 6; j++) {
        vT += gT[i] * best.unitCovariance()[i][j] * gT[j];
        vA += gA[i] * best.unitCovariance()[i][j] * gA[j];
      }
    }
    boolean swap = r > 1;
    double first = Math.exp(swap ? p[4] : p[2]);
    double second = Math.exp(swap ? p[2] : p[4]);
    return new EchoComponents(
        first,
        second,
        (swap ? 1 : r) / (1 + r),
        amplitude,
        Math.sqrt(vA),
        t,
        Math.sqrt(vT),
        best.weightedSquares());
  }

  private static LeastSquares.Model model(EchoTrainFit.Echoes e) {
    return (p, values, jacobian) -> {
      double ta = Math.exp(p[2]);
      double tb = Math.exp(p[4]);
      for (int i = 0; i < e.seconds().length; i++) {
        double t = e.seconds()[i];
        double odd = 1 + (i % 2 == 0 ? 1 : -1) * p[5];
        double a = Math.exp(-t / ta);
        double b = Math.exp(-t / tb);
        double sum = a + p[3] * b;
        for (int c = 0; c < 2; c++) {
          double[] row = jacobian[2 * i + c];
          double v = p[c];
          values[2 * i + c] = v * sum * odd;
          row[c] = sum * odd;
          row[1 - c] = 0;
          row[2] = v * a * t / ta * odd;
          row[3] = v * b * odd;
          row[4] = v * p[3] * b * t / tb * odd;
          row[5] = v * sum * (i % 2 == 0 ? 1 : -1);
        }
      }
    };
  }

  private static double oneOverE(double[] p) {
    double ta = Math.exp(p[2]);
    double tb = Math.exp(p[4]);
    double target = (1 + p[3]) / Math.E;
    double low = 0;
    double high = 3 * Math.max(ta, tb);
    for (int i = 0; i < 80; i++) {
      double mid = (low + high) / 2;
      if (Math.exp(-mid / ta) + p[3] * Math.exp(-mid / tb) > target) {
        low = mid;
      } else {
        high = mid;
      }
    }
    return (low + high) / 2;
  }
}
