package coilside.board.simulated;

import coilside.board.simulated.FirmwareReceiver.Counts;
import coilside.shot.Shot;
import java.util.List;

/** A run in hand: which shot, how many scans, how far it has come. */
final class FirmwareRun {
  private final Shot shot;
  private final long scans;
  private final long startedNanos;
  private long played;
  private List<Counts> windows = List.of();
  private int fetchedUpTo = -1;

  FirmwareRun(Shot shot, long scans, long startedNanos) {
    this.shot = shot;
    this.scans = scans;
    this.startedNanos = startedNanos;
  }

  Shot shot() {
    return shot;
  }

  boolean allPlayed() {
    return played == scans;
  }

  /** When the scan now being played ends. */
  long scanEndNanos() {
    return startedNanos + Math.round(shot.seconds() * (played + 1) * 1e9);
  }

  void played(List<Counts> taken) {
    played++;
    windows = taken;
    fetchedUpTo = -1;
  }

  /** The windows of the scan played last; empty while there is none. */
  List<Counts> windows() {
    return windows;
  }

  boolean fetchedAll() {
    return fetchedUpTo >= windows.size() - 1;
  }

  void fetched(int window) {
    fetchedUpTo = Math.max(fetchedUpTo, window);
  }
}
