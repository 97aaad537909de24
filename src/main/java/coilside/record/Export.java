package coilside.record;

import coilside.bench.Analysis;
import coilside.bench.Capture;
import coilside.bench.KeepException;
import coilside.shot.Pulse;
import coilside.shot.Shot;
import coilside.signal.Fid;
import coilside.signal.Fourier;
import coilside.signal.Phasing;
import coilside.signal.Scan;
import coilside.signal.Spectrum;
import java.io.BufferedOutputStream;
import java.io.IOException;
import java.io.OutputStream;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardOpenOption;
import java.util.List;

/** Captures written to files that other programs read. An existing file is never overwritten. */
public final class Export {
  private Export() {}

  /** Something that writes a file's bytes. */
  interface Body {
    void writeTo(OutputStream out) throws IOException;
  }

  /**
   * Writes a capture's FIDs. JCAMP-DX and WAV hold one FID, the average of the capture's scans.
   *
   * @throws KeepException when the file exists or cannot be written
   * @throws IllegalArgumentException when the format holds one FID and the capture's scans cannot
   *     be averaged, since they were played differently
   */
  public static void fids(Capture capture, ExportFormat format, Path file) throws KeepException {
    Body body =
        switch (format) {
          case JCAMP -> {
            Fid average = average(capture);
            yield out -> JcampWriter.fid(about(capture), average, out);
          }
          case CSV -> out -> TableWriter.fids(capture, out);
          case NPY -> {
            List<Fid> rows = rows(capture);
            yield out -> NpyWriter.write(rows, out);
          }
          case WAV -> {
            Fid average = average(capture);
            yield out -> WavWriter.write(average, about(capture).title(), out);
          }
        };
    write(file, body);
  }

  /**
   * Writes the spectrum of a capture's averaged FID, zero-filled to a power of two, phased to the
   * pulse's centre in first order and automatically in zero order.
   *
   * @throws IllegalArgumentException when the format holds no spectrum (WAV, NumPy), or as above
   */
  public static void spectrum(Capture capture, ExportFormat format, Path file)
      throws KeepException {
    Fid fid = average(capture);
    Spectrum raw = Fourier.spectrum(fid);
    Spectrum spectrum = Phasing.automaticZero(raw, fid.startSeconds()).apply(raw);
    Body body =
        switch (format) {
          case JCAMP -> out -> JcampWriter.spectrum(about(capture), spectrum, out);
          case CSV -> out -> TableWriter.spectrum(spectrum, out);
          case NPY, WAV ->
              throw new IllegalArgumentException(
                  "a spectrum is exported as jcamp or csv, not as " + format.id());
        };
    write(file, body);
  }

  /** What a header says of a capture. */
  static JcampWriter.About about(Capture capture) {
    Scan last = capture.scans().get(capture.scans().size() - 1);
    return new JcampWriter.About(
        capture.purpose() + ", " + capture.conditions().sample(),
        capture.board() + (capture.simulated() ? " (simulated)" : ""),
        capture.conditions().sample(),
        "1H",
        capture.started(),
        capture.scans().size(),
        last.temperatureCelsius());
  }

  /**
   * The mean of the first windows of all scans with a pulse, each turned back by the phase of its
   * first pulse: the receiver side of the phase cycle.
   *
   * @throws IllegalArgumentException when they were not all played alike but for phases and rest
   */
  public static Fid average(Capture capture) {
    List<Scan> scans = capture.scans();
    Fid first = scans.get(0).fid();
    for (int i = 0; i < scans.size(); i++) {
      if (!sameShape(first, scans.get(i).fid())
          || !alike(capture.shots().get(0), capture.shots().get(i))) {
        throw new IllegalArgumentException(
            "scan "
                + i
                + " of this "
                + capture.purpose()
                + " capture was played otherwise than scan 0, so there is no average to export;"
                + " csv and npy hold every scan");
      }
    }
    return capture.shots().get(0).receiveOnly()
        ? Analysis.plainMean(scans)
        : Analysis.average(capture);
  }

  private static List<Fid> rows(Capture capture) {
    List<Fid> all = capture.scans().stream().flatMap(s -> s.windows().stream()).toList();
    boolean equal = all.stream().allMatch(f -> f.points() == all.get(0).points());
    return equal ? all : List.of(average(capture));
  }

  private static boolean sameShape(Fid a, Fid b) {
    return a.points() == b.points()
        && a.dwellSeconds() == b.dwellSeconds()
        && a.startSeconds() == b.startSeconds()
        && a.carrierHertz() == b.carrierHertz();
  }

  private static boolean alike(Shot a, Shot b) {
    return widths(a).equals(widths(b)) && a.flat().size() == b.flat().size();
  }

  private static List<Double> widths(Shot shot) {
    return shot.flat().stream()
        .filter(Pulse.class::isInstance)
        .map(step -> step.seconds() * ((Pulse) step).amplitude())
        .toList();
  }

  private static void write(Path file, Body body) throws KeepException {
    try (OutputStream out =
        new BufferedOutputStream(
            Files.newOutputStream(file, StandardOpenOption.CREATE_NEW, StandardOpenOption.WRITE))) {
      body.writeTo(out);
    } catch (java.nio.file.FileAlreadyExistsException e) {
      throw new KeepException(
          "cannot export to " + file + ": that file exists; name another or remove it", e);
    } catch (IOException e) {
      FileWriter.deleteQuietly(file);
      throw Trouble.with("cannot export to", file, e);
    }
  }
}
