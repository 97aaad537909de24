package coilside.fit;

import coilside.fit.NotDetermined.Reason;
import coilside.quantity.Measured;
import coilside.quantity.Unit;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.OptionalLong;

/**
 * The 90-degree pulse from amplitudes against pulse widths: a fit of {@link NutationModel}, in
 * complex amplitudes, with the uncertainties of the points as given.
 *
 * <p>A grid over the nutation rates allowed, fine enough for the longest pulse, with the linear
 * amplitude solved at each, finds every minimum; the best three are refined together with damping
 * and (within its own uncertainty) T1. A rival minimum that fits nearly as well makes the answer
 * ambiguous instead of wrong.
 */
public final class NutationFit {
  /**
   * What the model leaves out, relative: the shape of the B1 spread, the second order of linewidth
   * over nutation rate. Measured against simulated spins, 0.19 T bench: 2e-5 to 5e-5.
   */
  private static final double MODEL_LIMIT = 4e-5;

  private NutationFit() {}

  /** What the spins did between pulses. */
  public enum Recovery {
    /** Each point is a steady state of many scans with the same pulse and recovery time. */
    STEADY_STATE,
    /**
     * The points are the single scans in the order they were played, the first from equilibrium.
     */
    AS_PLAYED
  }

  /** How the spread of B1 damps the curve. */
  public enum Spread {
    /** exp(-G theta): B1 spread with half width at half height G (Lorentzian). */
    EXPONENTIAL,
    /** exp(-(s theta)^2/2): B1 spread with standard deviation s (Gaussian). */
    GAUSSIAN;

    /**
     * What is left of the rotating part. Below zero the parameter is carried on by reflection, 2 -
     * factor(-p): smooth, so that noise about zero damping does not bias, and bounded.
     */
    double factor(double parameter, double theta) {
      double exponent =
          Math.abs(parameter) * (this == EXPONENTIAL ? theta * 2 / Math.PI : 0.5 * theta * theta);
      double left = Math.exp(-exponent);
      return parameter < 0 ? 2 - left : left;
    }

    /** The internal parameter (exponent per 90 degrees; squared deviation) of a relative spread. */
    double parameter(double spread) {
      return this == EXPONENTIAL ? spread * Math.PI / 2 : spread * spread;
    }

    /** How large that parameter may reasonably be: a weak prior's standard deviation. */
    double prior() {
      return this == EXPONENTIAL ? 0.3 : 0.05;
    }
  }

  /**
   * What is known before.
   *
   * @param shortest90Seconds the 90-degree pulse is not shorter than this, s
   * @param longest90Seconds nor longer than this, s
   * @param recovery how the points were played
   * @param t1Seconds T1, s; NaN when all recovery times count as complete
   * @param t1Uncertainty its standard uncertainty, s; it is fitted within it
   * @param spread shape of the damping; null to let the points choose
   * @param largestRelative largest relative uncertainty that counts as determined, usually 0.2
   * @param decayRate rate at which the FIDs decay where they were projected, 1/s (see {@link
   *     NutationModel}); 0 when it does not matter
   */
  public record Options(
      double shortest90Seconds,
      double longest90Seconds,
      Recovery recovery,
      double t1Seconds,
      double t1Uncertainty,
      Spread spread,
      double largestRelative,
      double decayRate) {
    public Options {
      if (!(decayRate >= 0) || !Double.isFinite(decayRate)) {
        throw new IllegalArgumentException(
            "a decay rate of " + decayRate + " 1/s must be 0 or more");
      }
      if (!(shortest90Seconds > 0 && longest90Seconds > shortest90Seconds)
          || !Double.isFinite(longest90Seconds)) {
        throw new IllegalArgumentException(
            "the 90-degree pulse is sought from "
                + shortest90Seconds
                + " s to "
                + longest90Seconds
                + " s: the range must rise from above 0 s");
      }
    }

    /** Single scans as played, damping chosen by the points. */
    public static Options between(double shortest90Seconds, double longest90Seconds) {
      return new Options(
          shortest90Seconds, longest90Seconds, Recovery.AS_PLAYED, Double.NaN, 0, null, 0.2, 0);
    }

    public Options withT1(double seconds, double uncertainty) {
      return new Options(
          shortest90Seconds,
          longest90Seconds,
          recovery,
          seconds,
          uncertainty,
          spread,
          largestRelative,
          decayRate);
    }

    public Options withDecayRate(double perSecond) {
      return new Options(
          shortest90Seconds,
          longest90Seconds,
          recovery,
          t1Seconds,
          t1Uncertainty,
          spread,
          largestRelative,
          perSecond);
    }

    public Options withRecovery(Recovery kind) {
      return new Options(
          shortest90Seconds,
          longest90Seconds,
          kind,
          t1Seconds,
          t1Uncertainty,
          spread,
          largestRelative,
          decayRate);
    }

    public Options withSpread(Spread shape) {
      return new Options(
          shortest90Seconds,
          longest90Seconds,
          recovery,
          t1Seconds,
          t1Uncertainty,
          shape,
          largestRelative,
          decayRate);
    }
  }

  /**
   * Fits a curve.
   *
   * @param points in the order played
   * @throws NotDetermined when there is no signal, too few points, a rival answer, or an
   *     uncertainty above the limit
   */
  public static NutationResult fit(List<NutationPoint> points, Options options)
      throws NotDetermined {
    screen(points);
    List<NutationMinimum> minima =
        NutationMinimum.search(
            points, options, options.spread() == null ? Spread.GAUSSIAN : options.spread());
    NutationMinimum best = minima.get(0);
    if (options.spread() == null && best.dampingSignificance() > 2) {
      NutationMinimum other = best.reshaped(points, options, Spread.EXPONENTIAL);
      if (other.chiSquare() < best.chiSquare() - 2
          && Math.abs(other.rate() / best.rate() - 1) < 0.05) {
        best = other;
      }
    }
    return answer(points, options, best, minima);
  }

  private static void screen(List<NutationPoint> points) throws NotDetermined {
    int counted = 0;
    double shortest = Double.POSITIVE_INFINITY;
    double longest = 0;
    for (NutationPoint p : points) {
      if (!p.usable()) {
        throw NotDetermined.of(
            Reason.BAD_INPUT,
            "a nutation point is not usable: " + p,
            "give finite amplitudes, uncertainties above 0 and pulse widths above 0 s");
      }
      if (p.counted()) {
        counted++;
        shortest = Math.min(shortest, p.pulseSeconds());
        longest = Math.max(longest, p.pulseSeconds());
      }
    }
    if (counted < 3 || longest < 1.2 * shortest) {
      throw NotDetermined.of(
          Reason.TOO_FEW_POINTS,
          counted
              + " nutation points, the longest pulse "
              + (counted == 0 ? 0 : longest / shortest)
              + " times the shortest, do not show a rotation",
          "measure at least 3 different pulse widths");
    }
  }

  private static NutationResult answer(
      List<NutationPoint> points,
      Options options,
      NutationMinimum best,
      List<NutationMinimum> minima)
      throws NotDetermined {
    double significance = best.amplitude() / best.uAmplitudeGiven();
    if (significance < 5) {
      throw NotDetermined.of(
          Reason.NO_SIGNAL,
          String.format(
              Locale.ROOT,
              "no signal follows the pulse width: %.1f sigma in all points together",
              significance),
          "check the resonance and that the pulse reaches the coil, or take more scans");
    }
    double rivalRate = Double.NaN;
    double excess = Double.POSITIVE_INFINITY;
    for (NutationMinimum m : minima) {
      if (Math.abs(m.rate() - best.rate()) > 5 * Math.max(m.uRate(), best.uRate())) {
        double e = m.chiSquare() - best.chiSquare();
        if (e < excess) {
          excess = e;
          rivalRate = m.rate();
        }
      }
    }
    if (excess < 4) {
      throw NotDetermined.of(
          Reason.AMBIGUOUS,
          String.format(
              Locale.ROOT,
              "two 90-degree pulses fit the points: %.4g s and %.4g s",
              1 / (4 * best.rate()),
              1 / (4 * rivalRate)),
          "measure more pulse widths between those taken");
    }
    List<String> warnings = new ArrayList<>();
    double inflate = 1;
    double reduced = best.chiSquare() / Math.max(1, best.degreesOfFreedom());
    if (best.degreesOfFreedom() > 0 && improbable(reduced, best.degreesOfFreedom())) {
      inflate = Math.sqrt(reduced);
      warnings.add(
          String.format(
              Locale.ROOT,
              "the points scatter %.1f times more than their uncertainties: widened accordingly",
              inflate));
    }
    double relative = Math.hypot(inflate * best.uRate() / best.rate(), MODEL_LIMIT);
    if (!(relative <= options.largestRelative())) {
      double longest = points.stream().mapToDouble(NutationPoint::pulseSeconds).max().orElse(0);
      boolean tooShort = longest < 1.5 / (4 * best.rate());
      double factor = relative / options.largestRelative();
      double scans = Math.ceil(points.size() * factor * factor);
      throw new NotDetermined(
          tooShort ? Reason.TOO_SHORT : Reason.TOO_NOISY,
          String.format(
              Locale.ROOT,
              "the 90-degree pulse is not determined: its uncertainty is %.0f %%, the limit %.0f %%",
              100 * relative,
              100 * options.largestRelative()),
          tooShort
              ? "measure longer pulses, through the first maximum and the null"
              : "measure more scans near the null",
          tooShort || !(scans < 1e9) ? OptionalLong.empty() : OptionalLong.of((long) scans));
    }
    double t90 = 1 / (4 * best.rate());
    return new NutationResult(
        Measured.of(t90, relative * t90, Unit.SECOND),
        Measured.of(2 * t90, 2 * relative * t90, Unit.SECOND),
        Measured.of(best.rate(), relative * best.rate(), Unit.HERTZ),
        spread(best, inflate),
        best.spread(),
        Measured.of(best.amplitude(), inflate * best.uAmplitude(), Unit.VOLT),
        Measured.of(best.phase(), inflate * best.uAmplitude() / best.amplitude(), Unit.RADIAN),
        reduced,
        best.degreesOfFreedom(),
        rivalRate,
        excess,
        warnings);
  }

  /**
   * Below two standard deviations the spread is given as an upper bound's centre: its size only.
   */
  private static Measured spread(NutationMinimum best, double inflate) {
    double p = Math.max(0, best.damping());
    double u = inflate * best.uDamping();
    if (best.spread() == Spread.EXPONENTIAL) {
      return Measured.of(p * 2 / Math.PI, u * 2 / Math.PI, Unit.ONE);
    }
    double s = Math.sqrt(p);
    // u(s) = u(s^2)/(2 s) where that is small; near zero sqrt(u) is what s can hide in.
    return Measured.of(s, Math.min(u / (2 * Math.max(s, 1e-12)), Math.sqrt(u)), Unit.ONE);
  }

  /** Whether chi-square per degree of freedom lies above its 99.9 % point (Wilson, Hilferty). */
  static boolean improbable(double reduced, int degrees) {
    double v = 2.0 / (9 * degrees);
    return Math.cbrt(reduced) > 1 - v + 3.09 * Math.sqrt(v);
  }
}
