package coilside.bench;

import coilside.shot.Shot;
import coilside.signal.Scan;
import java.time.Instant;
import java.util.List;
import java.util.Map;

/**
 * Samples worth keeping with all it takes to analyse them again.
 *
 * @param purpose a rung's id, "fid" or "log"
 * @param started UTC
 * @param shots the shot of each scan, same length as {@code scans}
 * @param scans the scans, in order
 * @param conditions how the bench stood
 * @param settings further settings the analysis needs, by name, as text ("t1_expected_seconds")
 * @param board what the board says it is
 * @param simulated true when the simulated bench in this process was measured
 */
public record Capture(
    String purpose,
    Instant started,
    List<Shot> shots,
    List<Scan> scans,
    Conditions conditions,
    Map<String, String> settings,
    String board,
    boolean simulated) {
  public Capture {
    shots = List.copyOf(shots);
    scans = List.copyOf(scans);
    settings = Map.copyOf(settings);
    if (shots.size() != scans.size() || scans.isEmpty()) {
      throw new IllegalArgumentException(
          "a capture of " + shots.size() + " shots and " + scans.size() + " scans");
    }
  }
}
