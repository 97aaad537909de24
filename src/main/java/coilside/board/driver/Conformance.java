package coilside.board.driver;

import coilside.board.BoardException.Stopped;
import coilside.board.BoardLimits;
import coilside.board.GuardedBoard;
import coilside.board.driver.Conformance.Row.Verdict;
import coilside.board.link.Link;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.Framing;
import coilside.shot.Pulse;
import coilside.shot.Shot;
import coilside.shot.Step;
import coilside.shot.Wait;
import coilside.signal.Scan;
import java.nio.charset.StandardCharsets;
import java.time.Clock;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.function.Consumer;
import java.util.function.LongSupplier;

/**
 * Tries whether a board does what its profile says, and tells it as a table. It describes shots to
 * the board and receives; it transmits only when told to.
 */
public final class Conformance {
  /** Part of the operator's amplitude that the one pulse is sent at. */
  private static final double LOW = 0.1;

  private static final double PULSE_REST_SECONDS = 0.1;
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
  private final Trials trials;
  private final ReceiveTrials receiving;
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
    this.player = new ProfilePlayer(profile, link, this::watchedClock, wallClock);
    this.board = new GuardedBoard(player, profile.limits(), this::watchedClock, true);
    this.trials = new Trials(asItGoes);
    this.receiving = new ReceiveTrials(profile, board, player, trials);
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
    return run.trials.rows();
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

  private void all() {
    boolean there =
        trials.tryOut(
            "identify",
            "an answer as in the profile",
            () -> {
              player.open(false);
              trials.row(
                  "identify",
                  "an answer as in the profile",
                  player.identity().name(),
                  Verdict.GOOD);
            });
    if (!there) {
      return;
    }
    timing();
    temperature();
    new SettingTrials(profile, player, trials).all();
    receiving.all();
    abort();
    garbage();
    pulse();
  }

  private void timing() {
    String expected =
        String.format(Locale.ROOT, "within %.4g ms", profile.replies().timeLimitSeconds() * 1e3);
    if (profile.identification().ask().isEmpty()) {
      trials.row("reply time", expected, "the profile has no question to ask", Verdict.SKIPPED);
      return;
    }
    trials.tryOut(
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
          trials.row(
              "reply time",
              expected,
              String.format(Locale.ROOT, "%.3g ms at the longest of 10", worst * 1e3),
              near ? Verdict.LOOK : Verdict.GOOD);
        });
  }

  private void abort() {
    String tried = "abort in mid-run";
    String expected = "it stops, and answers again";
    double rest = Math.min(ABORT_REST_SECONDS, limits.waitSeconds().max());
    if (profile.command(coilside.board.profile.CommandName.STOP).isEmpty()) {
      trials.row(tried, expected, "the profile has no stop command", Verdict.SKIPPED);
      return;
    }
    trials.tryOut(
        tried,
        expected,
        () -> {
          stopAtNanos = nanoClock.getAsLong() + (long) (ABORT_AFTER_SECONDS * 1e9);
          boolean stopped = false;
          try {
            board.play(receiving.listening(rest));
          } catch (Stopped e) {
            stopped = true;
          } finally {
            stopAtNanos = Long.MAX_VALUE;
          }
          if (!stopped) {
            trials.row(
                tried,
                expected,
                "the scan was over before it could be stopped (a simulated board needs --paced)",
                Verdict.SKIPPED);
            return;
          }
          long from = nanoClock.getAsLong();
          board.play(receiving.listening(0));
          trials.row(
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
    String expected = "it answers again";
    trials.tryOut(
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
          board.play(receiving.listening(0));
          trials.row(tried, expected, "a capture came as before", Verdict.GOOD);
        });
  }

  private static Pulse weakPulse(DeviceProfile profile) {
    BoardLimits l = profile.limits();
    return new Pulse(
        l.pulseSeconds().snap(10e-6), 0, l.amplitude().snap(LOW * profile.operator().amplitude()));
  }

  /** What is sent when told to transmit, for a caution beforehand. */
  public static String whatIsSent(DeviceProfile profile) {
    return "one pulse of " + text(weakPulse(profile));
  }

  private static String text(Pulse pulse) {
    return String.format(
        Locale.ROOT, "%.3g us at amplitude %.3g", pulse.seconds() * 1e6, pulse.amplitude());
  }

  private void pulse() {
    String expected = "samples come back";
    BoardLimits l = profile.limits();
    Pulse one = weakPulse(profile);
    String tried = "one pulse, " + text(one);
    if (!transmit) {
      trials.row(tried, expected, "not told to transmit", Verdict.SKIPPED);
      return;
    }
    Shot base = receiving.listening(PULSE_REST_SECONDS);
    List<Step> steps = new ArrayList<>();
    steps.add(one);
    steps.add(new Wait(l.waitSeconds().snap(20e-6)));
    steps.addAll(base.steps());
    trials.tryOut(
        tried,
        expected,
        () -> {
          board.arm();
          try {
            Scan scan =
                board.play(
                    new Shot(
                        base.carrierHertz(), l.gainDecibels().min(), base.restSeconds(), steps));
            trials.row(
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
  }

  private void temperature() {
    if (!profile.limits().reportsTemperature()) {
      return;
    }
    String expected = "between 0 and 60 degC";
    trials.tryOut(
        "temperature",
        expected,
        () -> {
          double celsius = board.temperature().orElse(Double.NaN);
          trials.row(
              "temperature",
              expected,
              String.format(Locale.ROOT, "%.2f degC", celsius),
              celsius >= 0 && celsius <= 60 ? Verdict.GOOD : Verdict.LOOK);
        });
  }
}
