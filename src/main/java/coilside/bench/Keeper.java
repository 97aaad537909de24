package coilside.bench;

import java.time.Instant;
import java.util.List;
import java.util.Optional;

/** What the bench needs kept; implemented by the record. Thread-safe. */
public interface Keeper {
  /**
   * Keeps a capture so that it survives a kill right after the return.
   *
   * @return its base name
   */
  String keep(Capture capture) throws KeepException;

  /** Keeps a finding, after the capture it refers to. */
  void keep(Finding finding) throws KeepException;

  /** Keeps a log row, after the capture it refers to. */
  void keep(LogRow row) throws KeepException;

  /**
   * Keeps an event: "armed", "disarmed", "settings", "log started" and so on, with who and what.
   */
  void note(Instant when, String kind, String text) throws KeepException;

  /** All findings of a rung, oldest first. */
  List<Finding> findings(Rung rung) throws KeepException;

  /** The newest finding of a rung. */
  Optional<Finding> newest(Rung rung) throws KeepException;

  /** A kept capture by its base name; empty where it is gone or cannot be read. */
  default Optional<Capture> capture(String name) {
    return Optional.empty();
  }

  /** A small setting that outlives the program ("sample", "coil"). */
  Optional<String> setting(String name) throws KeepException;

  void setSetting(String name, String value) throws KeepException;
}
