package coilside.board.driver;

import coilside.board.BoardLimits;
import coilside.board.GuardedBoard;
import coilside.board.driver.Conformance.Row.Verdict;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.Framing;
import coilside.shot.Receive;
import coilside.shot.Repeat;
import coilside.shot.Shot;
import coilside.shot.Step;
import coilside.shot.Wait;
import coilside.signal.Fid;
import coilside.signal.Scan;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;

/** Shots that only receive: what comes back, how much of it, and whether it makes sense. */
final class ReceiveTrials {
  private static final int CAPTURES = 3;
  private static final double BETWEEN_WINDOWS_SECONDS = 1e-3;

  private final DeviceProfile profile;
  private final BoardLimits limits;
  private final GuardedBoard board;
  private final ProfilePlayer player;
  private final Trials trials;

  /** Points of a window that the receive filter takes, as the first capture showed. */
  private int lostPoints;

  private boolean captured;

  ReceiveTrials(DeviceProfile profile, GuardedBoard board, ProfilePlayer player, Trials trials) {
    this.profile = profile;
    this.limits = profile.limits();
    this.board = board;
    this.player = player;
    this.trials = trials;
  }

  void all() {
    captures();
    if (!captured) {
      return;
    }
    windows();
    loop();
    if (!limits.arbitraryShots()) {
      edges();
    }
  }

  /** Receives with the transmitter off, in the middle of the ranges. */
  Shot listening(double rest) {
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
    trials.tryOut(
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
    lostPoints = lost;
    captured = true;
    trials.row(
        tried,
        receive.points() + " points, transmitter off",
        fid.points() + " points and " + lost + " lost to the receive filter",
        Verdict.GOOD);
    boolean varied = false;
    for (int k = 1; k < fid.points() && !varied; k++) {
      varied = fid.re(k) != fid.re(0) || fid.im(k) != fid.im(0);
    }
    trials.row(
        "samples are alive",
        "noise, clear of the rails",
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
    trials.row("byte order and sign", sanity.expected(), sanity.seen(), sanity.verdict());
  }

  private void checksum(int retries) {
    boolean has =
        profile.blocks().checksum().isPresent()
            || profile.framing() instanceof Framing.Cobs cobs && cobs.checksum().isPresent();
    String expected = CAPTURES + " captures, none damaged";
    trials.row(
        "checksum",
        expected,
        has
            ? retries + " damaged"
            : retries
                + " damaged; the profile has no checksum, so damage inside samples goes unseen",
        retries > 0 ? Verdict.BAD : has ? Verdict.GOOD : Verdict.LOOK);
  }

  private List<Step> pair(Receive window) {
    return List.of(new Wait(limits.waitSeconds().snap(BETWEEN_WINDOWS_SECONDS)), window);
  }

  private void windows() {
    if (limits.maxWindows() < 2 || !limits.arbitraryShots()) {
      return;
    }
    List<Step> two = new ArrayList<>();
    two.addAll(pair(small(1)));
    two.addAll(pair(small(2)));
    count("two receive windows", two, 2);
  }

  private void loop() {
    if (!limits.repeatLoops() || limits.maxWindows() < 3 || limits.maxRepeats() < 3) {
      return;
    }
    count("three windows by a repeat", List.of(new Repeat(3, pair(small(1)))), 3);
  }

  /** A window of some points; others differ, so that one taken for another is seen. */
  private Receive small(int times) {
    int points = Math.min(limits.maxPoints(), times * Math.max(limits.minPoints(), 64));
    return new Receive(points, limits.dwellSeconds().snap(10e-6), 0);
  }

  private void count(String tried, List<Step> steps, int windows) {
    Shot base = listening(0);
    Shot shot = new Shot(base.carrierHertz(), base.gainDecibels(), 0, steps);
    List<Integer> wanted =
        shot.flat().stream()
            .filter(Receive.class::isInstance)
            .map(s -> ((Receive) s).points() - lostPoints)
            .toList();
    String expected = windows + " windows of " + texts(wanted) + " points";
    trials.tryOut(
        tried,
        expected,
        () -> {
          Scan scan = board.play(shot);
          List<Integer> seen = scan.windows().stream().map(Fid::points).toList();
          trials.row(
              tried,
              expected,
              seen.size() + " windows of " + texts(seen) + " points",
              seen.equals(wanted) ? Verdict.GOOD : Verdict.BAD);
        });
  }

  private static String texts(List<Integer> numbers) {
    return String.join(", ", numbers.stream().map(String::valueOf).toList());
  }

  /**
   * The edges of a board with fixed commands: it has none that only sets points or dwell time, but
   * it can receive with them.
   */
  private void edges() {
    edge(new Receive(limits.minPoints(), limits.dwellSeconds().snap(10e-6), 0), "fewest points");
    edge(new Receive(limits.maxPoints(), limits.dwellSeconds().min(), 0), "most points");
    edge(new Receive(limits.minPoints(), limits.dwellSeconds().min(), 0), "shortest dwell time");
    edge(new Receive(limits.minPoints(), limits.dwellSeconds().max(), 0), "longest dwell time");
  }

  private void edge(Receive window, String what) {
    String tried =
        String.format(
            Locale.ROOT,
            "%s, %d every %.4g us",
            what,
            window.points(),
            window.dwellSeconds() * 1e6);
    if (window.points() * window.dwellSeconds() > limits.maxReceiveSeconds()) {
      trials.row(tried, "taken", "longer than the profile's receive time allows", Verdict.SKIPPED);
      return;
    }
    Shot base = listening(0);
    trials.tryOut(
        tried,
        "taken",
        () -> {
          Scan scan =
              board.play(new Shot(base.carrierHertz(), base.gainDecibels(), 0, List.of(window)));
          trials.row(tried, "taken", scan.fid().points() + " points came", Verdict.GOOD);
        });
  }
}
