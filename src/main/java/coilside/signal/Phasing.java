package coilside.signal;

/**
 * A phase correction of a spectrum: every point is multiplied by exp(-i (zero + 2 pi f delay)), f
 * its offset from the carrier. The first order is a time, so that it means the same at any width.
 *
 * @param zeroRadians zero order, rad, at the carrier
 * @param delaySeconds first order, s
 */
public record Phasing(double zeroRadians, double delaySeconds) {
  /**
   * The first-order correction for a window that opened at {@code startSeconds} after time zero.
   */
  public static Phasing forStart(double zeroRadians, double startSeconds) {
    return new Phasing(zeroRadians, startSeconds);
  }

  /** Corrects a spectrum. */
  public Spectrum apply(Spectrum s) {
    int n = s.points();
    double[] re = new double[n];
    double[] im = new double[n];
    double step = -2 * Math.PI * delaySeconds * s.stepHertz();
    for (int k = 0; k < n; k++) {
      double angle = -zeroRadians + step * (k - n / 2);
      double c = Math.cos(angle);
      double d = Math.sin(angle);
      re[k] = s.re()[k] * c - s.im()[k] * d;
      im[k] = s.re()[k] * d + s.im()[k] * c;
    }
    return new Spectrum(re, im, s.stepHertz(), s.carrierHertz());
  }

  /** The same with {@code radians} more of zero order. */
  public Phasing turned(double radians) {
    return new Phasing(zeroRadians + radians, delaySeconds);
  }

  /**
   * Finds the zero order, the first order being known (from the receive delay).
   *
   * <p>Takes the phase for which the real part's derivative has least entropy and the real part
   * least below zero (Chen, Weng, Goh, Garland, J. Magn. Reson. 158, 164-168, 2002).
   */
  public static Phasing automaticZero(Spectrum spectrum, double delaySeconds) {
    Spectrum s = new Phasing(0, delaySeconds).apply(spectrum);
    int[] window = signalBins(s);
    double best = 0;
    double least = Double.POSITIVE_INFINITY;
    int grid = 48;
    for (int g = 0; g < grid; g++) {
      double phase = 2 * Math.PI * g / grid;
      double cost = cost(s, window, phase);
      if (cost < least) {
        least = cost;
        best = phase;
      }
    }
    double width = 2 * Math.PI / grid;
    for (int pass = 0; pass < 40; pass++) {
      width *= 0.7;
      double low = cost(s, window, best - width);
      double high = cost(s, window, best + width);
      if (low < least && low <= high) {
        best -= width;
        least = low;
      } else if (high < least) {
        best += width;
        least = high;
      }
    }
    return new Phasing(Math.IEEEremainder(best, 2 * Math.PI), delaySeconds);
  }

  /**
   * Finds zero and first order, the latter within 16 dwell times either way of {@code nearSeconds}.
   * One line alone says nothing of the first order: it is then left as given.
   */
  public static Phasing automatic(Spectrum spectrum, double nearSeconds) {
    double dwell = 1 / (spectrum.points() * spectrum.stepHertz());
    Phasing best = automaticZero(spectrum, nearSeconds);
    double least = cost(spectrum, best);
    for (double step = 8 * dwell; step > dwell / 64; step /= 2) {
      double centre = best.delaySeconds;
      for (int side = -1; side <= 1; side += 2) {
        double delay = centre + side * step;
        if (Math.abs(delay - nearSeconds) > 16 * dwell) {
          continue;
        }
        Phasing candidate = automaticZero(spectrum, delay);
        double cost = cost(spectrum, candidate);
        if (cost < least * (1 - 1e-3)) {
          least = cost;
          best = candidate;
        }
      }
    }
    return best;
  }

  private static double cost(Spectrum spectrum, Phasing p) {
    Spectrum s = new Phasing(0, p.delaySeconds).apply(spectrum);
    return cost(s, signalBins(s), p.zeroRadians);
  }

  private static double cost(Spectrum s, int[] bins, double phase) {
    double c = Math.cos(phase);
    double d = Math.sin(phase);
    double sum = 0;
    double negative = 0;
    double square = 0;
    double[] slope = new double[bins.length];
    double before = Double.NaN;
    int lastBin = -2;
    for (int j = 0; j < bins.length; j++) {
      int k = bins[j];
      double r = s.re()[k] * c + s.im()[k] * d;
      square += r * r;
      if (r < 0) {
        negative += r * r;
      }
      slope[j] = k == lastBin + 1 ? Math.abs(r - before) : 0;
      sum += slope[j];
      before = r;
      lastBin = k;
    }
    double entropy = 0;
    for (double h : slope) {
      if (h > 0) {
        entropy -= h / sum * Math.log(h / sum);
      }
    }
    return entropy / Math.log(Math.max(2, bins.length)) + 4 * negative / square;
  }

  /** Bins whose magnitude stands 4 times above the median one, with as many again on each side. */
  private static int[] signalBins(Spectrum s) {
    int n = s.points();
    double[] size = new double[n];
    for (int k = 0; k < n; k++) {
      size[k] = s.magnitude(k);
    }
    double[] sorted = size.clone();
    java.util.Arrays.sort(sorted);
    double limit = Math.min(4 * sorted[n / 2], 0.5 * sorted[n - 1]);
    boolean[] in = new boolean[n];
    int k = 0;
    while (k < n) {
      if (size[k] > limit) {
        int from = k;
        while (k < n && size[k] > limit) {
          k++;
        }
        int margin = Math.max(4, k - from);
        for (int j = Math.max(0, from - margin); j < Math.min(n, k + margin); j++) {
          in[j] = true;
        }
      } else {
        k++;
      }
    }
    return java.util.stream.IntStream.range(0, n).filter(j -> in[j]).toArray();
  }
}
