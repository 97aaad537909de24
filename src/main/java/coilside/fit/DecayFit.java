package coilside.fit;

import coilside.fit.DecayResult.Envelope;
import coilside.fit.NotDetermined.Reason;
import coilside.quantity.Measured;
import coilside.quantity.Unit;
import coilside.signal.Fid;
import coilside.signal.Tail;
import java.util.List;
import java.util.OptionalLong;

/**
 * T2*, frequency, phase and amplitude of an FID by complex time-domain maximum likelihood.
 *
 * <p>One exponential is fitted by variable projection; its variance is the Cramer-Rao bound for SNR
 * of 5 and more over records of one T2* and more. The residuals are then searched, near the line,
 * for what is not noise (a false alarm once in a thousand fits); only when they hold something are
 * a constant, a second exponential and a Gaussian envelope tried, and the Bayesian information
 * criterion chooses. When none of them leaves noise, T2* is the 1/e time of the averaged envelope.
 *
 * <p>Never from the magnitude, whose noise does not average to zero: see methods with their biases
 * in the contributor's guide.
 */
public final class DecayFit {
  /** Fewest complex samples. */
  public static final int FEWEST_POINTS = 16;

  private static final double FALSE_ALARM = 1e-3;

  private DecayFit() {}

  /** Which forms of decay may be answered. */
  public enum Form {
    /** One exponential, come what may; a misfit is a warning. */
    ONE_EXPONENTIAL,
    /** Whatever the residuals demand. */
    AS_DEMANDED
  }

  /**
   * How to fit.
   *
   * @param form which forms may be answered
   * @param constant whether a DC offset is fitted along (always tried when the residuals demand it)
   * @param largestRelative largest u(T2*)/T2* that counts as determined, usually 0.2
   * @param noiseBandwidthHertz noise bandwidth of the receiver's samples; NaN for 1/dwell
   * @param scans how many scans the FID is the average of, for the advice in a refusal
   */
  public record Options(
      Form form, boolean constant, double largestRelative, double noiseBandwidthHertz, int scans) {
    /** As demanded, no constant, 20 %, white noise, one scan. */
    public static Options usual() {
      return new Options(Form.AS_DEMANDED, false, 0.2, Double.NaN, 1);
    }

    public Options withScans(int count) {
      return new Options(form, constant, largestRelative, noiseBandwidthHertz, count);
    }

    public Options withConstant(boolean fitted) {
      return new Options(form, fitted, largestRelative, noiseBandwidthHertz, scans);
    }

    public Options withForm(Form wanted) {
      return new Options(wanted, constant, largestRelative, noiseBandwidthHertz, scans);
    }

    public Options withNoiseBandwidth(double hertz) {
      return new Options(form, constant, largestRelative, hertz, scans);
    }

    public Options withLargestRelative(double limit) {
      return new Options(form, constant, limit, noiseBandwidthHertz, scans);
    }
  }

  /** With the usual options. */
  public static DecayResult fit(Fid fid) throws NotDetermined {
    return fit(fid, Options.usual());
  }

  /**
   * Fits an FID.
   *
   * @throws NotDetermined when nothing stands out of the noise, T2* is not determined to {@code
   *     largestRelative}, or the samples are not finite
   */
  public static DecayResult fit(Fid fid, Options options) throws NotDetermined {
    int n = fid.points();
    if (n < FEWEST_POINTS) {
      throw NotDetermined.of(
          Reason.TOO_FEW_POINTS,
          n + " points are too few for a decay: at least " + FEWEST_POINTS,
          "take more points");
    }
    double sum = 0;
    double square = 0;
    for (int k = 0; k < n; k++) {
      sum += fid.re(k) + fid.im(k);
      square += fid.re(k) * fid.re(k) + fid.im(k) * fid.im(k);
    }
    if (!Double.isFinite(sum + square)) {
      throw NotDetermined.of(
          Reason.BAD_INPUT, "the FID holds samples that are not finite numbers", "take it again");
    }
    if (square == 0) {
      throw NotDetermined.of(
          Reason.NO_SIGNAL, "all samples are zero", "check that the receiver samples");
    }
    ExponentialStart start = ExponentialStart.of(fid.re(), fid.im());
    Exponentials one =
        new Exponentials(
            fid.re(),
            fid.im(),
            new double[] {start.lambdaRe()},
            new double[] {start.lambdaIm()},
            options.constant());
    if (!one.run()) {
      throw NotDetermined.of(
          Reason.NO_CONVERGENCE, "the fit of one exponential did not settle", "take more scans");
    }
    double[] residualRe = Scratch.residualRe(n);
    double[] residualIm = Scratch.residualIm(n);
    double rss = one.residuals(residualRe, residualIm);
    double sigma = Math.sqrt(rss / (2.0 * n - 2 * (one.terms + one.poles)));
    double statistic =
        Math.hypot(one.cRe[0], one.cIm[0])
            * Math.sqrt(Math.expm1(2 * n * one.lambdaRe[0]) / Math.expm1(2 * one.lambdaRe[0]))
            / sigma;
    // The fit also moves frequency and decay to the noise's liking: worth six times the bins.
    double needed = Tail.sigmaThreshold(6 * start.trials(), FALSE_ALARM);
    if (statistic < needed) {
      throw new NotDetermined(
          Reason.NO_SIGNAL,
          String.format(
              java.util.Locale.ROOT,
              "nothing stands out of the noise: largest %.1f sigma, threshold %.1f sigma",
              statistic,
              needed),
          "look for the resonance, or take more scans",
          OptionalLong.empty());
    }
    // Rounding leaves residuals of its own, which are not noise either.
    double floor = 1e-9 * Math.hypot(one.cRe[0], one.cIm[0]);
    Misfit misfit =
        Misfit.of(
            residualRe, residualIm, n, Math.max(sigma, floor), one.lambdaRe[0], one.lambdaIm[0]);
    DecayAnswer answer = new DecayAnswer(fid, options);
    DecayResult result;
    if (misfit.passes() || options.form() == Form.ONE_EXPONENTIAL) {
      result =
          answer.of(
              one,
              rss,
              misfit,
              misfit.passes()
                  ? "one exponential: its residuals are noise"
                  : "one exponential as asked for; its residuals are not noise",
              misfit.passes()
                  ? List.of()
                  : List.of(
                      String.format(
                          java.util.Locale.ROOT,
                          "the decay is not one exponential: residuals reach %.1f sigma, noise %.1f",
                          misfit.statistic(),
                          misfit.threshold())));
    } else {
      result = DecayForms.choose(answer, fid, one, rss, misfit);
    }
    return checked(result, fid, options);
  }

  private static DecayResult checked(DecayResult result, Fid fid, Options options)
      throws NotDetermined {
    Measured t2 = result.t2Star();
    double relative = t2.relative();
    if (relative <= options.largestRelative()) {
      return result;
    }
    double record = fid.points() * fid.dwellSeconds();
    if (record < 0.5 * t2.value()) {
      throw new NotDetermined(
          Reason.TOO_SHORT,
          String.format(
              java.util.Locale.ROOT,
              "T2* is not determined: the record of %.4g s is too short for a decay of about %.3g s"
                  + " (uncertainty %.0f %%)",
              record,
              t2.value(),
              100 * relative),
          String.format(
              java.util.Locale.ROOT,
              "record for at least %.3g s",
              2 * Math.max(t2.value(), record)),
          scans(relative, options));
    }
    OptionalLong scans = scans(relative, options);
    throw new NotDetermined(
        Reason.TOO_NOISY,
        String.format(
            java.util.Locale.ROOT,
            "T2* is not determined: its uncertainty is %.0f %%, the limit %.0f %%",
            100 * relative,
            100 * options.largestRelative()),
        scans.isPresent() ? "average about " + scans.getAsLong() + " scans" : "average more scans",
        scans);
  }

  private static OptionalLong scans(double relative, Options options) {
    double factor = relative / options.largestRelative();
    double scans = Math.ceil(options.scans() * factor * factor);
    return scans < 1e9 ? OptionalLong.of((long) scans) : OptionalLong.empty();
  }

  /** u of a standard deviation estimated from n complex samples: sigma/(2 sqrt n). */
  static Measured sigma(double sigma, int n) {
    return Measured.of(sigma, sigma / (2 * Math.sqrt(n)), Unit.VOLT);
  }

  static Envelope envelope(Exponentials fit) {
    return fit.poles == 1 ? Envelope.EXPONENTIAL : Envelope.TWO_EXPONENTIALS;
  }
}
