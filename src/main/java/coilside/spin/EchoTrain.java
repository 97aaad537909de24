package coilside.spin;

/**
 * Amplitudes of an echo train with any refocusing angle, by counting coherence orders: the sample
 * is dephased by a large number of turns between pulses, so that states of different order do not
 * mix (J. Hennig, J. Magn. Reson. 78, 397-407, 1988; reference from memory).
 *
 * <p>States F_k (k = -n..n) and Z_k (k = 0..n) hold the transverse and longitudinal magnetisation
 * that went through k half spacings of dephasing. A pulse mixes F_k, F*_-k and Z_k; each half
 * spacing raises F by one order and relaxes everything. The exciting pulse has phase 0, the
 * refocusing pulses a quarter turn (S. Meiboom and D. Gill, 1958) or the same phase (H. Y. Carr and
 * E. M. Purcell, 1954).
 */
public final class EchoTrain {
  /** Phase of the refocusing pulses against the exciting one. */
  public enum Phases {
    /** The same: errors of the angle add up. */
    EQUAL(0),
    /** A quarter turn on: errors of the angle cancel at every second echo. */
    QUARTER_TURN(Math.PI / 2);

    private final double radians;

    Phases(double radians) {
      this.radians = radians;
    }
  }

  private EchoTrain() {}

  /**
   * Sizes of the echoes, signed along the first perfect echo's phase; 1 without loss.
   *
   * @param exciteRadians flip angle of the first pulse, rad
   * @param refocusRadians flip angle of the others, rad
   * @param spacingSeconds from echo to echo, s
   * @param t1Seconds T1, s; infinite for none
   * @param t2Seconds T2, s; infinite for none
   * @param echoes how many, &gt;= 1
   */
  public static double[] amplitudes(
      double exciteRadians,
      double refocusRadians,
      Phases phases,
      double spacingSeconds,
      double t1Seconds,
      double t2Seconds,
      int echoes) {
    if (echoes < 1 || !(spacingSeconds > 0)) {
      throw new IllegalArgumentException(
          echoes + " echoes " + spacingSeconds + " s apart; there must be some, and apart");
    }
    Orders states = new Orders(2 * echoes + 2);
    states.pulse(exciteRadians, 0);
    double e1 = Math.exp(-spacingSeconds / 2 / t1Seconds);
    double e2 = Math.exp(-spacingSeconds / 2 / t2Seconds);
    double[] out = new double[echoes];
    for (int k = 0; k < echoes; k++) {
      states.halfSpacing(e1, e2);
      states.pulse(refocusRadians, phases.radians);
      states.halfSpacing(e1, e2);
      // Excited along -i; equal phases put odd echoes on the other side.
      double sign = phases == Phases.EQUAL && k % 2 == 0 ? 1 : -1;
      out[k] = sign * states.echo();
    }
    return out;
  }

  /** F+ [order], F- [order] (conjugated partner), Z [order]; complex. */
  private static final class Orders {
    private final double[][] plus;
    private final double[][] minus;
    private final double[][] z;
    private int top;

    Orders(int size) {
      plus = new double[size][2];
      minus = new double[size][2];
      z = new double[size][2];
      z[0][0] = 1;
    }

    double echo() {
      return plus[0][1];
    }

    /**
     * The turn about (cos p, sin p, 0) by a, on m = Mx + i My and its conjugate: m' = cos^2(a/2) m
     * + e^{2ip} sin^2(a/2) m* - i e^{ip} sin a Mz; Mz' = (i/2) sin a (e^{ip} m* - e^{-ip} m) + cos
     * a Mz.
     */
    void pulse(double a, double p) {
      double c2 = Math.cos(a / 2) * Math.cos(a / 2);
      double s2 = Math.sin(a / 2) * Math.sin(a / 2);
      double sin = Math.sin(a);
      double cos = Math.cos(a);
      double pr = Math.cos(p);
      double pi = Math.sin(p);
      double dr = Math.cos(2 * p);
      double di = Math.sin(2 * p);
      for (int k = 0; k <= top; k++) {
        double fr = plus[k][0];
        double fi = plus[k][1];
        double gr = minus[k][0];
        double gi = minus[k][1];
        double zr = z[k][0];
        double zi = z[k][1];
        // -i e^{ip} = (sin p, -cos p); i e^{-ip} = (sin p, cos p)
        plus[k][0] = c2 * fr + s2 * (dr * gr - di * gi) + sin * (pi * zr + pr * zi);
        plus[k][1] = c2 * fi + s2 * (dr * gi + di * gr) + sin * (pi * zi - pr * zr);
        minus[k][0] = c2 * gr + s2 * (dr * fr + di * fi) + sin * (pi * zr - pr * zi);
        minus[k][1] = c2 * gi + s2 * (dr * fi - di * fr) + sin * (pi * zi + pr * zr);
        double er = pr * gr - pi * gi - (pr * fr + pi * fi);
        double ei = pr * gi + pi * gr - (pr * fi - pi * fr);
        z[k][0] = cos * zr - sin / 2 * ei;
        z[k][1] = cos * zi + sin / 2 * er;
      }
    }

    void halfSpacing(double e1, double e2) {
      top = Math.min(top + 1, plus.length - 1);
      for (int k = top; k > 0; k--) {
        plus[k][0] = e2 * plus[k - 1][0];
        plus[k][1] = e2 * plus[k - 1][1];
      }
      for (int k = 0; k < top; k++) {
        minus[k][0] = e2 * minus[k + 1][0];
        minus[k][1] = e2 * minus[k + 1][1];
      }
      minus[top][0] = 0;
      minus[top][1] = 0;
      plus[0][0] = minus[0][0];
      plus[0][1] = -minus[0][1];
      for (int k = 0; k <= top; k++) {
        z[k][0] *= e1;
        z[k][1] *= e1;
      }
      z[0][0] += 1 - e1;
    }
  }
}
