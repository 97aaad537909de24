package coilside.shot;

/** One element of what a board plays: a closed set. Durations in seconds, phases in radians. */
public sealed interface Step permits Pulse, Wait, Receive, Repeat {
  /** How long this element takes, in seconds. */
  double seconds();
}
