package coilside.terminal;

import coilside.bench.BenchSettings;
import coilside.bench.Desk;
import coilside.bench.Finding;
import coilside.bench.Picture;
import coilside.bench.Progress;
import coilside.bench.Rung;
import coilside.bench.RungStatus;
import coilside.bench.Work;
import coilside.board.BoardIdentity;
import coilside.board.BoardLimits;
import coilside.quantity.Nucleus;
import java.time.InstantSource;
import java.util.ArrayList;
import java.util.EnumMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalDouble;
import java.util.function.Consumer;

/**
 * A desk with invented data, for looking at the screen: it plays scripted events, one a call of
 * {@link #advance}. It measures nothing.
 */
final class FakeDesk implements Desk {
  private final InstantSource clock;
  private final boolean simulated;
  private final List<Consumer<Progress>> listeners = new ArrayList<>();
  private final Map<Rung, List<Finding>> findings = new EnumMap<>(Rung.class);
  private final Map<Rung, RungStatus> ladder = new EnumMap<>(Rung.class);
  private final Map<Rung, Picture> pictures = new EnumMap<>(Rung.class);
  private BenchSettings settings =
      new BenchSettings(
          Nucleus.HYDROGEN_1,
          7.9e6,
          8.3e6,
          1.0,
          "doped water",
          "10 mm solenoid",
          OptionalDouble.empty(),
          0.01,
          0.05,
          0.02,
          256);
  private boolean armed;
  private FakeScript script;
  private int begun;
  String armedBy = "";
  boolean breaks;

  FakeDesk(InstantSource clock, boolean simulated) {
    this.clock = clock;
    this.simulated = simulated;
    armed = simulated;
    for (Rung rung : Rung.values()) {
      findings.put(rung, new ArrayList<>());
      ladder.put(
          rung,
          new RungStatus(
              rung,
              RungStatus.State.MISSING,
              Optional.empty(),
              List.of("it has not been measured on this bench")));
    }
  }

  /** The next scripted event goes out; false when nothing is running. */
  synchronized boolean advance() {
    if (script == null) {
      return false;
    }
    Progress event = script.next();
    if (event instanceof Progress.RungEnded e) {
      Rung rung = e.finding().rung();
      findings.get(rung).add(e.finding());
      state(
          rung,
          e.finding().refused() ? RungStatus.State.REFUSED : RungStatus.State.FRESH,
          List.of());
    }
    if (event instanceof Progress.PictureChanged e && script.keepsPictures()) {
      pictures.put(e.picture().rung(), e.picture());
    }
    boolean ends = event instanceof Progress.WorkEnded;
    if (ends) {
      script = null;
    }
    tell(event);
    if (event instanceof Progress.RungEnded) {
      tell(new Progress.LadderChanged(ladder()));
    }
    return !ends;
  }

  void playAll() {
    for (int i = 0; i < 100_000 && advance(); i++) {
      // Each call sends one event.
    }
  }

  void playSome(int events) {
    for (int i = 0; i < events; i++) {
      advance();
    }
  }

  void state(Rung rung, RungStatus.State state, List<String> reasons) {
    List<Finding> all = findings.get(rung);
    Optional<Finding> last =
        all.isEmpty() ? Optional.empty() : Optional.of(all.get(all.size() - 1));
    ladder.put(rung, new RungStatus(rung, state, last, reasons));
  }

  void tell(Progress event) {
    listeners.forEach(l -> l.accept(event));
  }

  int begun() {
    return begun;
  }

  @Override
  public BoardIdentity board() {
    return new BoardIdentity(
        "teaching bench", "teaching bench", "0".repeat(64), "in this process", simulated);
  }

  @Override
  public BoardLimits limits() {
    if (breaks) {
      throw new UnsupportedOperationException("broken on purpose");
    }
    return new BoardLimits(
        new BoardLimits.Range(1e6, 30e6, 1),
        new BoardLimits.Range(0, 60, 1),
        new BoardLimits.Range(0.1e-6, 200e-6, 0.1e-6),
        new BoardLimits.Range(0, 1, 0.001),
        new BoardLimits.Range(0, 100, 1e-6),
        new BoardLimits.Range(1e-6, 1e-3, 1e-6),
        16,
        65536,
        64,
        1024,
        4096,
        10,
        0.02,
        1,
        true,
        true,
        true,
        true,
        true);
  }

  @Override
  public synchronized BenchSettings settings() {
    return settings;
  }

  @Override
  public synchronized List<Rung> wouldGoStale(BenchSettings changed) {
    return changed.sample().equals(settings.sample()) && changed.amplitude() == settings.amplitude()
        ? List.of()
        : List.of(Rung.NUTATION, Rung.T1, Rung.T2STAR, Rung.T2);
  }

  @Override
  public void apply(BenchSettings changed) {
    synchronized (this) {
      if (script != null) {
        throw new IllegalStateException("The bench is busy; stop it before changing settings.");
      }
      for (Rung rung : wouldGoStale(changed)) {
        if (!findings.get(rung).isEmpty()) {
          state(
              rung,
              RungStatus.State.STALE,
              List.of("the sample was '" + settings.sample() + "', is '" + changed.sample() + "'"));
        }
      }
      settings = changed;
    }
    tell(new Progress.LadderChanged(ladder()));
  }

  @Override
  public synchronized List<RungStatus> ladder() {
    return List.copyOf(ladder.values());
  }

  @Override
  public synchronized List<Finding> history(Rung rung) {
    return List.copyOf(findings.get(rung));
  }

  @Override
  public synchronized Optional<Picture> picture(Rung rung) {
    return Optional.ofNullable(pictures.get(rung));
  }

  @Override
  public synchronized boolean armed() {
    return armed;
  }

  @Override
  public synchronized void arm(String who) {
    armed = true;
    armedBy = who;
  }

  @Override
  public synchronized void disarm(String who) {
    armed = simulated;
  }

  @Override
  public synchronized boolean busy() {
    return script != null;
  }

  @Override
  public synchronized void begin(Work work) {
    if (script != null) {
      throw new IllegalStateException("The bench is busy.");
    }
    begun++;
    script = new FakeScript(work, clock, settings, simulated);
  }

  @Override
  public synchronized void stop() {
    if (script != null) {
      script.stop();
    }
  }

  @Override
  public void listen(Consumer<Progress> listener) {
    listeners.add(listener);
  }

  @Override
  public void close() {
    stop();
  }
}
