package coilside.board.profile;

import java.util.List;
import java.util.Locale;

/** A command that a profile may give, with the values that may stand in its template. */
public enum CommandName {
  /** Sets the carrier; left out where the run or the fixed command carries it. */
  CARRIER(ValueName.CARRIER),
  /** Sets the receiver gain. */
  GAIN(ValueName.GAIN),
  /** Starts a new shot, forgetting the old one. */
  BEGIN(ValueName.CARRIER, ValueName.GAIN),
  /** Adds a pulse. */
  PULSE(ValueName.WIDTH, ValueName.PHASE, ValueName.AMPLITUDE),
  /** Adds a wait. */
  WAIT(ValueName.WAIT),
  /** Adds a receive window. */
  RECEIVE(ValueName.POINTS, ValueName.SAMPLES, ValueName.DWELL, ValueName.RECEIVE_PHASE),
  /** Starts a repeat. */
  REPEAT(ValueName.COUNT),
  /** Ends the innermost repeat. */
  END_REPEAT(),
  /** Ends the shot. */
  END(),
  /** Plays the shot: rest, then the steps. */
  RUN(ValueName.SCANS, ValueName.EVERY, ValueName.REST, ValueName.CARRIER, ValueName.GAIN),
  /** One fixed command that pulses and receives, in place of begin .. run. */
  PULSE_AND_RECEIVE(
      ValueName.CARRIER,
      ValueName.GAIN,
      ValueName.WIDTH,
      ValueName.PHASE,
      ValueName.AMPLITUDE,
      ValueName.DELAY,
      ValueName.POINTS,
      ValueName.SAMPLES,
      ValueName.DWELL,
      ValueName.RECEIVE_PHASE,
      ValueName.REST),
  /** The same without a pulse, for boards of the simplest kind. */
  RECEIVE_ONLY(
      ValueName.CARRIER,
      ValueName.GAIN,
      ValueName.POINTS,
      ValueName.SAMPLES,
      ValueName.DWELL,
      ValueName.RECEIVE_PHASE,
      ValueName.REST),
  /** Asks for the samples, once a scan or (with {@code {window}}) once a window. */
  FETCH(ValueName.WINDOW),
  /** Stops whatever the board does and switches the transmitter off. */
  STOP(),
  /** Asks for the temperature; its answer names a group "celsius". */
  TEMPERATURE();

  private final List<ValueName> values;

  CommandName(ValueName... values) {
    this.values = List.of(values);
  }

  /** What may stand in the template. */
  public List<ValueName> slots() {
    return values;
  }

  /** The word in a profile: "end_repeat". */
  public String word() {
    return name().toLowerCase(Locale.ROOT);
  }
}
