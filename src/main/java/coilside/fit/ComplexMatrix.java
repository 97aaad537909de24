package coilside.fit;

/**
 * Small Hermitian positive systems, n up to a handful, stored as separate real and imaginary parts.
 */
final class ComplexMatrix {
  private ComplexMatrix() {}

  /**
   * Inverts in place by Gauss-Jordan, after scaling to a unit diagonal (a positive definite matrix
   * needs no pivoting).
   *
   * @return false when the matrix is singular to working precision
   */
  static boolean invert(double[][] re, double[][] im) {
    int n = re.length;
    double[] scale = new double[n];
    for (int i = 0; i < n; i++) {
      if (!(re[i][i] > 0) || !Double.isFinite(re[i][i])) {
        return false;
      }
      scale[i] = 1 / Math.sqrt(re[i][i]);
    }
    for (int i = 0; i < n; i++) {
      for (int j = 0; j < n; j++) {
        re[i][j] *= scale[i] * scale[j];
        im[i][j] *= scale[i] * scale[j];
      }
    }
    for (int k = 0; k < n; k++) {
      double pr = re[k][k];
      double pi = im[k][k];
      double size = pr * pr + pi * pi;
      if (!(size > 1e-28)) {
        return false;
      }
      double ir = pr / size;
      double ii = -pi / size;
      re[k][k] = 1;
      im[k][k] = 0;
      for (int j = 0; j < n; j++) {
        double r = re[k][j] * ir - im[k][j] * ii;
        im[k][j] = re[k][j] * ii + im[k][j] * ir;
        re[k][j] = r;
      }
      for (int i = 0; i < n; i++) {
        if (i == k) {
          continue;
        }
        double fr = re[i][k];
        double fi = im[i][k];
        re[i][k] = 0;
        im[i][k] = 0;
        for (int j = 0; j < n; j++) {
          re[i][j] -= fr * re[k][j] - fi * im[k][j];
          im[i][j] -= fr * im[k][j] + fi * re[k][j];
        }
      }
    }
    for (int i = 0; i < n; i++) {
      for (int j = 0; j < n; j++) {
        re[i][j] *= scale[i] * scale[j];
        im[i][j] *= scale[i] * scale[j];
      }
    }
    return true;
  }
}
