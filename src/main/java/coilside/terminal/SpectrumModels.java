package coilside.terminal;

import coilside.bench.Rung;
import coilside.quantity.Measured;
import coilside.signal.Peaks;
import coilside.signal.Spectrum;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.Comparator;
import java.util.List;
import java.util.Locale;
import java.util.Optional;

/** Turns a spectrum into a plot: curve, noise level, and the list of its lines. */
final class SpectrumModels {
  private static final double THRESHOLD_SIGMA = 6;

  /** Lower bumps beside a strong line are what dead time and window left of its foot. */
  private static final double LEAST_OF_HIGHEST = 0.02;

  private static final int DC_POINTS = 6;
  private static final int MOST_LINES = 8;

  private SpectrumModels() {}

  /**
   * The plot of a spectrum. Noise has no phase: its spectrum is shown as magnitude, and all of it.
   *
   * @param wanted the part to show of a spectrum with a phase
   * @param phased whether the real part shows absorption, so that widths and areas mean something
   * @param ppm abscissa in ppm of the carrier instead of Hz
   */
  static PlotModel of(
      Spectrum s, Rung rung, Part wanted, boolean phased, boolean ppm, String prefix) {
    int n = s.points();
    boolean signal = rung != Rung.NOISE;
    Part part = signal ? wanted : Part.MAGNITUDE;
    boolean inPpm = ppm && s.carrierHertz() > 0;
    double scale = inPpm ? 1e6 / s.carrierHertz() : 1;
    double[] f = new double[n];
    Arrays.setAll(f, k -> s.offsetHertz(k) * scale);
    double[] magnitude = new double[n];
    Arrays.setAll(magnitude, s::magnitude);
    List<Series> series = new ArrayList<>();
    double noise = Peak.baseline(magnitude);
    series.add(
        Series.band(
            "noise", new double[] {f[0], f[n - 1]}, new double[2], new double[] {noise, noise}));
    double[] y = PictureModels.part(s.re(), s.im(), part);
    series.add(Series.line(part == Part.BOTH ? "real" : part.words, Ink.SIGNAL, f, y));
    if (part == Part.BOTH) {
      series.add(Series.line("imaginary", Ink.SECOND, f, s.im()));
    }
    double[] searched = magnitude.clone();
    if (!signal) {
      // The DC offset is told apart from interference lines.
      Arrays.fill(searched, Math.max(0, n / 2 - DC_POINTS), Math.min(n, n / 2 + DC_POINTS + 1), 0);
    }
    Optional<Peak> peak = Peak.of(s, searched, noise);
    double[] near =
        peak.filter(p -> signal).map(Peak::around).orElse(new double[] {Double.NaN, Double.NaN});
    List<Peaks.Peak> lines = phased ? lines(s) : List.of();
    return new PlotModel(
        prefix + rung.id() + ".spectrum",
        "spectrum, " + part.words + title(lines, peak),
        "offset",
        inPpm ? "ppm" : "Hz",
        "amplitude",
        "V",
        series,
        List.of(),
        inPpm ? 0 : s.carrierHertz(),
        near[0] * scale,
        near[1] * scale,
        inset(lines, noise),
        "");
  }

  /** The strongest lines of the real part, by rising offset. */
  private static List<Peaks.Peak> lines(Spectrum s) {
    double noise = Peaks.noise(s);
    if (!(noise > 0)) {
      return List.of();
    }
    List<Peaks.Peak> all = new ArrayList<>(Peaks.find(s, noise, THRESHOLD_SIGMA));
    double highest = all.stream().mapToDouble(p -> p.height().value()).max().orElse(0);
    all.removeIf(p -> p.height().value() < LEAST_OF_HIGHEST * highest);
    all.sort(Comparator.comparingDouble(p -> -p.area().value()));
    List<Peaks.Peak> strongest = new ArrayList<>(all.subList(0, Math.min(MOST_LINES, all.size())));
    strongest.sort(Comparator.comparingDouble(p -> p.offsetHertz().value()));
    return strongest;
  }

  private static String title(List<Peaks.Peak> lines, Optional<Peak> peak) {
    if (lines.size() == 1) {
      Peaks.Peak p = lines.get(0);
      return "; line at " + Numbers.si(p.offsetHertz().value(), "Hz", 4);
    }
    return (lines.isEmpty() ? "" : "; " + lines.size() + " lines, largest")
        + peak.map(p -> lines.isEmpty() ? p.text() : p.text().replace("; peak", "")).orElse("");
  }

  private static List<String> inset(List<Peaks.Peak> lines, double noise) {
    List<String> out = new ArrayList<>();
    if (!lines.isEmpty()) {
      out.add(row("offset", "ppm", "width", "area"));
      for (Peaks.Peak p : lines) {
        out.add(
            row(
                value(p.offsetHertz(), 5),
                Double.isNaN(p.offsetPpm())
                    ? "-"
                    : String.format(Locale.ROOT, "%.2f", p.offsetPpm()),
                value(p.widthHertz(), 3),
                value(p.area(), 3)));
      }
      out.add("widths and areas include the window");
    }
    out.add("noise level " + Numbers.si(noise, "V", 3) + " rms");
    return out;
  }

  private static String value(Measured m, int digits) {
    return Numbers.si(m.value(), m.unit().pretty(), digits);
  }

  private static String row(String offset, String ppm, String width, String area) {
    return String.format(Locale.ROOT, "%11s %8s %9s %9s", offset, ppm, width, area);
  }
}
