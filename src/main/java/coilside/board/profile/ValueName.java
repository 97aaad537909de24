package coilside.board.profile;

import java.util.Locale;
import java.util.Optional;

/** A value that a command template may name; each has one meaning and one SI unit inside. */
public enum ValueName {
  /** Carrier frequency, Hz. */
  CARRIER(Dimension.FREQUENCY),
  /** Receiver gain, dB. */
  GAIN(Dimension.GAIN),
  /** Rest before the first step of the scan, s. */
  REST(Dimension.TIME),
  /** Pulse width, s. */
  WIDTH(Dimension.TIME),
  /** Pulse phase, rad, wrapped to one turn before it is sent. */
  PHASE(Dimension.ANGLE),
  /** Pulse amplitude, 0..1 of full drive. */
  AMPLITUDE(Dimension.FRACTION),
  /** Length of a wait step, s. */
  WAIT(Dimension.TIME),
  /** Wait between the end of the pulse and the receive window of a fixed command, s. */
  DELAY(Dimension.TIME),
  /** Complex points of a receive window. */
  POINTS(Dimension.COUNT),
  /** Real samples of a receive window on a board that sends real samples. */
  SAMPLES(Dimension.COUNT),
  /** Dwell time, s. */
  DWELL(Dimension.TIME),
  /** Receiver reference phase, rad, wrapped to one turn before it is sent. */
  RECEIVE_PHASE(Dimension.ANGLE),
  /** How many times a repeat plays its steps. */
  COUNT(Dimension.COUNT),
  /** How many scans a run plays. */
  SCANS(Dimension.COUNT),
  /** Repetition time of the scans of a run, s. */
  EVERY(Dimension.TIME),
  /** Index of a receive window within a scan, from 0. */
  WINDOW(Dimension.COUNT);

  /** What kind of quantity a value is: fixes which units may be written. */
  public enum Dimension {
    FREQUENCY,
    TIME,
    ANGLE,
    FRACTION,
    GAIN,
    COUNT
  }

  private final Dimension dimension;

  ValueName(Dimension dimension) {
    this.dimension = dimension;
  }

  public Dimension dimension() {
    return dimension;
  }

  /** The word in a profile: "receive_phase". */
  public String word() {
    return name().toLowerCase(Locale.ROOT);
  }

  /** The value with this word in a profile. */
  public static Optional<ValueName> ofWord(String word) {
    for (ValueName name : values()) {
      if (name.word().equals(word)) {
        return Optional.of(name);
      }
    }
    return Optional.empty();
  }
}
