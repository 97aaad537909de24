package coilside.fit;

import coilside.fit.DecayResult.Component;
import coilside.fit.DecayResult.Envelope;
import coilside.quantity.Measured;
import coilside.quantity.Unit;
import coilside.signal.Fid;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Optional;

/**
 * The forms of decay that are tried once one exponential has failed: with a constant, two
 * exponentials, an exponential with a Gaussian. The least Bayesian information criterion wins; when
 * its residuals still are not noise, the averaged envelope answers.
 */
final class DecayForms {
  private static final double CLEARLY = 1.5;

  private DecayForms() {}

  private record Tried(DecayResult result, double criterion, String name) {}

  /** Two lines overlap when they stand no farther apart than their half widths together. */
  static boolean overlap(List<Component> c) {
    double apart = Math.abs(c.get(0).offsetHertz().value() - c.get(1).offsetHertz().value());
    double widths =
        1 / (Math.PI * c.get(0).t2Star().value()) + 1 / (Math.PI * c.get(1).t2Star().value());
    return apart < widths / 2;
  }

  static DecayResult choose(
      DecayAnswer answer, Fid fid, Exponentials one, double rss, Misfit misfit) {
    List<Tried> tried = new ArrayList<>();
    tried.add(
        new Tried(
            answer.of(one, rss, misfit, "", List.of()),
            criterion(rss, fid.points(), 2 * (one.terms + one.poles)),
            one.terms > 1 ? "one exponential and a constant" : "one exponential"));
    double[] oneRe = {one.lambdaRe[0]};
    double[] oneIm = {one.lambdaIm[0]};
    double[] twoRe = {one.lambdaRe[0], otherRate(one.lambdaRe[0], misfit)};
    double[] twoIm = {one.lambdaIm[0], misfit.lambdaIm()};
    exponentials(answer, fid, oneRe, oneIm, true, "one exponential and a constant", tried);
    exponentials(answer, fid, twoRe, twoIm, false, "two exponentials", tried);
    exponentials(answer, fid, twoRe, twoIm, true, "two exponentials and a constant", tried);
    GaussianDecay.fit(fid, answer, one.lambdaRe[0], one.lambdaIm[0])
        .ifPresent(
            g ->
                tried.add(
                    new Tried(
                        g.result(),
                        criterion(g.residualSquares(), fid.points(), 5),
                        "an exponential with a Gaussian")));
    Tried best = tried.get(0);
    for (Tried t : tried) {
      if (t.criterion() < best.criterion()) {
        best = t;
      }
    }
    double gain = tried.get(0).criterion() - best.criterion();
    String why =
        String.format(
            Locale.ROOT,
            "%s: residuals of one exponential reach %.1f sigma (noise %.1f); information criterion"
                + " lower by %.1f",
            best.name(),
            misfit.statistic(),
            misfit.threshold(),
            gain);
    DecayResult r = best.result();
    // Near the threshold it may be the one false alarm in a thousand: a form with a warning is
    // better.
    if (r.misfitSigma() > CLEARLY * r.misfitThresholdSigma()) {
      Optional<DecayResult> free = FreeEnvelope.of(fid, r, why);
      if (free.isPresent()) {
        return free.get();
      }
    }
    List<String> warnings = new ArrayList<>(r.warnings());
    if (r.envelope() != Envelope.EXPONENTIAL) {
      warnings.add(
          "the decay is not one exponential but "
              + best.name()
              + ": T2* is the time to 1/e, see the residuals");
    } else if (r.dcRe() != 0 || r.dcIm() != 0) {
      warnings.add("a DC offset was fitted along");
    }
    if (r.misfitSigma() > r.misfitThresholdSigma()) {
      warnings.add(
          String.format(
              Locale.ROOT, "the residuals are still not noise: %.1f sigma", r.misfitSigma()));
    }
    return with(r, r.envelope(), r.t2Star(), why, warnings);
  }

  private static double otherRate(double lambda, Misfit misfit) {
    double ratio = misfit.lambdaRe() / lambda;
    return ratio > 0.6 && ratio < 1.6 ? lambda * 3 : misfit.lambdaRe();
  }

  private static void exponentials(
      DecayAnswer answer,
      Fid fid,
      double[] re,
      double[] im,
      boolean constant,
      String name,
      List<Tried> tried) {
    Exponentials fit = new Exponentials(fid.re(), fid.im(), re, im, constant);
    if (!fit.run() || !fit.converged || !determined(fit)) {
      return;
    }
    double[] r = Scratch.residualRe(fid.points());
    double[] i = Scratch.residualIm(fid.points());
    double rss = fit.residuals(r, i);
    double sigma = Math.sqrt(rss / (2.0 * fid.points() - 2 * (fit.terms + fit.poles)));
    Misfit misfit = Misfit.of(r, i, fid.points(), sigma, fit.lambdaRe[0], fit.lambdaIm[0]);
    tried.add(
        new Tried(
            answer.of(fit, rss, misfit, "", List.of()),
            criterion(rss, fid.points(), 2 * (fit.terms + fit.poles)),
            name));
  }

  /** Whether the normal matrix could be inverted: two of its terms may be as good as one. */
  private static boolean determined(Exponentials fit) {
    for (int k = 0; k < fit.terms + fit.poles; k++) {
      double variance = fit.inverseRe[k][k];
      if (!(variance > 0 && Double.isFinite(variance))) {
        return false;
      }
    }
    return true;
  }

  /** -2 ln(likelihood) + parameters ln(values), up to a constant. */
  private static double criterion(double rss, int points, int parameters) {
    return 2.0 * points * Math.log(rss) + parameters * Math.log(2.0 * points);
  }

  static DecayResult with(
      DecayResult r, Envelope envelope, Measured t2, String criterion, List<String> warnings) {
    double[][] covariance = r.covariance();
    covariance[3][3] = t2.u() * t2.u();
    return new DecayResult(
        envelope,
        t2,
        r.offsetHertz(),
        r.phaseRadians(),
        r.amplitude(),
        r.linewidthHertz(),
        r.snr(),
        r.noiseSigma(),
        r.components(),
        r.dcRe(),
        r.dcIm(),
        covariance,
        r.misfitSigma(),
        r.misfitThresholdSigma(),
        criterion,
        warnings);
  }

  static Measured seconds(double value, double u) {
    return Measured.of(value, u, Unit.SECOND);
  }
}
