package coilside.bench;

import coilside.board.Board;
import coilside.board.BoardException;
import coilside.board.BoardLimits;
import coilside.shot.Shot;
import coilside.signal.Scan;
import java.time.Instant;
import java.time.InstantSource;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.OptionalDouble;
import java.util.function.BooleanSupplier;
import java.util.function.Consumer;

/**
 * The scans of one rung as they come in: plays shots, tells what happens, and keeps shots, scans
 * and settings together until they become a capture.
 */
final class Acquisition {
  private final Board board;
  private final BenchSettings settings;
  private final Known known;
  private final Guesses guesses;
  private final Consumer<Progress> out;
  private final InstantSource clock;
  private final BooleanSupplier stopped;
  private final Instant started;
  private final List<Shot> shots = new ArrayList<>();
  private final List<Scan> scans = new ArrayList<>();
  private final Map<String, String> notes = new LinkedHashMap<>();
  private int played;
  private int planned;

  Acquisition(
      Board board,
      BenchSettings settings,
      Known known,
      Guesses guesses,
      Consumer<Progress> out,
      InstantSource clock,
      BooleanSupplier stopped) {
    this.board = board;
    this.settings = settings;
    this.known = known;
    this.guesses = guesses;
    this.out = out;
    this.clock = clock;
    this.stopped = stopped;
    this.started = clock.instant();
  }

  Known known() {
    return known;
  }

  Guesses guesses() {
    return guesses;
  }

  BenchSettings settings() {
    return settings;
  }

  BoardLimits limits() {
    return board.limits();
  }

  Instant started() {
    return started;
  }

  /** Scans played so far, those that were dropped from the capture too. */
  int scansPlayed() {
    return played;
  }

  int scansLeft() {
    return settings.scanBudget() - played;
  }

  /** Says how many scans are planned in all, for the progress bar; 0 when open. */
  void plan(int scansInAll) {
    planned = scansInAll;
  }

  /** Plays a shot and adds it to the capture. */
  Scan play(Shot shot) throws BoardException {
    Scan scan = playAside(shot);
    shots.add(shot);
    scans.add(scan);
    return scan;
  }

  /** Plays a shot that only helps to choose the next: it does not go into the capture. */
  Scan playAside(Shot shot) throws BoardException {
    if (stopped.getAsBoolean()) {
      throw new BoardException.Stopped("stopped by the operator");
    }
    out.accept(new Progress.ShotStarted(shot, played, planned, clock.instant()));
    Scan scan = board.play(shot);
    out.accept(new Progress.ScanArrived(shot, scan, played));
    played++;
    return scan;
  }

  /** Drops all scans kept so far: a wrong assumption was found, it starts again. */
  void startAgain() {
    shots.clear();
    scans.clear();
  }

  /** A setting that the analysis needs, in SI units. */
  void note(String name, double value) {
    notes.put(name, Double.toString(value));
  }

  void note(String name, String value) {
    notes.put(name, value);
  }

  List<Shot> shots() {
    return List.copyOf(shots);
  }

  List<Scan> scans() {
    return List.copyOf(scans);
  }

  boolean empty() {
    return scans.isEmpty();
  }

  void show(Picture picture) {
    out.accept(new Progress.PictureChanged(picture));
  }

  void say(String text) {
    out.accept(new Progress.Message(false, text));
  }

  void step(String what, double fraction) {
    out.accept(new Progress.Step(what, fraction, Double.NaN));
  }

  /** The capture of what was played so far. */
  Capture capture(Rung rung) {
    return capture(rung.id());
  }

  Capture capture(String purpose) {
    Shot last = shots.get(shots.size() - 1);
    return new Capture(
        purpose,
        started,
        shots,
        scans,
        conditions(last.carrierHertz(), last.gainDecibels()),
        notes,
        board.identity().name(),
        board.identity().simulated());
  }

  /** How the bench stands, with this carrier and gain. */
  Conditions conditions(double carrierHertz, double gainDecibels) {
    OptionalDouble temperature =
        scans.isEmpty() ? OptionalDouble.empty() : scans.get(scans.size() - 1).temperatureCelsius();
    return new Conditions(
        board.identity().name(),
        board.identity().profileDigest(),
        carrierHertz,
        settings.amplitude(),
        gainDecibels,
        settings.sample(),
        settings.coil(),
        temperature);
  }
}
