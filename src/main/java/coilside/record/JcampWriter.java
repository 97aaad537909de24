package coilside.record;

import coilside.signal.Fid;
import coilside.signal.Spectrum;
import java.io.IOException;
import java.io.OutputStream;
import java.nio.charset.StandardCharsets;
import java.time.Instant;
import java.time.ZoneOffset;
import java.time.format.DateTimeFormatter;
import java.util.Locale;
import java.util.OptionalDouble;

/**
 * FIDs and complex spectra as JCAMP-DX 5.01 NTUPLES files (Lampen et al., Pure Appl. Chem. 71, 1549
 * (1999)).
 *
 * <p>Tables hold whole numbers only, separated by blanks (the AFFN form): an exponent in a table is
 * misread by decoders that take E for a packed digit. A table's number times FACTOR is the value;
 * 31 bits stand for the largest one, so what is lost is below one part in 10^9 of it. LAST is
 * (points - 1) times the dwell time, from which readers reckon the time axis. What the standard
 * requires beyond what public files show is from memory.
 */
final class JcampWriter {
  private static final int MAX_LINE = 80;
  private static final double FULL_SCALE = (1L << 30) - 1;
  private static final DateTimeFormatter LONG_DATE =
      DateTimeFormatter.ofPattern("uuuu/MM/dd HH:mm:ss.SSSS xx", Locale.ROOT)
          .withZone(ZoneOffset.UTC);

  private final StringBuilder out = new StringBuilder();

  private JcampWriter() {}

  /**
   * What the header says.
   *
   * @param title one line
   * @param board what measured
   * @param sample what was in the coil
   * @param nucleus mass number first: "1H"
   * @param started UTC
   * @param scans how many were averaged
   * @param temperatureCelsius where known
   */
  record About(
      String title,
      String board,
      String sample,
      String nucleus,
      Instant started,
      int scans,
      OptionalDouble temperatureCelsius) {}

  /** The integers of one component's table and what one of them is worth. */
  private record Table(long[] integers, double factor) {
    static Table of(double[] values) {
      double peak = 0;
      for (double v : values) {
        peak = Math.max(peak, Math.abs(v));
      }
      double factor = peak > 0 ? peak / FULL_SCALE : 1;
      long[] integers = new long[values.length];
      for (int k = 0; k < values.length; k++) {
        integers[k] = Math.round(values[k] / factor);
      }
      return new Table(integers, factor);
    }

    double first() {
      return integers[0] * factor;
    }

    double last() {
      return integers[integers.length - 1] * factor;
    }

    double min() {
      return java.util.Arrays.stream(integers).min().orElseThrow() * factor;
    }

    double max() {
      return java.util.Arrays.stream(integers).max().orElseThrow() * factor;
    }
  }

  static void fid(About about, Fid fid, OutputStream to) throws IOException {
    JcampWriter w = new JcampWriter();
    w.header(about, "NMR FID", fid.carrierHertz());
    w.label(".ACQUISITION MODE", "SIMULTANEOUS");
    String delay = number(fid.startSeconds() * 1e6);
    w.label(".DELAY", "(" + delay + ", " + delay + ")");
    w.label(".ACQUISITION TIME", number(fid.points() * fid.dwellSeconds()));
    w.tables(
        "NMR FID",
        "TIME, FID/REAL, FID/IMAG",
        "SECONDS",
        new double[] {0, (fid.points() - 1) * fid.dwellSeconds(), fid.dwellSeconds()},
        0,
        Table.of(fid.re()),
        Table.of(fid.im()));
    to.write(w.out.toString().getBytes(StandardCharsets.US_ASCII));
  }

  static void spectrum(About about, Spectrum s, OutputStream to) throws IOException {
    JcampWriter w = new JcampWriter();
    w.header(about, "NMR SPECTRUM", s.carrierHertz());
    w.comment("frequencies are offsets from the observe frequency, rising");
    w.tables(
        "NMR SPECTRUM",
        "FREQUENCY, SPECTRUM/REAL, SPECTRUM/IMAG",
        "HZ",
        new double[] {s.offsetHertz(0), s.offsetHertz(s.points() - 1), s.stepHertz()},
        -(s.points() / 2),
        Table.of(s.re()),
        Table.of(s.im()));
    to.write(w.out.toString().getBytes(StandardCharsets.US_ASCII));
  }

  private void header(About about, String type, double carrierHertz) {
    label("TITLE", about.title());
    label("JCAMP-DX", "5.01");
    label("DATA TYPE", type);
    label("DATA CLASS", "NTUPLES");
    label("ORIGIN", "coilside");
    label("OWNER", "the bench's operator");
    label("LONGDATE", LONG_DATE.format(about.started()));
    label("SPECTROMETER/DATA SYSTEM", about.board());
    label("SAMPLE DESCRIPTION", about.sample());
    about.temperatureCelsius().ifPresent(t -> label("TEMPERATURE", number(t)));
    label(".OBSERVE FREQUENCY", number(carrierHertz / 1e6));
    label(".OBSERVE NUCLEUS", "^" + about.nucleus());
    label(".AVERAGES", Integer.toString(about.scans()));
    comment("table value times FACTOR = volts at the receiver input");
  }

  /** x holds first, last and step of the abscissa; firstX its first value in steps. */
  private void tables(
      String name, String variables, String unit, double[] x, long firstX, Table re, Table im) {
    int n = re.integers().length;
    label("NTUPLES", name);
    label("VAR_NAME", variables + ", PAGE NUMBER");
    label("SYMBOL", "X, R, I, N");
    label("VAR_TYPE", "INDEPENDENT, DEPENDENT, DEPENDENT, PAGE");
    label("VAR_FORM", "AFFN, ASDF, ASDF, AFFN");
    label("VAR_DIM", n + ", " + n + ", " + n + ", 2");
    label("UNITS", unit + ", ARBITRARY UNITS, ARBITRARY UNITS,");
    label("FIRST", list(x[0], re.first(), im.first(), "1"));
    label("LAST", list(x[1], re.last(), im.last(), "2"));
    label("MIN", list(x[0], re.min(), im.min(), "1"));
    label("MAX", list(x[1], re.max(), im.max(), "2"));
    label("FACTOR", list(x[2], re.factor(), im.factor(), "1"));
    table("1", "(X++(R..R)), XYDATA", firstX, re.integers());
    table("2", "(X++(I..I)), XYDATA", firstX, im.integers());
    label("END NTUPLES", name);
    label("END", "");
  }

  private void table(String page, String form, long firstX, long[] integers) {
    label("PAGE", "N=" + page);
    label("DATA TABLE", form);
    StringBuilder line = new StringBuilder();
    for (int k = 0; k < integers.length; k++) {
      String number = Long.toString(integers[k]);
      if (line.length() > 0 && line.length() + 1 + number.length() > MAX_LINE) {
        out.append(line).append('\n');
        line.setLength(0);
      }
      if (line.length() == 0) {
        line.append(firstX + k);
      }
      line.append(' ').append(number);
    }
    out.append(line).append('\n');
  }

  private static String list(double x, double re, double im, String page) {
    return number(x) + ", " + number(re) + ", " + number(im) + ", " + page;
  }

  /** All digits; header values may have exponents, tables never. */
  private static String number(double x) {
    return x == Math.rint(x) && Math.abs(x) < 1e9 ? Long.toString((long) x) : Double.toString(x);
  }

  private void label(String name, String value) {
    String prefix = "##" + name + "= ";
    String text = Words.ascii(value, 1000).replace("$$", "$ $").replace("##", "# #");
    if (prefix.length() + text.length() > MAX_LINE) {
      if (text.startsWith("(") || text.contains(", ")) {
        wrapped(prefix, text);
        return;
      }
      text = text.substring(0, MAX_LINE - prefix.length());
    }
    out.append((prefix + text).stripTrailing()).append('\n');
  }

  /** A list too long for a line goes on in the next, broken after a comma. */
  private void wrapped(String prefix, String text) {
    StringBuilder line = new StringBuilder(prefix);
    for (String item : text.split("(?<=, )")) {
      if (line.length() + item.length() > MAX_LINE) {
        out.append(line.toString().stripTrailing()).append('\n');
        line.setLength(0);
      }
      line.append(item, 0, Math.min(item.length(), MAX_LINE));
    }
    out.append(line.toString().stripTrailing()).append('\n');
  }

  private void comment(String text) {
    out.append("$$ ").append(text).append('\n');
  }
}
