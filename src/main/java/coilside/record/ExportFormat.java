package coilside.record;

import java.util.List;
import java.util.Locale;

/** A file format that captures are exported to. */
public enum ExportFormat {
  /** JCAMP-DX 5.01, the averaged FID. */
  JCAMP(".jdx"),
  /** RFC 4180: one line a sample, every scan and window. */
  CSV(".csv"),
  /** NumPy array, complex128: every window of equal length a row, else the averaged FID. */
  NPY(".npy"),
  /** Two channels (I left, Q right) of 16 bits, the averaged FID. */
  WAV(".wav");

  private final String extension;

  ExportFormat(String extension) {
    this.extension = extension;
  }

  /** File name extension, with its dot. */
  public String extension() {
    return extension;
  }

  /** The name used on the command line. */
  public String id() {
    return name().toLowerCase(Locale.ROOT);
  }

  /** The format with this name, or an exception that lists the names. */
  public static ExportFormat ofId(String id) {
    for (ExportFormat format : values()) {
      if (format.id().equals(id)) {
        return format;
      }
    }
    throw new IllegalArgumentException(
        "'"
            + id
            + "' is no export format; the formats are "
            + String.join(", ", List.of(values()).stream().map(ExportFormat::id).toList()));
  }
}
