package coilside.board.driver;

import coilside.board.BoardException;
import coilside.board.BoardException.Stopped;
import coilside.board.BoardLimits;
import coilside.board.GuardedBoard;
import coilside.board.driver.Conformance.Row.Verdict;
import coilside.board.link.Link;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.Framing;
import coilside.board.profile.SampleBlocks;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.shot.Step;
import coilside.shot.Wait;
import coilside.signal.Fid;
import coilside.signal.Scan;
import java.nio.charset.StandardCharsets;
import java.time.Clock;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.OptionalDouble;
import java.util.function.Consumer;
import java.util.function.LongSupplier;

/**
 * Tries whether a board does what its profile says, and tells it as a table. It describes shots to
 * the board and receives; it transmits only when told to.
 */
public final class Conformance {
  private static final int CAPTURES = 3;
  private static final double ABORT_AFTER_SECONDS = 0.2;
  private static final double ABORT_REST_SECONDS = 5;

  /**
   * One line of the table.
   *
   * @param tried what was tried
   * @param expected what the profile lets one expect
   * @param seen what came
   * @param verdict how the two compare
   */
  public record Row(String tried, String expected, String seen, Verdict verdict) {
    /** How what was seen compares with what was expected. */
    public enum Verdict {
      /** As the profile says. */
      GOOD,
      /** Not what the profile says, but it may be meant so: look at it. */
      LOOK,
      /** Not what the profile says. */
      BAD,
      /** Could not be tried; {@code seen} says why. */
      SKIPPED
    }
  }

  private final DeviceProfile profile;
  private final BoardLimits limits;
  private final LongSupplier nanoClock;
  private final boolean transmit;
  private final Consumer<Row> asItGoes;
  private final List<Row> rows = new ArrayList<>();
  private final ProfilePlayer player;
  private final GuardedBoard board;
  private long stopAtNanos = Long.MAX_VALUE;

  private Conformance(
      DeviceProfile profile,
      Link link,
      LongSupplier nanoClock,
      Clock wallClock,
      boolean transmit,
      Consumer<Row> asItGoes) {
    this.profile = profile;
    this.limits = profile.boardLimits();
    this.nanoClock = nanoClock;
    this.transmit = transmit;
    this.asItGoes = asItGoes;
    this.player = new ProfilePlayer(profile, link, this::watchedClock, wallClock);
    this.board = new GuardedBoard(player, profile.limits(), this::watchedClock, true);
  }

  /**
   * Tries everything and closes the link.
   *
   * @param link open, nothing sent yet
   * @param transmit true to send one pulse as well: only into a dummy load
   * @param asItGoes gets each row as soon as it is known
   * @return all rows; a lost link ends the table early with a BAD row
   */
  public static List<Row> run(
      DeviceProfile profile,
      Link link,
      LongSupplier nanoClock,
      Clock wallClock,
      boolean transmit,
      Consumer<Row> asItGoes) {
    Conformance run = new Conformance(profile, link, nanoClock, wallClock, transmit, asItGoes);
    try {
      run.all();
    } finally {
      run.board.close();
      link.close();
    }
    return List.copyOf(run.rows);
  }

  /** The clock, which presses stop when its time has come: an abort in mid-run without a thread. */
  private long watchedClock() {
    long now = nanoClock.getAsLong();
    if (now >= stopAtNanos) {
      stopAtNanos = Long.MAX_VALUE;
      board.stop();
    }
    return now;
  }

  private void row(String tried, String expected, String seen, Verdict verdict) {
    Row row = new Row(tried, expected, seen, verdict);
    rows.add(row);
    asItGoes.accept(row);
  }

  private interface Trial {
    void run() throws BoardException;
  }

  /** Runs one trial; an error that it does not treat itself becomes a BAD row. */
  private boolean tryOut(String tried, String expected, Trial trial) {
    try {
      trial.run();
      return true;
    } catch (BoardException e) {
      row(tried, expected, e.getMessage(), Verdict.BAD);
      return false;
    }
  }

  private void all() {
    boolean there =
        tryOut(
            "identify",
            "an answer that matches the profile",
            () -> {
              player.open(false);
              row(
                  "identify",
                  "an answer that matches the profile",
                  player.identity().name(),
                  Verdict.GOOD);
            });
    if (!there) {
      return;
    }
    timing();
    new SettingTrials(
            profile,
            player,
            (r) -> {
              rows.add(r);
              asItGoes.accept(r);
            })
        .all();
    captures();
    abort();
    garbage();
    if (transmit) {
      pulse();
    } else {
      row("one pulse", "samples come back", "not told to transmit", Verdict.SKIPPED);
    }
  }

  private void timing() {
    String expected =
        String.format(Locale.ROOT, "within %.3g s", profile.replies().timeLimitSeconds());
    if (profile.identification().ask().isEmpty()) {
      row("reply time", expected, "the profile has no question to ask", Verdict.SKIPPED);
      return;
    }
    tryOut(
        "reply time",
        expected,
        () -> {
          double worst = 0;
          for (int i = 0; i < 10; i++) {
            long from = nanoClock.getAsLong();
            player.identifyAgain();
            worst = Math.max(worst, (nanoClock.getAsLong() - from) * 1e-9);
          }
          boolean near = worst > profile.replies().timeLimitSeconds() / 2;
          row(
              "reply time",
              expected,
              String.format(Locale.ROOT, "%.3g s at the longest of 10", worst),
              near ? Verdict.LOOK : Verdict.GOOD);
        });
  }

  private Shot listening(double rest) {
    int points = Math.min(limits.maxPoints(), Math.max(limits.minPoints(), 1024));
    double dwell =
        profile.limits().dwellSeconds().snap(Math.min(10e-6, limits.maxReceiveSeconds() / points));
    BoardLimits l = profile.limits();
    double carrier = l.carrierHertz().snap((l.carrierHertz().min() + l.carrierHertz().max()) / 2);
    double gain = l.gainDecibels().snap((l.gainDecibels().min() + l.gainDecibels().max()) / 2);
    return new Shot(carrier, gain, rest, List.of(new Receive(points, dwell, 0)));
  }

  private void captures() {
    Shot shot = listening(0);
    String tried = "receive-only capture";
    Receive receive = (Receive) shot.steps().get(0);
    tryOut(
        tried,
        receive.points() + " points, transmitter off",
        () -> {
          int retries = 0;
          Scan scan = null;
          for (int i = 0; i < CAPTURES; i++) {
            scan = board.play(shot);
            retries += scan.retries();
          }
          samples(tried, receive, scan);
          byteOrder();
          checksum(retries);
        });
  }

  private void samples(String tried, Receive receive, Scan scan) {
    Fid fid = scan.fid();
    int lost = receive.points() - fid.points();
    row(
        tried,
        receive.points() + " points, transmitter off",
        fid.points() + " points and " + lost + " lost to the receive filter",
        Verdict.GOOD);
    boolean varied = false;
    for (int k = 1; k < fid.points() && !varied; k++) {
      varied = fid.re(k) != fid.re(0) || fid.im(k) != fid.im(0);
    }
    row(
        "samples are alive",
        "noise, not one constant number, not at the rails",
        varied
            ? String.format(
                Locale.ROOT,
                "level %.2g of full scale, %d clipped",
                scan.peakFraction(),
                scan.clippedSamples())
            : "every sample is the same",
        !varied ? Verdict.BAD : scan.clippedSamples() > 0 ? Verdict.LOOK : Verdict.GOOD);
  }

  private void byteOrder() {
    SampleSanity sanity = SampleSanity.of(profile.samples(), player.lastBlock());
    row("byte order and sign", sanity.expected(), sanity.seen(), sanity.verdict());
  }

  private void checksum(int retries) {
    boolean has =
        profile.blocks().checksum().isPresent()
            || profile.framing() instanceof Framing.Cobs cobs && cobs.checksum().isPresent();
    String expected = CAPTURES + " captures without a damaged block";
    row(
        "checksum",
        expected,
        has
            ? retries + " damaged"
            : retries
                + " damaged; the profile has no checksum, so damage inside samples goes unseen",
        retries > 0 ? Verdict.BAD : has ? Verdict.GOOD : Verdict.LOOK);
  }

  private void abort() {
    String tried = "abort in mid-run";
    String expected = "the board stops and answers the next question";
    double rest = Math.min(ABORT_REST_SECONDS, limits.waitSeconds().max());
    if (profile.command(coilside.board.profile.CommandName.STOP).isEmpty()) {
      row(tried, expected, "the profile has no stop command", Verdict.SKIPPED);
      return;
    }
    tryOut(
        tried,
        expected,
        () -> {
          stopAtNanos = nanoClock.getAsLong() + (long) (ABORT_AFTER_SECONDS * 1e9);
          boolean stopped = false;
          try {
            board.play(listening(rest));
          } catch (Stopped e) {
            stopped = true;
          } finally {
            stopAtNanos = Long.MAX_VALUE;
          }
          if (!stopped) {
            row(tried, expected, "the scan was over before it could be stopped", Verdict.SKIPPED);
            return;
          }
          long from = nanoClock.getAsLong();
          board.play(listening(0));
          row(
              tried,
              expected,
              String.format(
                  Locale.ROOT,
                  "stopped; the next capture was there after %.2g s",
                  (nanoClock.getAsLong() - from) * 1e-9),
              (nanoClock.getAsLong() - from) * 1e-9 > rest / 2 ? Verdict.LOOK : Verdict.GOOD);
        });
  }

  private void garbage() {
    String tried = "recovery after garbage";
    String expected = "the board answers the next question";
    tryOut(
        tried,
        expected,
        () -> {
          String end = profile.framing() instanceof Framing.Lines lines ? lines.endOut() : "\0";
          player.babble(
              ("\u00a7%&/()=?*+~#'" + end + "\u0001\u0002\u0003" + end)
                  .getBytes(StandardCharsets.ISO_8859_1));
          if (profile.replies().mode() == coilside.board.profile.Replies.Mode.ASKED) {
            player.clearErrors();
          }
          board.play(listening(0));
          row(tried, expected, "a capture came as before", Verdict.GOOD);
        });
  }

  private void pulse() {
    String tried = "one pulse";
    String expected = "samples come back";
    Shot base = listening(0.1);
    BoardLimits l = profile.limits();
    double width = l.pulseSeconds().snap(Math.min(10e-6, l.pulseSeconds().max()));
    List<Step> steps = new ArrayList<>();
    steps.add(new Pulse(width, 0, l.amplitude().snap(profile.operator().amplitude())));
    steps.add(new Wait(l.waitSeconds().snap(20e-6)));
    steps.addAll(base.steps());
    tryOut(
        tried,
        expected,
        () -> {
          board.arm();
          try {
            Scan scan =
                board.play(new Shot(base.carrierHertz(), l.gainDecibels().min(), 0.1, steps));
            row(
                tried,
                expected,
                String.format(
                    Locale.ROOT,
                    "%d points, level %.2g of full scale",
                    scan.fid().points(),
                    scan.peakFraction()),
                Verdict.GOOD);
          } finally {
            board.disarm();
          }
        });
    if (profile.limits().reportsTemperature()) {
      tryOut(
          "temperature",
          "degree Celsius",
          () -> {
            OptionalDouble celsius = board.temperature();
            row(
                "temperature",
                "degree Celsius",
                celsius.orElse(Double.NaN) + " degC",
                Verdict.GOOD);
          });
    }
    if (profile.blocks().per() == SampleBlocks.Per.SCAN && limits.maxWindows() > 1) {
      tryOut(
          "two windows in one block",
          "two windows",
          () -> {
            List<Step> two = new ArrayList<>(base.steps());
            two.add(new Wait(l.waitSeconds().snap(1e-3)));
            two.addAll(base.steps());
            Scan scan = board.play(new Shot(base.carrierHertz(), l.gainDecibels().min(), 0, two));
            row(
                "two windows in one block",
                "two windows",
                scan.windows().size() + " windows",
                Verdict.GOOD);
          });
    }
  }
}
