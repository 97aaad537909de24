package coilside.benchmark;

import coilside.fit.DecayFit;
import coilside.fit.DecayResult;
import coilside.fit.NotDetermined;
import coilside.fit.NutationFit;
import coilside.fit.NutationPoint;
import coilside.fit.NutationResult;
import coilside.signal.Fid;
import coilside.signal.Fourier;
import coilside.signal.Phasing;
import coilside.signal.Spectrum;
import coilside.signal.Windows;
import java.util.ArrayList;
import java.util.List;
import java.util.Random;
import java.util.concurrent.TimeUnit;
import org.openjdk.jmh.annotations.Benchmark;
import org.openjdk.jmh.annotations.BenchmarkMode;
import org.openjdk.jmh.annotations.Fork;
import org.openjdk.jmh.annotations.Measurement;
import org.openjdk.jmh.annotations.Mode;
import org.openjdk.jmh.annotations.OutputTimeUnit;
import org.openjdk.jmh.annotations.Scope;
import org.openjdk.jmh.annotations.Setup;
import org.openjdk.jmh.annotations.State;
import org.openjdk.jmh.annotations.Warmup;

/**
 * How long the estimates take. Budgets: T2* at 16384 points 1 ms, nutation at 64 points 1 ms, 65536
 * points windowed, transformed and phased well within the 15 ms that they and their drawing may
 * take.
 */
@State(Scope.Thread)
@BenchmarkMode(Mode.AverageTime)
@OutputTimeUnit(TimeUnit.MICROSECONDS)
@Warmup(iterations = 3, time = 1)
@Measurement(iterations = 5, time = 1)
@Fork(1)
public class EstimatorBenchmark {
  private Fid decay;
  private Fid large;
  private List<NutationPoint> nutation;
  private NutationFit.Options options;

  /** Makes the data. */
  @Setup
  public void prepare() {
    Random random = new Random(1);
    decay = fid(random, 16384, 0.3);
    large = fid(random, 65536, 0.3);
    options = NutationFit.Options.between(2.5e-6, 4e-5).withT1(1, 0.05);
    nutation = new ArrayList<>();
    for (int j = 1; j <= 64; j++) {
      double t = 4e-5 * j / 64;
      double s = Math.exp(-t / 1e-4) * Math.sin(2 * Math.PI * 25_000 * t);
      nutation.add(
          new NutationPoint(
              t, s + 0.05 * random.nextGaussian(), 0.05 * random.nextGaussian(), 0.05, 5, 0));
    }
  }

  private static Fid fid(Random random, int n, double t2) {
    double[] re = new double[n];
    double[] im = new double[n];
    for (int k = 0; k < n; k++) {
      double t = k * 1e-4;
      double e = 20 * Math.exp(-t / t2);
      re[k] = e * Math.cos(2 * Math.PI * 500 * t) + random.nextGaussian();
      im[k] = e * Math.sin(2 * Math.PI * 500 * t) + random.nextGaussian();
    }
    return new Fid(re, im, 1e-4, 0, 8.09e6);
  }

  /** T2* of 16384 points. */
  @Benchmark
  public DecayResult decay16384() throws NotDetermined {
    return DecayFit.fit(decay);
  }

  /** A nutation curve of 64 points. */
  @Benchmark
  public NutationResult nutation64() throws NotDetermined {
    return NutationFit.fit(nutation, options);
  }

  /** One transform of 16384 points: the measure to hold the others against in the same run. */
  @Benchmark
  public Spectrum transform16384() {
    return Fourier.spectrum(decay);
  }

  /** Window, transform and phase of 65536 points. */
  @Benchmark
  public Spectrum spectrum65536() {
    return new Phasing(0.3, 1e-4).apply(Fourier.spectrum(Windows.exponential(large, 1)));
  }
}
