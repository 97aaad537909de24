package coilside.record;

import coilside.bench.Capture;
import coilside.bench.KeepException;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Collections;
import java.util.List;
import java.util.stream.Stream;

/**
 * The folder the captures lie in: names them, writes them whole or not at all, and clears what a
 * killed run left half done. Thread-safe.
 *
 * <p>A capture is two files. Both are written aside under hidden names and synced; then the data
 * take their final name, then the metadata. Only the metadata's name makes a capture visible, so a
 * reader never meets half of one. A kill between the two renames leaves everything needed to
 * finish, which the next opening does.
 */
final class CapturesFolder {
  static final String META = ".sigmf-meta";
  static final String DATA = ".sigmf-data";
  private static final String ASIDE_PREFIX = ".";
  private static final String ASIDE_SUFFIX = ".aside";
  private static final int MAX_SAME_NAME = 100_000;

  private final Path folder;
  private final FileWriter writer;

  CapturesFolder(Path folder, FileWriter writer) {
    this.folder = folder;
    this.writer = writer;
  }

  /** Opens or makes the folder and tries whether it can be written. */
  static CapturesFolder open(Path folder) throws KeepException {
    return open(folder, new FileWriter());
  }

  static CapturesFolder open(Path folder, FileWriter writer) throws KeepException {
    try {
      if (!Files.isDirectory(folder)) {
        Files.createDirectories(folder);
      }
      Path probe = Files.createTempFile(folder, ASIDE_PREFIX + "probe-", ASIDE_SUFFIX);
      Files.delete(probe);
    } catch (IOException e) {
      throw Trouble.with("cannot keep anything in the captures folder", folder, e);
    }
    return new CapturesFolder(folder, writer);
  }

  Path path() {
    return folder;
  }

  /** True when the capture is there, data and metadata. */
  boolean holds(String base) {
    return Files.isRegularFile(folder.resolve(base + META))
        && Files.isRegularFile(folder.resolve(base + DATA));
  }

  /** The base names of all captures in this folder, in the order of their names. */
  static List<String> list(Path folder) throws KeepException {
    List<String> out = new ArrayList<>();
    try (Stream<Path> files = Files.list(folder)) {
      files.forEach(
          file -> {
            String name = file.getFileName().toString();
            if (name.endsWith(META) && !name.startsWith(ASIDE_PREFIX)) {
              out.add(name.substring(0, name.length() - META.length()));
            }
          });
    } catch (IOException e) {
      throw Trouble.with("cannot list the captures folder", folder, e);
    }
    Collections.sort(out);
    return out;
  }

  synchronized String keep(Capture capture) throws KeepException {
    String base = freeName(capture);
    Path data = folder.resolve(base + DATA);
    Path meta = folder.resolve(base + META);
    Path dataAside = aside(data);
    Path metaAside = aside(meta);
    try {
      CaptureData written = CaptureData.of(capture);
      String sha512 = writer.writeData(dataAside, written);
      writer.writeText(metaAside, CaptureMetadata.text(capture, sha512));
      writer.syncFolder(folder);
      writer.rename(dataAside, data);
      writer.syncFolder(folder);
      writer.rename(metaAside, meta);
      writer.syncFolder(folder);
      return base;
    } catch (IOException e) {
      // Nothing half done stays, so that a full disk is not filled further by failed attempts.
      FileWriter.deleteQuietly(metaAside);
      FileWriter.deleteQuietly(dataAside);
      if (!Files.exists(meta)) {
        FileWriter.deleteQuietly(data);
      }
      throw Trouble.with("cannot keep the capture", meta, e);
    }
  }

  private String freeName(Capture capture) throws KeepException {
    String purpose = Words.fileNamePart(capture.purpose(), 20);
    String sample = Words.fileNamePart(capture.conditions().sample(), 40);
    String stem =
        Words.fileTime(capture.started())
            + "-"
            + (purpose.isEmpty() ? "capture" : purpose)
            + (sample.isEmpty() ? "" : "-" + sample);
    for (int i = 1; i <= MAX_SAME_NAME; i++) {
      String base = i == 1 ? stem : stem + "-" + i;
      if (!Files.exists(folder.resolve(base + META))
          && !Files.exists(folder.resolve(base + DATA))) {
        return base;
      }
    }
    throw new KeepException(
        "the captures folder "
            + folder
            + " already holds "
            + MAX_SAME_NAME
            + " captures named "
            + stem
            + ": check the computer's clock");
  }

  private static Path aside(Path target) {
    return target.resolveSibling(ASIDE_PREFIX + target.getFileName() + ASIDE_SUFFIX);
  }

  /**
   * Finishes or removes what a killed run left: only files under our own hidden names, and data
   * whose hidden metadata beside them say that they were ours.
   */
  void clearLeftovers() throws KeepException {
    List<Path> asides = new ArrayList<>();
    try (Stream<Path> files = Files.list(folder)) {
      files
          .filter(
              f -> {
                String name = f.getFileName().toString();
                return name.startsWith(ASIDE_PREFIX) && name.endsWith(ASIDE_SUFFIX);
              })
          .forEach(asides::add);
      for (Path metaAside : asides) {
        String name = metaAside.getFileName().toString();
        if (name.endsWith(META + ASIDE_SUFFIX)) {
          finishOrRemove(metaAside, name.substring(1, name.length() - ASIDE_SUFFIX.length()));
        }
      }
      for (Path left : asides) {
        Files.deleteIfExists(left);
      }
      if (!asides.isEmpty()) {
        writer.syncFolder(folder);
      }
    } catch (IOException e) {
      throw Trouble.with("cannot clear what an interrupted run left in", folder, e);
    }
  }

  private void finishOrRemove(Path metaAside, String metaName) throws IOException {
    Path meta = folder.resolve(metaName);
    Path data = folder.resolve(metaName.substring(0, metaName.length() - META.length()) + DATA);
    if (Files.exists(meta) || !Files.isRegularFile(data)) {
      return;
    }
    // The data took their name only after the metadata were whole and synced.
    writer.rename(metaAside, meta);
    writer.syncFolder(folder);
  }
}
