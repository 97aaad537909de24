package coilside.fit;

import coilside.fit.NotDetermined.Reason;
import coilside.quantity.Measured;
import coilside.quantity.Unit;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Locale;
import java.util.OptionalDouble;
import java.util.OptionalLong;

/**
 * T2 from the complex amplitudes of an echo train (or of single echoes at several times).
 *
 * <p>S = C exp(-t/T2) (1 + alternation (-1)^n), C complex: the noise averages to zero along C, so
 * that late echoes do not bend the decay. The alternation is what imperfect refocusing pulses do
 * between odd and even echoes; where it is significant it is reported, and the answer rests on the
 * fit that allows for it.
 */
public final class EchoTrainFit {
  private EchoTrainFit() {}

  /**
   * The echoes.
   *
   * @param seconds time of each echo's top after the first pulse, s, rising
   * @param re real parts of their amplitudes, V
   * @param im imaginary parts, V
   * @param u standard uncertainty of each part, V
   */
  public record Echoes(double[] seconds, double[] re, double[] im, double[] u) {
    public Echoes {
      if (seconds.length != re.length || re.length != im.length || im.length != u.length) {
        throw new IllegalArgumentException(
            "echo times, parts and uncertainties have "
                + seconds.length
                + ", "
                + re.length
                + ", "
                + im.length
                + " and "
                + u.length
                + " entries");
      }
    }

    /** All echoes with the same uncertainty. */
    public static Echoes of(double[] seconds, double[] re, double[] im, double u) {
      double[] all = new double[seconds.length];
      Arrays.fill(all, u);
      return new Echoes(seconds, re, im, all);
    }
  }

  /**
   * The answer.
   *
   * @param t2 for one exponential its time constant; for two the time to 1/e, s
   * @param amplitude at the first pulse, V
   * @param phaseRadians of all echoes, rad
   * @param alternation relative difference of odd and even echoes from their common decay, 1; its
   *     sign is that of the first echo
   * @param secondT2 the second component's T2 where the echoes demand one, s
   * @param firstT2 the largest component's T2, s
   * @param secondFraction the second component's part of the amplitude, 0..1
   * @param reducedChiSquare squared residuals over uncertainties, by degree of freedom
   * @param degreesOfFreedom of that
   * @param warnings one sentence each
   */
  public record Result(
      Measured t2,
      Measured amplitude,
      Measured phaseRadians,
      Measured alternation,
      OptionalDouble secondT2,
      double firstT2,
      double secondFraction,
      double reducedChiSquare,
      int degreesOfFreedom,
      List<String> warnings) {
    public Result {
      warnings = List.copyOf(warnings);
    }

    /** The fitted decay along the common phase, without the alternation, V. */
    public double[] curve(double[] seconds) {
      double[] y = new double[seconds.length];
      for (int i = 0; i < y.length; i++) {
        y[i] = (1 - secondFraction) * Math.exp(-seconds[i] / firstT2);
        if (secondT2.isPresent()) {
          y[i] += secondFraction * Math.exp(-seconds[i] / secondT2.getAsDouble());
        }
        y[i] *= amplitude.value();
      }
      return y;
    }
  }

  /** Fits with 20 % as the largest relative uncertainty that counts as determined. */
  public static Result fit(Echoes echoes) throws NotDetermined {
    return fit(echoes, 0.2);
  }

  /**
   * Fits an echo decay.
   *
   * @throws NotDetermined when there is no signal, there are too few echoes, the train is too short
   *     or the uncertainty above the limit
   */
  public static Result fit(Echoes e, double largestRelative) throws NotDetermined {
    int m = e.seconds().length;
    if (m < 4) {
      throw NotDetermined.of(
          Reason.TOO_FEW_POINTS, m + " echoes are too few", "take at least 4 echoes");
    }
    double shortest = Double.POSITIVE_INFINITY;
    for (int i = 0; i < m; i++) {
      if (!(e.u()[i] > 0) || !Double.isFinite(e.re()[i] + e.im()[i] + e.seconds()[i] + e.u()[i])) {
        throw NotDetermined.of(
            Reason.BAD_INPUT, "echo " + (i + 1) + " is not a finite number", "take it again");
      }
      if (i > 0) {
        shortest = Math.min(shortest, e.seconds()[i] - e.seconds()[i - 1]);
      }
    }
    if (!(shortest > 0)) {
      throw NotDetermined.of(Reason.BAD_INPUT, "the echo times do not rise", "sort the echoes");
    }
    double[] y = new double[2 * m];
    double[] u = new double[2 * m];
    for (int i = 0; i < m; i++) {
      y[2 * i] = e.re()[i];
      y[2 * i + 1] = e.im()[i];
      u[2 * i] = e.u()[i];
      u[2 * i + 1] = e.u()[i];
    }
    double[] start = start(e, shortest);
    LeastSquares.Solution s = LeastSquares.solve(single(e), y, u, start);
    double[] p = s.parameters();
    double size = Math.hypot(p[0], p[1]);
    double uSize = Math.max(s.u(0), s.u(1));
    if (size / amplitudeAlone(e, Math.exp(p[2])) < 6) {
      throw NotDetermined.of(
          Reason.NO_SIGNAL,
          "no echo decay stands out of the noise",
          "check the pulses, or take more scans");
    }
    return answer(e, y, u, s, size, uSize, largestRelative);
  }

  private static Result answer(
      Echoes e,
      double[] y,
      double[] u,
      LeastSquares.Solution s,
      double size,
      double uSize,
      double largestRelative)
      throws NotDetermined {
    int m = e.seconds().length;
    double[] p = s.parameters();
    double t2 = Math.exp(p[2]);
    double relative = s.u(2);
    double longest = e.seconds()[m - 1];
    List<String> warnings = new ArrayList<>();
    double reduced = s.reducedChiSquare();
    double firstT2 = t2;
    OptionalDouble second = OptionalDouble.empty();
    double fraction = 0;
    if (NutationFit.improbable(reduced, s.degreesOfFreedom())) {
      EchoComponents two = EchoComponents.fit(e, y, u, p);
      if (two != null
          && two.uOneOverE() < largestRelative * two.oneOverE()
          && s.weightedSquares() - two.chiSquare() > 2 * Math.log(2.0 * m) + 10) {
        t2 = two.oneOverE();
        // Echo amplitudes weigh the components by their lines, too: some percent of the distance.
        double weights = 0.01 * Math.abs(two.firstT2() - two.secondT2());
        relative = Math.hypot(two.uOneOverE(), weights) / t2;
        firstT2 = two.firstT2();
        second = OptionalDouble.of(two.secondT2());
        fraction = two.secondFraction();
        size = two.amplitude();
        uSize = two.uAmplitude();
        reduced = two.chiSquare() / (2 * m - 6);
        warnings.add(
            String.format(
                Locale.ROOT,
                "the echoes hold two decays, %.4g s and %.4g s: T2 is the time to 1/e (chi-square"
                    + " lower by %.0f)",
                firstT2,
                two.secondT2(),
                s.weightedSquares() - two.chiSquare()));
      }
      if (NutationFit.improbable(reduced, s.degreesOfFreedom())) {
        double inflate = Math.sqrt(reduced);
        relative *= inflate;
        uSize *= inflate;
        warnings.add(
            String.format(
                Locale.ROOT,
                "the echoes scatter %.1f times more than their uncertainties: widened accordingly",
                inflate));
      }
    }
    double alternation = p[3];
    if (Math.abs(alternation) > 3 * s.u(3)) {
      warnings.add(
          String.format(
              Locale.ROOT,
              "odd and even echoes differ by %.1f %%: the refocusing pulses are not 180 degrees",
              200 * Math.abs(alternation)));
    }
    if (!(relative <= largestRelative)) {
      boolean tooShort = longest < t2;
      throw new NotDetermined(
          tooShort ? Reason.TOO_SHORT : Reason.TOO_NOISY,
          String.format(
              Locale.ROOT,
              "T2 is not determined: its uncertainty is %.0f %%, the limit %.0f %%",
              100 * relative,
              100 * largestRelative),
          tooShort ? "take more echoes or space them wider" : "take more scans",
          tooShort ? OptionalLong.empty() : scans(relative / largestRelative));
    }
    return new Result(
        Measured.of(t2, relative * t2, Unit.SECOND),
        Measured.of(size, uSize, Unit.VOLT),
        Measured.of(Math.atan2(p[1], p[0]), uSize / size, Unit.RADIAN),
        Measured.of(alternation, s.u(3), Unit.ONE),
        second,
        firstT2,
        fraction,
        reduced,
        s.degreesOfFreedom(),
        warnings);
  }

  private static OptionalLong scans(double factor) {
    double n = Math.ceil(factor * factor);
    return n < 1e9 ? OptionalLong.of((long) n) : OptionalLong.empty();
  }

  private static LeastSquares.Model single(Echoes e) {
    return (p, values, jacobian) -> {
      double t2 = Math.exp(p[2]);
      for (int i = 0; i < e.seconds().length; i++) {
        double x = e.seconds()[i] / t2;
        double d = Math.exp(-x);
        double odd = i % 2 == 0 ? 1 : -1;
        double f = d * (1 + odd * p[3]);
        values[2 * i] = p[0] * f;
        values[2 * i + 1] = p[1] * f;
        jacobian[2 * i] = new double[] {f, 0, p[0] * f * x, p[0] * d * odd};
        jacobian[2 * i + 1] = new double[] {0, f, p[1] * f * x, p[1] * d * odd};
      }
    };
  }

  /** Grid over T2 with the complex amplitude solved at each. */
  private static double[] start(Echoes e, double shortest) {
    double longest = e.seconds()[e.seconds().length - 1];
    double[] best = {0, 0, 0, 0};
    double most = -1;
    for (double t2 = shortest / 2; t2 < 20 * longest; t2 *= 1.1) {
      double n = 0;
      double r = 0;
      double i = 0;
      for (int k = 0; k < e.seconds().length; k++) {
        double w = 1 / (e.u()[k] * e.u()[k]);
        double d = Math.exp(-e.seconds()[k] / t2);
        n += w * d * d;
        r += w * d * e.re()[k];
        i += w * d * e.im()[k];
      }
      double gain = (r * r + i * i) / n;
      if (gain > most) {
        most = gain;
        best = new double[] {r / n, i / n, Math.log(t2), 0};
      }
    }
    return best;
  }

  private static double amplitudeAlone(Echoes e, double t2) {
    double n = 0;
    for (int k = 0; k < e.seconds().length; k++) {
      n += Math.pow(Math.exp(-e.seconds()[k] / t2) / e.u()[k], 2);
    }
    return 1 / Math.sqrt(n);
  }
}
