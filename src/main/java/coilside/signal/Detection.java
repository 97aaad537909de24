package coilside.signal;

import java.util.List;

/**
 * The answer to "is there a resonance in this FID": the largest matched-filter output in units of
 * its own noise, held against a threshold that states its false-alarm probability.
 *
 * <p>Exponential windows of several lengths, each a factor two apart from the record down to eight
 * samples, stand for the unknown T2*; a mismatch of a factor 1.4 costs 1.5 % of SNR. Under noise
 * alone |X|/sigma_X of one bin is Rayleigh distributed; the threshold allows for every bin of every
 * window and for the number of records searched.
 *
 * @param found whether the statistic passes the threshold
 * @param statisticSigma largest |X|/sigma_X outside the excluded ranges
 * @param thresholdSigma what noise exceeds with the stated probability in the whole search
 * @param falseAlarmProbability that probability
 * @param offsetHertz where it stands, Hz from the carrier
 * @param offsetUncertaintyHertz rough standard uncertainty, Hz
 * @param roughAmplitudeVolts rough amplitude at the first sample, V
 * @param roughT2StarSeconds decay time of the best window, s
 */
public record Detection(
    boolean found,
    double statisticSigma,
    double thresholdSigma,
    double falseAlarmProbability,
    double offsetHertz,
    double offsetUncertaintyHertz,
    double roughAmplitudeVolts,
    double roughT2StarSeconds) {
  private static final int SHORTEST_SAMPLES = 8;

  /** A range of offsets left out of a search: an interference line, the DC offset. */
  public record Excluded(double offsetHertz, double halfWidthHertz) {}

  /**
   * Searches one (averaged) FID.
   *
   * @param sigma noise of one real channel, one sample, of this FID, V (for an average of n scans
   *     that of one scan over sqrt(n))
   * @param excluded offsets that are known to be something else
   * @param searches in how many records the same question is asked (carriers of a search)
   * @param falseAlarmProbability for the whole search, e.g. 1e-3
   */
  public static Detection of(
      Fid fid, double sigma, List<Excluded> excluded, int searches, double falseAlarmProbability) {
    if (!(sigma > 0) || !Double.isFinite(sigma)) {
      throw new IllegalArgumentException("noise of " + sigma + " V must be above 0 V");
    }
    int n = fid.points();
    int points = 2 * Fourier.powerOfTwoAtLeast(n);
    double step = 1 / (points * fid.dwellSeconds());
    boolean[] out = excludedBins(excluded, points, step);
    double[] z = new double[2 * points];
    double best = -1;
    int bestBin = 0;
    double bestSamples = n;
    double bestSquares = 1;
    int windows = 0;
    for (double decay = n; decay >= Math.min(n, SHORTEST_SAMPLES); decay /= 2) {
      windows++;
      double q = Math.exp(-1 / decay);
      double w = 1;
      double squares = 0;
      java.util.Arrays.fill(z, 0);
      for (int k = 0; k < n; k++) {
        z[2 * k] = w * fid.re(k);
        z[2 * k + 1] = w * fid.im(k);
        squares += w * w;
        w *= q;
      }
      Fourier.transform(z, points);
      double top = -1;
      int at = 0;
      for (int k = 0; k < points; k++) {
        double p = z[2 * k] * z[2 * k] + z[2 * k + 1] * z[2 * k + 1];
        if (p > top && !out[k]) {
          top = p;
          at = k;
        }
      }
      double statistic = Math.sqrt(Math.max(0, top) / squares) / sigma;
      if (Double.isNaN(statistic) || Double.isInfinite(statistic)) {
        throw new IllegalArgumentException("the FID holds samples that are not finite numbers");
      }
      if (statistic > best) {
        best = statistic;
        bestBin = at;
        bestSamples = decay;
        bestSquares = squares;
      }
    }
    double threshold =
        Tail.sigmaThreshold((double) n * windows * Math.max(1, searches), falseAlarmProbability);
    int centred = bestBin < points / 2 ? bestBin : bestBin - points;
    double t2Star = bestSamples * fid.dwellSeconds();
    return new Detection(
        best > threshold,
        best,
        threshold,
        falseAlarmProbability,
        centred * step,
        Math.hypot(step / Math.sqrt(12), 1 / (Math.PI * t2Star * Math.max(1, best))),
        best * sigma / Math.sqrt(bestSquares),
        t2Star);
  }

  /** Searches one FID with nothing excluded, as the only record. */
  public static Detection of(Fid fid, double sigma, double falseAlarmProbability) {
    return of(fid, sigma, List.of(), 1, falseAlarmProbability);
  }

  private static boolean[] excludedBins(List<Excluded> excluded, int points, double step) {
    boolean[] out = new boolean[points];
    for (Excluded e : excluded) {
      long low = Math.round((e.offsetHertz() - e.halfWidthHertz()) / step);
      long high = Math.round((e.offsetHertz() + e.halfWidthHertz()) / step);
      if (high - low >= points) {
        throw new IllegalArgumentException(
            "the excluded range of +-" + e.halfWidthHertz() + " Hz leaves nothing to search");
      }
      for (long k = low; k <= high; k++) {
        out[(int) Math.floorMod(k, (long) points)] = true;
      }
    }
    return out;
  }
}
