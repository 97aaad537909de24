package coilside.fit;

import java.util.ArrayList;
import java.util.List;
import java.util.Random;

/** One spin ensemble under a train of pulses, written independently of {@link NutationModel}. */
final class NutationBench {
  final double t90;
  private final Random random;
  private final double u;
  private final double phase;
  private final double offset;
  private final double t1;
  private final double tau;

  /** Magnetisation along the field of each part of the ensemble before the next pulse. */
  private final double[] along;

  private final double[] scale;
  private final double[] weight;

  /**
   * @param u noise of an amplitude, the full signal being 1
   * @param offsetOverRate offset over nutation rate
   * @param tauOver90 decay time of the nutation over t90; NaN for none
   * @param spread relative standard deviation of B1; 0 for none
   */
  NutationBench(
      Random random,
      double t90,
      double u,
      double offsetOverRate,
      double t1,
      double tauOver90,
      double spread) {
    this.random = random;
    this.t90 = t90;
    this.u = u;
    this.t1 = t1;
    phase = 2 * Math.PI * random.nextDouble();
    offset = offsetOverRate / (4 * t90);
    tau = tauOver90 * t90;
    int parts = spread > 0 ? 61 : 1;
    along = new double[parts];
    scale = new double[parts];
    weight = new double[parts];
    double sum = 0;
    for (int i = 0; i < parts; i++) {
      double x = parts == 1 ? 0 : -4 + 8.0 * i / (parts - 1);
      scale[i] = 1 + spread * x;
      weight[i] = Math.exp(-x * x / 2);
      sum += weight[i];
      along[i] = 1;
    }
    for (int i = 0; i < parts; i++) {
      weight[i] /= sum;
    }
  }

  /** Plays one scan by turning vectors: precession about (rate, 0, offset). */
  NutationPoint play(double seconds, double recovery) {
    double re = 0;
    double im = 0;
    for (int i = 0; i < along.length; i++) {
      double m0 = 1 - (1 - along[i]) * Math.exp(-recovery / t1);
      double wx = 2 * Math.PI * scale[i] / (4 * t90);
      double wz = 2 * Math.PI * offset;
      double w = Math.hypot(wx, wz);
      double nx = wx / w;
      double nz = wz / w;
      double angle = w * seconds;
      double loss = Double.isNaN(tau) ? 1 : Math.exp(-seconds / tau);
      double c = loss * Math.cos(angle);
      double s = loss * Math.sin(angle);
      // Rodrigues' formula on (0, 0, m0); the part across the axis is damped.
      double mx = m0 * nx * nz * (1 - c);
      double my = -m0 * nx * s;
      along[i] = m0 * (nz * nz + nx * nx * c);
      re += weight[i] * mx;
      im += weight[i] * my;
    }
    // From the end of the pulse back to its centre, then the receiver's phase.
    double back = -2 * Math.PI * offset * seconds / 2 + phase;
    double r = re * Math.cos(back) - im * Math.sin(back);
    double i = re * Math.sin(back) + im * Math.cos(back);
    return new NutationPoint(
        seconds, r + u * random.nextGaussian(), i + u * random.nextGaussian(), u, recovery, offset);
  }

  /** Follows a plan until it says enough or {@code most} scans are spent. */
  static NutationPlan.Advice follow(
      NutationPlan plan, NutationBench bench, double recovery, int most, List<NutationPoint> into) {
    NutationPlan.Advice advice = plan.next(into);
    while (!advice.enough() && into.size() < most) {
      double first = into.isEmpty() ? Double.POSITIVE_INFINITY : recovery;
      into.add(bench.play(advice.pulseSeconds(), first));
      advice = plan.next(into);
    }
    return advice;
  }

  /** A grid of pulses, each played once. */
  List<NutationPoint> grid(int count, double longestOver90, double recovery) {
    List<NutationPoint> points = new ArrayList<>();
    for (int j = 1; j <= count; j++) {
      points.add(
          play(longestOver90 * t90 * j / count, j == 1 ? Double.POSITIVE_INFINITY : recovery));
    }
    return points;
  }
}
