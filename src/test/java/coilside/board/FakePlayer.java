package coilside.board;

import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.shot.Step;
import coilside.signal.Fid;
import coilside.signal.Scan;
import java.time.Instant;
import java.util.ArrayList;
import java.util.List;
import java.util.OptionalDouble;

/** A player that remembers what it was given and fails when told to. */
final class FakePlayer implements ShotPlayer {
  final List<Shot> played = new ArrayList<>();
  final List<BoardException> failures = new ArrayList<>();
  int stops;
  int closes;
  Runnable whilePlaying = () -> {};

  @Override
  public BoardIdentity identity() {
    return new BoardIdentity("fake", "fake", "00", "nowhere", false);
  }

  @Override
  public Scan play(ClearedShot cleared) throws BoardException {
    played.add(cleared.shot());
    whilePlaying.run();
    if (!failures.isEmpty()) {
      throw failures.remove(0);
    }
    List<Fid> windows = new ArrayList<>();
    for (Step step : cleared.shot().flat()) {
      if (step instanceof Receive r) {
        windows.add(
            new Fid(
                new double[r.points()],
                new double[r.points()],
                r.dwellSeconds(),
                0,
                cleared.shot().carrierHertz()));
      }
    }
    return new Scan(
        windows, 0, 0, Instant.EPOCH, cleared.shot().restSeconds(), OptionalDouble.empty(), 0);
  }

  @Override
  public OptionalDouble temperature() {
    return OptionalDouble.empty();
  }

  @Override
  public void stop() {
    stops++;
  }

  @Override
  public void close() {
    closes++;
  }
}
