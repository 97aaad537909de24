package coilside.board.simulated;

import coilside.board.simulated.Scenario.Component;
import coilside.board.simulated.Scenario.Sample;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;

/**
 * The magnetisation of the sample as isochromats, each with its own offset, B1 and weight.
 *
 * <p>Bloch equations: transverse magnetisation m = mx + i my turns as dm/dt = i 2 pi f m, pulses
 * turn M about the effective field (B1 cos p, B1 sin p, offset) as dM/dt = Omega x M. Everything is
 * held in the frame of the magnet's own Larmor frequency, so that free precession does not depend
 * on the carrier and its factors can be kept.
 */
final class SimulatedSpins {
  private static final int ISOCHROMATS = 4096;
  private static final int KEPT = 64;

  /** Transverse magnetisation older than this many T2 is taken as gone. */
  private static final double GONE = 25;

  /**
   * Offsets at pulses are taken to the next of these steps, Hz, so that rotations are found again
   * while the field drifts: less than 1e-4 rad in a pulse of 100 us.
   */
  private static final double OFFSET_STEP = 0.25;

  private record Turn(double seconds, double rabiHertz, double offsetHertz) {}

  private final List<Component> components;
  private final int each;
  private final double[] offset;
  private final double[] b1;
  private final double[] equilibrium;
  private final double[] mx;
  private final double[] my;
  private final double[] mz;
  private final Map<Double, double[][]> precessions = kept();
  private final Map<Turn, double[][]> rotations = kept();

  SimulatedSpins(Scenario scenario) {
    Sample sample = scenario.sample();
    this.components = sample.components();
    this.each = Math.max(512, ISOCHROMATS / components.size());
    int n = each * components.size();
    offset = new double[n];
    b1 = new double[n];
    equilibrium = new double[n];
    mx = new double[n];
    my = new double[n];
    mz = new double[n];
    SimulatedFieldSpread spread =
        SimulatedFieldSpread.of(scenario.magnet().shape(), scenario.magnet().widthHertz(), each);
    double[] deviates = SimulatedFieldSpread.normalDeviates(each);
    double sum = components.stream().mapToDouble(Component::fraction).sum();
    standardise(deviates, spread.weight());
    for (int c = 0; c < components.size(); c++) {
      for (int j = 0; j < each; j++) {
        int at = c * each + j;
        offset[at] = spread.hertz()[j] + components.get(c).shiftHertz();
        b1[at] = Math.max(0, 1 + scenario.coil().b1Spread() * deviates[j]);
        equilibrium[at] = spread.weight()[j] * components.get(c).fraction() / sum;
        mz[at] = equilibrium[at];
      }
    }
  }

  /** So that mean and deviation of B1 over the sample are exactly what the scenario says. */
  private static void standardise(double[] deviates, double[] weight) {
    double mean = 0;
    double square = 0;
    for (int j = 0; j < deviates.length; j++) {
      mean += weight[j] * deviates[j];
      square += weight[j] * deviates[j] * deviates[j];
    }
    double deviation = Math.sqrt(square - mean * mean);
    for (int j = 0; j < deviates.length; j++) {
      deviates[j] = (deviates[j] - mean) / deviation;
    }
  }

  private static <K> Map<K, double[][]> kept() {
    return new LinkedHashMap<>(64, 0.75f, true) {
      private static final long serialVersionUID = 1L;

      @Override
      protected boolean removeEldestEntry(Map.Entry<K, double[][]> eldest) {
        return size() > KEPT;
      }
    };
  }

  int size() {
    return offset.length;
  }

  int components() {
    return components.size();
  }

  /** First isochromat of a component; those of one component stand together. */
  int first(int component) {
    return component * each;
  }

  double t2Seconds(int component) {
    return components.get(component).t2Seconds();
  }

  double offsetHertz(int j) {
    return offset[j];
  }

  double transverseX(int j) {
    return mx[j];
  }

  double transverseY(int j) {
    return my[j];
  }

  /** The whole longitudinal magnetisation, 1 when recovered. */
  double longitudinal() {
    double sum = 0;
    for (double z : mz) {
      sum += z;
    }
    return sum;
  }

  /** Free precession and relaxation. */
  void free(double seconds) {
    if (seconds <= 0) {
      return;
    }
    double longest = 0;
    for (Component c : components) {
      longest = Math.max(longest, c.t2Seconds());
    }
    if (seconds > GONE * longest) {
      java.util.Arrays.fill(mx, 0);
      java.util.Arrays.fill(my, 0);
    } else {
      double[][] p = precessions.computeIfAbsent(seconds, this::precession);
      for (int j = 0; j < mx.length; j++) {
        double x = mx[j] * p[0][j] - my[j] * p[1][j];
        my[j] = mx[j] * p[1][j] + my[j] * p[0][j];
        mx[j] = x;
      }
    }
    recover(seconds);
  }

  private double[][] precession(double seconds) {
    double[][] out = new double[2][mx.length];
    for (int c = 0; c < components.size(); c++) {
      double decay = Math.exp(-seconds / components.get(c).t2Seconds());
      for (int j = c * each; j < (c + 1) * each; j++) {
        double turns = offset[j] * seconds;
        double angle = 2 * Math.PI * (turns - Math.rint(turns));
        out[0][j] = decay * Math.cos(angle);
        out[1][j] = decay * Math.sin(angle);
      }
    }
    return out;
  }

  private void recover(double seconds) {
    for (int c = 0; c < components.size(); c++) {
      double left = Math.exp(-seconds / components.get(c).t1Seconds());
      for (int j = c * each; j < (c + 1) * each; j++) {
        mz[j] = equilibrium[j] + (mz[j] - equilibrium[j]) * left;
      }
    }
  }

  /** Relaxation alone, for the halves of a pulse's length before and after its rotation. */
  private void relax(double seconds) {
    for (int c = 0; c < components.size(); c++) {
      double left = Math.exp(-seconds / components.get(c).t2Seconds());
      for (int j = c * each; j < (c + 1) * each; j++) {
        mx[j] *= left;
        my[j] *= left;
      }
    }
    recover(seconds);
  }

  /**
   * A pulse.
   *
   * @param seconds width, s
   * @param rabiHertz nutation rate where B1 is average, Hz
   * @param phaseRadians phase of the pulse in the magnet's frame at its middle, rad
   * @param offsetHertz the magnet's Larmor frequency above the carrier, Hz
   */
  void pulse(double seconds, double rabiHertz, double phaseRadians, double offsetHertz) {
    relax(seconds / 2);
    double offsetTaken = OFFSET_STEP * Math.rint(offsetHertz / OFFSET_STEP);
    double[][] r =
        rotations.computeIfAbsent(new Turn(seconds, rabiHertz, offsetTaken), this::rotation);
    // In the magnet's frame the carrier's frame turns by -offset during the pulse.
    double half = Math.PI * offsetTaken * seconds;
    double c1 = Math.cos(-phaseRadians - half);
    double s1 = Math.sin(-phaseRadians - half);
    double c2 = Math.cos(phaseRadians - half);
    double s2 = Math.sin(phaseRadians - half);
    for (int j = 0; j < mx.length; j++) {
      double x = mx[j] * c1 - my[j] * s1;
      double y = mx[j] * s1 + my[j] * c1;
      double z = mz[j];
      double cos = r[0][j];
      double sin = r[1][j];
      double a = r[2][j];
      double b = r[3][j];
      double along = (a * x + b * z) * (1 - cos);
      double x2 = x * cos - b * y * sin + a * along;
      double y2 = y * cos + (b * x - a * z) * sin;
      mz[j] = z * cos + a * y * sin + b * along;
      mx[j] = x2 * c2 - y2 * s2;
      my[j] = x2 * s2 + y2 * c2;
    }
    relax(seconds / 2);
  }

  private double[][] rotation(Turn turn) {
    double[][] out = new double[4][mx.length];
    for (int j = 0; j < mx.length; j++) {
      double a = b1[j] * turn.rabiHertz();
      double b = offset[j] + turn.offsetHertz();
      double effective = Math.sqrt(a * a + b * b);
      double angle = 2 * Math.PI * effective * turn.seconds();
      out[0][j] = Math.cos(angle);
      out[1][j] = Math.sin(angle);
      out[2][j] = effective == 0 ? 0 : a / effective;
      out[3][j] = effective == 0 ? 1 : b / effective;
    }
    return out;
  }
}
