package coilside.bench;

import coilside.board.Board;
import coilside.board.BoardException;
import coilside.quantity.Measured;
import java.time.Duration;
import java.time.Instant;
import java.time.InstantSource;
import java.util.ArrayList;
import java.util.EnumMap;
import java.util.EnumSet;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalDouble;
import java.util.Set;
import java.util.UUID;
import java.util.function.Consumer;

/**
 * The bench: a board, what the operator decided, and the ladder. Measures rungs and keeps what it
 * finds. Used from one thread; {@link #stop()} may be called from any.
 */
public final class Bench {
  /** Rests of a nutation curve that count as long enough, in T1. */
  private static final double ENOUGH_RESTS = 4;

  private final Board board;
  private final Keeper keeper;
  private final InstantSource clock;
  private final Consumer<Progress> out;
  private final Consumer<Progress> listener;
  private final Waiter waiter;
  private final Guesses guesses = new Guesses();
  private final Ladder ladder = new Ladder();
  private final Map<Rung, Picture> pictures = new EnumMap<>(Rung.class);
  private volatile BenchSettings settings;
  private volatile boolean stopped;
  private volatile OptionalDouble temperature = OptionalDouble.empty();

  /** A bench whose ladder stands as the keeper remembers it. */
  public Bench(
      Board board,
      Keeper keeper,
      BenchSettings settings,
      InstantSource clock,
      Waiter waiter,
      Consumer<Progress> out)
      throws KeepException {
    this.board = board;
    this.keeper = keeper;
    this.settings = settings;
    this.clock = clock;
    this.out = this::listen;
    this.listener = out;
    this.waiter = waiter;
    for (Rung rung : Rung.values()) {
      keeper.findings(rung).forEach(ladder::add);
    }
  }

  private void listen(Progress event) {
    if (event instanceof Progress.PictureChanged changed) {
      synchronized (pictures) {
        pictures.put(changed.picture().rung(), changed.picture());
      }
    } else if (event instanceof Progress.ScanArrived arrived
        && arrived.scan().temperatureCelsius().isPresent()) {
      temperature = arrived.scan().temperatureCelsius();
    }
    listener.accept(event);
  }

  public BenchSettings settings() {
    return settings;
  }

  /** Takes these settings over from the next measurement on. */
  public void apply(BenchSettings changed) {
    if (!changed.sample().equals(settings.sample())) {
      guesses.forget();
    }
    settings = changed;
    out.accept(new Progress.LadderChanged(ladder()));
  }

  /** Every rung as it stands now. */
  public List<RungStatus> ladder() {
    synchronized (ladder) {
      return ladder.states(conditions(settings), clock.instant());
    }
  }

  /** Every rung as it would stand with these settings. */
  public List<RungStatus> ladderWith(BenchSettings changed) {
    synchronized (ladder) {
      return ladder.states(conditions(changed), clock.instant());
    }
  }

  /** All findings of a rung, oldest first. */
  public List<Finding> history(Rung rung) {
    synchronized (ladder) {
      return ladder.history(rung);
    }
  }

  /** Shows a picture made again from a capture, unless a newer one has come meanwhile. */
  void showOld(Picture picture) {
    synchronized (pictures) {
      if (pictures.putIfAbsent(picture.rung(), picture) != null) {
        return;
      }
    }
    listener.accept(new Progress.PictureChanged(picture));
  }

  /** The picture last made of this rung since the program started. */
  public Optional<Picture> picture(Rung rung) {
    synchronized (pictures) {
      return Optional.ofNullable(pictures.get(rung));
    }
  }

  private Conditions conditions(BenchSettings s) {
    double carrier =
        ladder
            .value(Rung.RESONANCE, "larmor_frequency")
            .map(Measured::value)
            .orElse((s.searchLowHertz() + s.searchHighHertz()) / 2);
    double gain = ladder.value(Rung.GAIN, "receiver_gain").map(Measured::value).orElse(0.0);
    return new Conditions(
        board.identity().name(),
        board.identity().profileDigest(),
        carrier,
        s.amplitude(),
        gain,
        s.sample(),
        s.coil(),
        temperature);
  }

  /** Asks the work in hand to end and tells the board to stop. */
  public void stop() {
    stopped = true;
    board.stop();
  }

  /** Forgets an earlier {@link #stop()}; called before a new piece of work. */
  public void clearStop() {
    stopped = false;
  }

  /** True since {@link #stop()}. */
  public boolean stopRequested() {
    return stopped;
  }

  /**
   * Measures one rung, and before it what it rests on where that is not fresh.
   *
   * @return the finding of the rung, or of the first rung beneath that was refused
   */
  public Finding measure(Rung target) throws BoardException, KeepException {
    Set<Rung> beneath = EnumSet.noneOf(Rung.class);
    collect(target, beneath);
    for (Rung rung : Rung.values()) {
      if (beneath.contains(rung) && stateOf(rung) != RungStatus.State.FRESH) {
        Finding finding = measureOne(rung);
        if (finding.refused()) {
          return finding;
        }
      }
    }
    Finding finding = measureOne(target);
    if (target == Rung.T1 && !finding.refused()) {
      checkRests(finding);
    }
    return finding;
  }

  private static void collect(Rung rung, Set<Rung> into) {
    for (Rung below : rung.restsOn()) {
      if (into.add(below)) {
        collect(below, into);
      }
    }
  }

  private RungStatus.State stateOf(Rung rung) {
    synchronized (ladder) {
      return ladder.state(rung, conditions(settings), clock.instant()).state();
    }
  }

  /**
   * Climbs what is not fresh, bottom up, and stops at the first rung that is refused. A rung that
   * this board cannot serve is refused too, but does not stop the climb when nothing rests on it.
   *
   * @return the ladder afterwards
   */
  public Climb ready() throws BoardException, KeepException {
    Instant started = clock.instant();
    List<Finding> measured = new ArrayList<>();
    int done = 0;
    for (Rung rung : Rung.values()) {
      double spent = Duration.between(started, clock.instant()).toNanos() * 1e-9;
      double left = done == 0 ? Double.NaN : spent / done * (Rung.values().length - done);
      out.accept(new Progress.Step(rung.id(), done / (double) Rung.values().length, left));
      if (stateOf(rung) != RungStatus.State.FRESH) {
        Finding finding = measureOne(rung);
        measured.add(finding);
        if (rung == Rung.T1 && !finding.refused()) {
          measured.addAll(checkRests(finding));
        }
        if (finding.refused() && !(rung == Rung.T2 && !Methods.possible(rung, board.limits()))) {
          break;
        }
      }
      done++;
    }
    return new Climb(ladder(), measured, Methods.impossible(board.limits()));
  }

  /**
   * The circle of pulse and repetition time was cut by a guess of T1; now that T1 is known, the
   * nutation is measured again when its rests were shorter than four T1.
   */
  private List<Finding> checkRests(Finding t1) throws BoardException, KeepException {
    double guess = guesses.t1Seconds().orElse(Double.POSITIVE_INFINITY);
    double longest = t1.value("repetition_time").value() / GainMethod.RECOVERED;
    double rest =
        ladder
            .newestGood(Rung.NUTATION)
            .map(Finding::values)
            .filter(values -> values.containsKey("rest"))
            .map(values -> values.get("rest").value())
            .orElse(GainMethod.RECOVERED * guess);
    guesses.rememberT1(Math.max(1.1 * longest, Double.isInfinite(guess) ? 0 : guess));
    if (rest >= ENOUGH_RESTS * longest) {
      return List.of();
    }
    out.accept(
        new Progress.Message(
            true,
            String.format(
                Locale.ROOT,
                "T1 is %.3g s, and the nutation was measured with rests of %.3g s, less than %.0f T1:"
                    + " it is measured again",
                longest,
                rest,
                ENOUGH_RESTS)));
    return List.of(measureOne(Rung.NUTATION));
  }

  private Finding measureOne(Rung rung) throws BoardException, KeepException {
    Instant started = clock.instant();
    out.accept(new Progress.RungStarted(rung, started));
    Acquisition acquisition = acquisition();
    Finding finding;
    Method method = Methods.of(rung);
    try {
      Methods.check(rung, board.limits());
      method.acquire(acquisition);
      Capture capture = acquisition.capture(rung);
      Reading reading = method.read(capture);
      acquisition.show(reading.picture());
      finding = finding(rung, acquisition, started, capture, reading);
    } catch (NotMeasurable e) {
      String name = acquisition.empty() ? "" : keeper.keep(acquisition.capture(rung));
      finding =
          new Finding(
              UUID.randomUUID().toString(),
              rung,
              started,
              secondsSince(started),
              acquisition.scansPlayed(),
              Map.of(),
              List.of(),
              Optional.of(e.refusal()),
              conditions(settings),
              name,
              restedOn(rung),
              board.identity().simulated());
    }
    keeper.keep(finding);
    synchronized (ladder) {
      ladder.add(finding);
    }
    out.accept(new Progress.RungEnded(finding));
    out.accept(new Progress.LadderChanged(ladder()));
    return finding;
  }

  private Finding finding(
      Rung rung, Acquisition acquisition, Instant started, Capture capture, Reading reading)
      throws KeepException {
    return new Finding(
        UUID.randomUUID().toString(),
        rung,
        started,
        secondsSince(started),
        acquisition.scansPlayed(),
        reading.values(),
        reading.warnings(),
        Optional.empty(),
        capture.conditions(),
        keeper.keep(capture),
        restedOn(rung),
        board.identity().simulated());
  }

  private double secondsSince(Instant started) {
    return Duration.between(started, clock.instant()).toNanos() * 1e-9;
  }

  private Map<Rung, String> restedOn(Rung rung) {
    Map<Rung, String> ids = new EnumMap<>(Rung.class);
    for (Rung below : rung.restsOn()) {
      ladder.newestGood(below).ifPresent(f -> ids.put(below, f.id()));
    }
    return ids;
  }

  private Acquisition acquisition() {
    return new Acquisition(board, settings, new Known(ladder), guesses, out, clock, () -> stopped);
  }

  /** An averaged FID that was taken and kept. */
  public record Taken(Capture capture, String name, Reading reading) {}

  /** Plays and keeps an averaged FID as the ladder stands. */
  public Taken takeFid(Work.TakeFid request) throws BoardException, KeepException, FidRefused {
    try {
      return take(
          request.scans(),
          request.points(),
          request.dwellSeconds(),
          request.phaseCycle(),
          OptionalDouble.empty(),
          "fid");
    } catch (NotMeasurable e) {
      throw new FidRefused(e.refusal());
    }
  }

  /** An FID was taken, but it cannot be read; or it cannot be taken as the ladder stands. */
  public static final class FidRefused extends Exception {
    private static final long serialVersionUID = 1L;
    private final transient Refusal refusal;

    FidRefused(Refusal refusal) {
      super(refusal.reason());
      this.refusal = refusal;
    }

    public Refusal refusal() {
      return refusal;
    }
  }

  private Taken take(
      int scans, int points, double dwell, String cycle, OptionalDouble carrier, String purpose)
      throws BoardException, KeepException, NotMeasurable {
    Acquisition acquisition = acquisition();
    DecayMethod.play(acquisition, scans, points, dwell, cycle, carrier);
    Capture capture = acquisition.capture(purpose);
    String name = keeper.keep(capture);
    Reading reading = new DecayMethod().read(capture);
    acquisition.show(reading.picture());
    return new Taken(capture, name, reading);
  }

  /**
   * One repetition of the log.
   *
   * @param capture what was played
   * @param name base name of the capture; empty when it was not kept
   * @param reading empty when nothing can be read from it
   * @param why why not; empty otherwise
   */
  record Repetition(Capture capture, String name, Optional<Reading> reading, String why) {}

  Repetition repeat(int scans, OptionalDouble carrier, boolean keep)
      throws BoardException, KeepException, NotMeasurable {
    Acquisition acquisition = acquisition();
    DecayMethod.play(acquisition, scans, 0, 0, "", carrier);
    Capture capture = acquisition.capture("log");
    String name = keep ? keeper.keep(capture) : "";
    try {
      Reading reading = new DecayMethod().read(capture);
      acquisition.show(reading.picture());
      return new Repetition(capture, name, Optional.of(reading), "");
    } catch (NotMeasurable e) {
      return new Repetition(capture, name, Optional.empty(), e.getMessage());
    }
  }

  /** The board's temperature now, degree Celsius, where it reports one. */
  OptionalDouble askTemperature() throws BoardException {
    OptionalDouble celsius = board.temperature();
    if (celsius.isPresent()) {
      temperature = celsius;
    }
    return celsius;
  }

  /** Runs over and over until stopped, keeping nothing. */
  public void live(Work.Live request) throws BoardException {
    new LiveRun(acquisition(), request, () -> stopped).run();
  }

  /**
   * Repeats an acquisition at fixed times until the plan ends, a rule ends it, or it is stopped.
   */
  public LogEnd log(Work.Log plan) throws BoardException, KeepException {
    return new LogRun(this, plan, waiter).run();
  }

  Instant now() {
    return clock.instant();
  }

  void note(String kind, String text) throws KeepException {
    keeper.note(clock.instant(), kind, text);
  }

  void say(boolean warning, String text) {
    out.accept(new Progress.Message(warning, text));
  }

  void keepRow(LogRow row) throws KeepException {
    keeper.keep(row);
    out.accept(new Progress.LogRowKept(row));
  }
}
