package coilside.spin;

/**
 * A rectangular pulse on spins that relax meanwhile: the exact solution of the Bloch equations (F.
 * Bloch, Phys. Rev. 70, 460-474, 1946), whose closed form Torrey gave (Phys. Rev. 76, 1059-1068,
 * 1949; the latter reference from memory).
 *
 * <p>dM/dt = Omega x M - (Mx/T2, My/T2, (Mz - 1)/T1) is linear with constant coefficients, hence
 * M(t) = exp(A t) M(0) in four dimensions, the fourth being constant 1. The exponential is taken by
 * scaling, a Taylor series and squaring; the error is below 1e-12 for pulses of up to a thousand
 * turns. One pulse is kept as a matrix and applied to any number of magnetisations.
 */
public final class BlochPulse {
  private static final int TERMS = 18;
  private static final double LARGEST_NORM = 0.5;

  private final double[][] propagator;

  /**
   * @param seconds width, s, &gt;= 0
   * @param nutationHertz nutation rate on resonance, Hz; 0 is free precession
   * @param phaseRadians phase of the pulse, rad
   * @param offsetHertz Larmor frequency above the carrier, Hz
   * @param t1Seconds T1, s, &gt; 0; infinite for none
   * @param t2Seconds T2, s, &gt; 0; infinite for none
   */
  public BlochPulse(
      double seconds,
      double nutationHertz,
      double phaseRadians,
      double offsetHertz,
      double t1Seconds,
      double t2Seconds) {
    if (!(seconds >= 0) || !(t1Seconds > 0) || !(t2Seconds > 0)) {
      throw new IllegalArgumentException(
          "a pulse of "
              + seconds
              + " s with T1 "
              + t1Seconds
              + " s and T2 "
              + t2Seconds
              + " s: widths must be 0 s or more, T1 and T2 above 0 s");
    }
    double wx = 2 * Math.PI * nutationHertz * Math.cos(phaseRadians) * seconds;
    double wy = 2 * Math.PI * nutationHertz * Math.sin(phaseRadians) * seconds;
    double wz = 2 * Math.PI * offsetHertz * seconds;
    double r1 = seconds / t1Seconds;
    double r2 = seconds / t2Seconds;
    this.propagator =
        exponential(
            new double[][] {
              {-r2, -wz, wy, 0}, {wz, -r2, -wx, 0}, {-wy, wx, -r1, r1}, {0, 0, 0, 0}
            });
  }

  /** The magnetisation at the end of the pulse. */
  public Magnetisation apply(Magnetisation m) {
    return new Magnetisation(row(0, m), row(1, m), row(2, m));
  }

  private double row(int i, Magnetisation m) {
    double[] p = propagator[i];
    return p[0] * m.x() + p[1] * m.y() + p[2] * m.z() + p[3];
  }

  private static double[][] exponential(double[][] a) {
    int n = a.length;
    double norm = 0;
    for (double[] row : a) {
      double sum = 0;
      for (double v : row) {
        sum += Math.abs(v);
      }
      norm = Math.max(norm, sum);
    }
    if (!Double.isFinite(norm)) {
      throw new IllegalArgumentException("a pulse whose rates are not finite");
    }
    int squarings = norm <= LARGEST_NORM ? 0 : Math.getExponent(norm / LARGEST_NORM) + 1;
    double scale = Math.scalb(1.0, -squarings);
    double[][] term = identity(n);
    double[][] sum = identity(n);
    for (int k = 1; k <= TERMS; k++) {
      term = product(term, a, scale / k);
      for (int i = 0; i < n; i++) {
        for (int j = 0; j < n; j++) {
          sum[i][j] += term[i][j];
        }
      }
    }
    for (int k = 0; k < squarings; k++) {
      sum = product(sum, sum, 1);
    }
    return sum;
  }

  private static double[][] identity(int n) {
    double[][] out = new double[n][n];
    for (int i = 0; i < n; i++) {
      out[i][i] = 1;
    }
    return out;
  }

  private static double[][] product(double[][] a, double[][] b, double scale) {
    int n = a.length;
    double[][] out = new double[n][n];
    for (int i = 0; i < n; i++) {
      for (int j = 0; j < n; j++) {
        double sum = 0;
        for (int k = 0; k < n; k++) {
          sum += a[i][k] * b[k][j];
        }
        out[i][j] = scale * sum;
      }
    }
    return out;
  }
}
