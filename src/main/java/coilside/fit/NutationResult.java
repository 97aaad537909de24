package coilside.fit;

import coilside.quantity.Measured;
import java.util.List;

/**
 * What {@link NutationFit} found.
 *
 * @param pulse90 width of the 90-degree pulse on resonance, s
 * @param pulse180 width of the 180-degree pulse on resonance, s
 * @param nutationRate on resonance, Hz: 1/(4 pulse90)
 * @param spread relative spread of B1: standard deviation (Gaussian) or half width at half height
 *     (exponential damping), 1
 * @param spreadShape which of the two
 * @param amplitude of the fully recovered signal after a perfect 90-degree pulse, V
 * @param phaseRadians its phase, rad
 * @param reducedChiSquare squared residuals over uncertainties, by degree of freedom
 * @param degreesOfFreedom of that
 * @param rivalRate nutation rate of the next best minimum, Hz; NaN when there is none
 * @param rivalChiSquareExcess how much worse that minimum is, in chi-square
 * @param warnings what the reader should know, one sentence each
 */
public record NutationResult(
    Measured pulse90,
    Measured pulse180,
    Measured nutationRate,
    Measured spread,
    NutationFit.Spread spreadShape,
    Measured amplitude,
    Measured phaseRadians,
    double reducedChiSquare,
    int degreesOfFreedom,
    double rivalRate,
    double rivalChiSquareExcess,
    List<String> warnings) {
  public NutationResult {
    warnings = List.copyOf(warnings);
  }

  /** The fitted curve on resonance, fully recovered, along the common phase, V. */
  public double[] curve(double[] pulseSeconds) {
    double[] y = new double[pulseSeconds.length];
    for (int j = 0; j < y.length; j++) {
      double theta = 2 * Math.PI * nutationRate.value() * pulseSeconds[j];
      y[j] =
          amplitude.value()
              * spreadShape.factor(spreadShape.parameter(spread.value()), theta)
              * Math.sin(theta);
    }
    return y;
  }

  /** A point's amplitude along the common phase, V. */
  public double along(NutationPoint point) {
    return point.re() * Math.cos(phaseRadians.value())
        + point.im() * Math.sin(phaseRadians.value());
  }
}
