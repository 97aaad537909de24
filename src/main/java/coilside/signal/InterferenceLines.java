package coilside.signal;

import coilside.quantity.Measured;
import coilside.quantity.Unit;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.Comparator;
import java.util.List;

/**
 * Narrow lines in records taken with the transmitter off: what stands above the noise by more than
 * a stated false-alarm probability allows.
 *
 * <p>The power spectra of all records, weighted with a window of low side lobes, are averaged; a
 * bin is part of a line when its mean exceeds the threshold for the number of bins searched.
 */
public final class InterferenceLines {
  /** Bins on each side of a peak that belong to it (the window's main lobe, twice oversampled). */
  private static final int LOBE = 9;

  private InterferenceLines() {}

  /**
   * One line.
   *
   * @param offsetHertz offset from the carrier, Hz
   * @param amplitude of the complex exponential, V
   * @param powerOverNoise its peak bin's power over the noise's
   */
  public record Line(Measured offsetHertz, Measured amplitude, double powerOverNoise) {
    /** Whether an offset lies within the width of this line, or within {@code margin} of it. */
    public boolean covers(double hertz, double margin) {
      return Math.abs(hertz - offsetHertz.value()) <= margin;
    }
  }

  /** The lines in one record, by falling amplitude. */
  public static List<Line> find(Fid record, double falseAlarmProbability) {
    return find(List.of(record), falseAlarmProbability);
  }

  /**
   * The lines in several records of the same kind, by falling amplitude; the DC offset is not among
   * them.
   */
  public static List<Line> find(List<Fid> records, double falseAlarmProbability) {
    Search search = new Search(records, falseAlarmProbability);
    List<Line> lines = new ArrayList<>(search.lines);
    lines.sort(Comparator.comparingDouble((Line l) -> -l.amplitude().value()));
    return lines;
  }

  /**
   * A record without these lines: each is located anew within a bin and a half, its complex
   * amplitude found with the same window, and taken off. Only lines that stand well away from the
   * resonance should be named: what lies at their frequency goes with them.
   */
  public static Fid removed(Fid fid, List<Line> lines) {
    int n = fid.points();
    double[] re = fid.re().clone();
    double[] im = fid.im().clone();
    double[] window = Windows.lowSideLobes(n);
    double bin = 1 / (n * fid.dwellSeconds());
    for (Line line : lines) {
      double centre = line.offsetHertz().value();
      double low = centre - 1.5 * bin;
      double high = centre + 1.5 * bin;
      for (int i = 0; i < 24; i++) {
        double left = low + (high - low) / 3;
        double right = high - (high - low) / 3;
        double[] a = amplitude(re, im, window, left * fid.dwellSeconds());
        double[] b = amplitude(re, im, window, right * fid.dwellSeconds());
        if (Math.hypot(a[0], a[1]) > Math.hypot(b[0], b[1])) {
          high = right;
        } else {
          low = left;
        }
      }
      double cycles = (low + high) / 2 * fid.dwellSeconds();
      double[] c = amplitude(re, im, window, cycles);
      for (int k = 0; k < n; k++) {
        double angle = 2 * Math.PI * cycles * k;
        double cos = Math.cos(angle);
        double sin = Math.sin(angle);
        re[k] -= c[0] * cos - c[1] * sin;
        im[k] -= c[0] * sin + c[1] * cos;
      }
    }
    return new Fid(re, im, fid.dwellSeconds(), fid.startSeconds(), fid.carrierHertz());
  }

  private static double[] amplitude(double[] re, double[] im, double[] window, double cycles) {
    double r = 0;
    double i = 0;
    double sum = 0;
    double stepRe = Math.cos(2 * Math.PI * cycles);
    double stepIm = -Math.sin(2 * Math.PI * cycles);
    double wr = 1;
    double wi = 0;
    for (int k = 0; k < re.length; k++) {
      if (k % 512 == 0) {
        double angle = -2 * Math.PI * cycles * k;
        wr = Math.cos(angle);
        wi = Math.sin(angle);
      }
      r += window[k] * (re[k] * wr - im[k] * wi);
      i += window[k] * (re[k] * wi + im[k] * wr);
      sum += window[k];
      double s = wr * stepRe - wi * stepIm;
      wi = wr * stepIm + wi * stepRe;
      wr = s;
    }
    return new double[] {r / sum, i / sum};
  }

  /** One search: kept for {@link NoiseEstimate}, which needs the bins that are free of lines. */
  static final class Search {
    final List<Line> lines = new ArrayList<>();
    final double[] window;
    final double sumOfSquares;
    final double sumOfWeights;
    final double noisePower;
    final int freeBins;
    final int totalBins;

    Search(List<Fid> records, double falseAlarmProbability) {
      Fid one = records.get(0);
      int n = one.points();
      int points = 2 * Fourier.powerOfTwoAtLeast(n);
      window = Windows.lowSideLobes(n);
      sumOfSquares = Arrays.stream(window).map(w -> w * w).sum();
      sumOfWeights = Arrays.stream(window).sum();
      double[] power = new double[points];
      double[] z = new double[2 * points];
      for (Fid fid : records) {
        if (fid.points() != n || fid.dwellSeconds() != one.dwellSeconds()) {
          throw new IllegalArgumentException("records of different length or dwell time");
        }
        double meanRe = 0;
        double meanIm = 0;
        for (int k = 0; k < n; k++) {
          meanRe += window[k] * fid.re(k);
          meanIm += window[k] * fid.im(k);
        }
        meanRe /= sumOfWeights;
        meanIm /= sumOfWeights;
        Arrays.fill(z, 0);
        for (int k = 0; k < n; k++) {
          z[2 * k] = window[k] * (fid.re(k) - meanRe);
          z[2 * k + 1] = window[k] * (fid.im(k) - meanIm);
        }
        Fourier.transform(z, points);
        for (int k = 0; k < points; k++) {
          power[k] += (z[2 * k] * z[2 * k] + z[2 * k + 1] * z[2 * k + 1]) / records.size();
        }
      }
      int m = records.size();
      double limit =
          Tail.thresholdOfMean(m, falseAlarmProbability / Math.max(1, Math.min(points, 2 * n)));
      boolean[] taken = new boolean[points];
      double mean = medianMean(power, m);
      for (int pass = 0; pass < 4; pass++) {
        Arrays.fill(taken, false);
        for (int k = -LOBE; k <= LOBE; k++) {
          taken[k & (points - 1)] = true;
        }
        for (int k = 0; k < points; k++) {
          if (power[k] > limit * mean) {
            for (int j = -LOBE; j <= LOBE; j++) {
              taken[(k + j) & (points - 1)] = true;
            }
          }
        }
        double sum = 0;
        int count = 0;
        for (int k = 0; k < points; k++) {
          if (!taken[k]) {
            sum += power[k];
            count++;
          }
        }
        if (count < points / 20) {
          break;
        }
        mean = sum / count;
      }
      int free = 0;
      for (int k = 0; k < points; k++) {
        if (!taken[k]) {
          free++;
        }
      }
      noisePower = mean;
      freeBins = free;
      totalBins = points;
      collect(power, limit * mean, mean, one, m);
    }

    private void collect(double[] power, double limit, double mean, Fid one, int m) {
      int points = power.length;
      double step = 1 / (points * one.dwellSeconds());
      double sigma = Math.sqrt(mean / (2 * sumOfSquares));
      for (int k = 0; k < points; k++) {
        int centred = k < points / 2 ? k : k - points;
        if (Math.abs(centred) <= LOBE || power[k] <= limit || !highest(power, k)) {
          continue;
        }
        double a = Math.log(power[(k - 1) & (points - 1)]);
        double b = Math.log(power[k]);
        double c = Math.log(power[(k + 1) & (points - 1)]);
        double curve = a - 2 * b + c;
        double shift = curve < 0 ? Math.max(-0.5, Math.min(0.5, 0.5 * (a - c) / curve)) : 0;
        double peak = Math.exp(b - 0.25 * (a - c) * shift);
        double amplitude = Math.sqrt(Math.max(0, peak - mean)) / sumOfWeights;
        double u = sigma * Math.sqrt(sumOfSquares / m) / sumOfWeights;
        double uOffset =
            u / amplitude * Math.sqrt(6) / (Math.PI * one.points() * one.dwellSeconds()) * 2;
        lines.add(
            new Line(
                Measured.of((centred + shift) * step, uOffset, Unit.HERTZ),
                Measured.of(amplitude, u, Unit.VOLT),
                power[k] / mean));
      }
    }

    private static boolean highest(double[] power, int k) {
      int mask = power.length - 1;
      for (int j = 1; j <= LOBE; j++) {
        if (power[(k + j) & mask] > power[k] || power[(k - j) & mask] >= power[k]) {
          return false;
        }
      }
      return true;
    }

    /** Mean power from the median: the median of a mean of m exponentials is about 1 - 1/(3 m). */
    private static double medianMean(double[] power, int m) {
      double[] sorted = power.clone();
      Arrays.sort(sorted);
      double ratio = m == 1 ? Math.log(2) : Math.pow(1 - 1 / (9.0 * m), 3);
      return sorted[sorted.length / 2] / ratio;
    }
  }
}
