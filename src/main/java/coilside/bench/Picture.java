package coilside.bench;

import coilside.signal.Fid;
import java.util.List;
import java.util.Optional;

/**
 * What there is to see of a rung: one form a kind, a closed set, SI units. Arrays are handed over
 * and not changed afterwards.
 */
public sealed interface Picture {
  Rung rung();

  /**
   * A curve of measured points with its fit: nutation (x = pulse width, s), recovery (x = recovery
   * time, s), echo decay (x = echo time, s), resonance search (x = carrier, Hz; y = detection
   * statistic in sigma), gain (x = gain, dB; y = peak fraction of full scale).
   *
   * @param x abscissae of the points
   * @param y ordinates
   * @param u standard uncertainty of each ordinate; 0 where unknown
   * @param fitX abscissae of the fitted curve; empty while there is none
   * @param fitY the fitted curve
   * @param fitU standard uncertainty of the fitted curve at each of its abscissae; empty where it
   *     is not known
   * @param nextX where it will measure next; may be empty
   * @param caption the result so far, one line
   */
  record Curve(
      Rung rung,
      String xName,
      String xUnit,
      String yName,
      String yUnit,
      double[] x,
      double[] y,
      double[] u,
      double[] fitX,
      double[] fitY,
      double[] fitU,
      double[] nextX,
      String caption)
      implements Picture {
    public Curve {
      if (fitX.length != fitY.length || fitU.length != 0 && fitU.length != fitX.length) {
        throw new IllegalArgumentException(
            "a fitted curve of "
                + fitX.length
                + " abscissae has "
                + fitY.length
                + " ordinates and "
                + fitU.length
                + " uncertainties");
      }
    }

    /** A curve whose fit has no uncertainty of its own to show. */
    public Curve(
        Rung rung,
        String xName,
        String xUnit,
        String yName,
        String yUnit,
        double[] x,
        double[] y,
        double[] u,
        double[] fitX,
        double[] fitY,
        double[] nextX,
        String caption) {
      this(rung, xName, xUnit, yName, yUnit, x, y, u, fitX, fitY, new double[0], nextX, caption);
    }
  }

  /**
   * An FID with its fit, where there is one: noise, ring-down, T2*.
   *
   * @param fid the average so far
   * @param fit the fitted FID at the same instants
   * @param usedFrom first sample that the fit used
   * @param spectrum windowed spectrum to show beside it
   * @param caption the result so far, one line
   */
  record Trace(
      Rung rung,
      Fid fid,
      Optional<Fid> fit,
      int usedFrom,
      Optional<coilside.signal.Spectrum> spectrum,
      List<String> marks,
      String caption)
      implements Picture {}
}
