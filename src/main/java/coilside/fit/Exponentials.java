package coilside.fit;

/**
 * Maximum likelihood of a sum of complex exponentials (and a constant) in white noise, by variable
 * projection (Golub and Pereyra 1973): y_k = sum over j of c_j exp(lambda_j k) [+ c_0].
 *
 * <p>Everything but two sums over the data is in closed form. lambda is per sample. The model is
 * analytic in its complex parameters, so their covariance is sigma^2 times {@link #inverse} in each
 * real and each imaginary part.
 */
final class Exponentials {
  private static final int ANCHOR = 512;
  private static final int MOST_STEPS = 60;

  final double[] re;
  final double[] im;
  final int n;

  /** Free poles first, then the constant where there is one. */
  final int poles;

  final int terms;
  final double[] lambdaRe;
  final double[] lambdaIm;
  final double[] cRe;
  final double[] cIm;

  /** Inverse of the normal matrix over c (all terms), then lambda (free poles). */
  double[][] inverseRe;

  double[][] inverseIm;
  double power;
  double explained;
  boolean converged;

  private final double[] aRe;
  private final double[] aIm;
  private final double[] bRe;
  private final double[] bIm;
  private final PowerSums sums = new PowerSums();

  Exponentials(double[] re, double[] im, double[] startRe, double[] startIm, boolean constant) {
    this.re = re;
    this.im = im;
    n = re.length;
    poles = startRe.length;
    terms = poles + (constant ? 1 : 0);
    lambdaRe = java.util.Arrays.copyOf(startRe, terms);
    lambdaIm = java.util.Arrays.copyOf(startIm, terms);
    cRe = new double[terms];
    cIm = new double[terms];
    aRe = new double[terms];
    aIm = new double[terms];
    bRe = new double[terms];
    bIm = new double[terms];
    double sum = 0;
    for (int k = 0; k < n; k++) {
      sum += re[k] * re[k] + im[k] * im[k];
    }
    power = sum;
    if (constant) {
      for (int k = 0; k < n; k++) {
        aRe[poles] += re[k];
        aIm[poles] += im[k];
      }
    }
  }

  /** Iterates to the maximum; false when the terms cannot be told apart. */
  boolean run() {
    double[] keptRe = lambdaRe.clone();
    double[] keptIm = lambdaIm.clone();
    double best = Double.NEGATIVE_INFINITY;
    double[] stepRe = new double[poles];
    double[] stepIm = new double[poles];
    double shrink = 1;
    for (int pass = 0; pass < MOST_STEPS; pass++) {
      if (!evaluate()) {
        return false;
      }
      if (explained < best - 1e-12 * power && pass > 0) {
        shrink *= 0.25;
        if (shrink < 1e-6) {
          System.arraycopy(keptRe, 0, lambdaRe, 0, terms);
          System.arraycopy(keptIm, 0, lambdaIm, 0, terms);
          converged = evaluate();
          return converged;
        }
        move(keptRe, keptIm, stepRe, stepIm, shrink);
        continue;
      }
      best = explained;
      shrink = 1;
      System.arraycopy(lambdaRe, 0, keptRe, 0, terms);
      System.arraycopy(lambdaIm, 0, keptIm, 0, terms);
      double noise = Math.max(0, power - explained) / (2.0 * n);
      boolean small = true;
      for (int i = 0; i < poles; i++) {
        double r = 0;
        double m = 0;
        for (int j = 0; j < poles; j++) {
          double[] g = gradient(j);
          double hr = inverseRe[terms + i][terms + j];
          double hi = inverseIm[terms + i][terms + j];
          r += hr * g[0] - hi * g[1];
          m += hr * g[1] + hi * g[0];
        }
        stepRe[i] = r;
        stepIm[i] = m;
        double sd = Math.sqrt(noise * inverseRe[terms + i][terms + i]);
        double floor = 1e-11 * Math.abs(lambdaRe[i]) + 1e-15;
        small &= Math.hypot(r, m) < Math.max(1e-3 * sd, floor);
      }
      if (small) {
        converged = true;
        return true;
      }
      move(keptRe, keptIm, stepRe, stepIm, 1);
    }
    return true;
  }

  private void move(double[] fromRe, double[] fromIm, double[] dRe, double[] dIm, double scale) {
    for (int i = 0; i < poles; i++) {
      double alpha = -fromRe[i];
      double wanted = alpha - scale * dRe[i];
      lambdaRe[i] = -Math.max(alpha / 3, Math.min(3 * alpha, wanted));
      lambdaIm[i] = fromIm[i] + scale * dIm[i];
    }
  }

  /** The score of lambda_j: conj(c_j) (b_j - sum c_i S1(q_ji)); complex. */
  private double[] gradient(int j) {
    double r = bRe[j];
    double m = bIm[j];
    for (int i = 0; i < terms; i++) {
      sums.compute(lambdaRe[j] + lambdaRe[i], lambdaIm[i] - lambdaIm[j], n);
      r -= cRe[i] * sums.re1 - cIm[i] * sums.im1;
      m -= cRe[i] * sums.im1 + cIm[i] * sums.re1;
    }
    return new double[] {cRe[j] * r + cIm[j] * m, cRe[j] * m - cIm[j] * r};
  }

  private boolean evaluate() {
    for (int j = 0; j < poles; j++) {
      project(j);
    }
    double[][] gr = new double[terms][terms];
    double[][] gi = new double[terms][terms];
    for (int i = 0; i < terms; i++) {
      for (int j = 0; j < terms; j++) {
        sums.compute(lambdaRe[i] + lambdaRe[j], lambdaIm[j] - lambdaIm[i], n);
        gr[i][j] = sums.re0;
        gi[i][j] = sums.im0;
      }
    }
    if (!ComplexMatrix.invert(gr, gi)) {
      return false;
    }
    explained = 0;
    for (int i = 0; i < terms; i++) {
      double r = 0;
      double m = 0;
      for (int j = 0; j < terms; j++) {
        r += gr[i][j] * aRe[j] - gi[i][j] * aIm[j];
        m += gr[i][j] * aIm[j] + gi[i][j] * aRe[j];
      }
      cRe[i] = r;
      cIm[i] = m;
      explained += aRe[i] * r + aIm[i] * m;
    }
    return Double.isFinite(explained) && normal();
  }

  private boolean normal() {
    int size = terms + poles;
    inverseRe = new double[size][size];
    inverseIm = new double[size][size];
    for (int i = 0; i < terms; i++) {
      for (int j = 0; j < terms; j++) {
        sums.compute(lambdaRe[i] + lambdaRe[j], lambdaIm[j] - lambdaIm[i], n);
        inverseRe[i][j] = sums.re0;
        inverseIm[i][j] = sums.im0;
        if (j < poles) {
          double r = cRe[j] * sums.re1 - cIm[j] * sums.im1;
          double m = cRe[j] * sums.im1 + cIm[j] * sums.re1;
          inverseRe[i][terms + j] = r;
          inverseIm[i][terms + j] = m;
          inverseRe[terms + j][i] = r;
          inverseIm[terms + j][i] = -m;
        }
        if (i < poles && j < poles) {
          double r = cRe[i] * cRe[j] + cIm[i] * cIm[j];
          double m = cRe[i] * cIm[j] - cIm[i] * cRe[j];
          inverseRe[terms + i][terms + j] = r * sums.re2 - m * sums.im2;
          inverseIm[terms + i][terms + j] = r * sums.im2 + m * sums.re2;
        }
      }
    }
    return ComplexMatrix.invert(inverseRe, inverseIm);
  }

  /** a = sum conj(z^k) y_k and b = sum k conj(z^k) y_k, four phasors abreast, anchored anew. */
  private void project(int j) {
    double x = lambdaRe[j];
    double y = -lambdaIm[j];
    double z4 = Math.exp(4 * x);
    double pr = z4 * Math.cos(4 * y);
    double pi = z4 * Math.sin(4 * y);
    double sumAr = 0;
    double sumAi = 0;
    double sumBr = 0;
    double sumBi = 0;
    for (int from = 0; from < n; from += ANCHOR) {
      int to = Math.min(n, from + ANCHOR);
      double w0r = Math.exp(x * from) * Math.cos(y * from);
      double w0i = Math.exp(x * from) * Math.sin(y * from);
      double e1 = Math.exp(x);
      double z1r = e1 * Math.cos(y);
      double z1i = e1 * Math.sin(y);
      double w1r = w0r * z1r - w0i * z1i;
      double w1i = w0r * z1i + w0i * z1r;
      double w2r = w1r * z1r - w1i * z1i;
      double w2i = w1r * z1i + w1i * z1r;
      double w3r = w2r * z1r - w2i * z1i;
      double w3i = w2r * z1i + w2i * z1r;
      double ar = 0;
      double ai = 0;
      double br = 0;
      double bi = 0;
      int k = from;
      for (; k + 3 < to; k += 4) {
        double t0r = w0r * re[k] - w0i * im[k];
        double t0i = w0r * im[k] + w0i * re[k];
        double t1r = w1r * re[k + 1] - w1i * im[k + 1];
        double t1i = w1r * im[k + 1] + w1i * re[k + 1];
        double t2r = w2r * re[k + 2] - w2i * im[k + 2];
        double t2i = w2r * im[k + 2] + w2i * re[k + 2];
        double t3r = w3r * re[k + 3] - w3i * im[k + 3];
        double t3i = w3r * im[k + 3] + w3i * re[k + 3];
        double fourR = (t0r + t1r) + (t2r + t3r);
        double fourI = (t0i + t1i) + (t2i + t3i);
        ar += fourR;
        ai += fourI;
        double local = k - from;
        br += local * fourR + (t1r + 2 * t2r + 3 * t3r);
        bi += local * fourI + (t1i + 2 * t2i + 3 * t3i);
        double s = w0r * pr - w0i * pi;
        w0i = w0r * pi + w0i * pr;
        w0r = s;
        s = w1r * pr - w1i * pi;
        w1i = w1r * pi + w1i * pr;
        w1r = s;
        s = w2r * pr - w2i * pi;
        w2i = w2r * pi + w2i * pr;
        w2r = s;
        s = w3r * pr - w3i * pi;
        w3i = w3r * pi + w3i * pr;
        w3r = s;
      }
      for (; k < to; k++) {
        double tr = w0r * re[k] - w0i * im[k];
        double ti = w0r * im[k] + w0i * re[k];
        ar += tr;
        ai += ti;
        br += (k - from) * tr;
        bi += (k - from) * ti;
        double s = w0r * z1r - w0i * z1i;
        w0i = w0r * z1i + w0i * z1r;
        w0r = s;
      }
      sumAr += ar;
      sumAi += ai;
      sumBr += br + from * ar;
      sumBi += bi + from * ai;
    }
    aRe[j] = sumAr;
    aIm[j] = sumAi;
    bRe[j] = sumBr;
    bIm[j] = sumBi;
  }

  /** Sum of the squares of the residuals of both channels, by a pass over the data. */
  double residuals(double[] outRe, double[] outIm) {
    System.arraycopy(re, 0, outRe, 0, n);
    System.arraycopy(im, 0, outIm, 0, n);
    for (int j = 0; j < terms; j++) {
      subtract(j, outRe, outIm);
    }
    double sum = 0;
    for (int k = 0; k < n; k++) {
      sum += outRe[k] * outRe[k] + outIm[k] * outIm[k];
    }
    return sum;
  }

  private void subtract(int j, double[] outRe, double[] outIm) {
    double x = lambdaRe[j];
    double y = lambdaIm[j];
    double e = Math.exp(x);
    double zr = e * Math.cos(y);
    double zi = e * Math.sin(y);
    double z2r = zr * zr - zi * zi;
    double z2i = 2 * zr * zi;
    for (int from = 0; from < n; from += ANCHOR) {
      int to = Math.min(n, from + ANCHOR);
      double w = Math.exp(x * from);
      double pr = w * Math.cos(y * from);
      double pi = w * Math.sin(y * from);
      double ar = cRe[j] * pr - cIm[j] * pi;
      double ai = cRe[j] * pi + cIm[j] * pr;
      double br = ar * zr - ai * zi;
      double bi = ar * zi + ai * zr;
      for (int k = from; k < to; k += 2) {
        outRe[k] -= ar;
        outIm[k] -= ai;
        if (k + 1 < to) {
          outRe[k + 1] -= br;
          outIm[k + 1] -= bi;
        }
        double s = ar * z2r - ai * z2i;
        ai = ar * z2i + ai * z2r;
        ar = s;
        s = br * z2r - bi * z2i;
        bi = br * z2i + bi * z2r;
        br = s;
      }
    }
  }
}
