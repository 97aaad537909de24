package coilside.board;

import coilside.board.BoardException.BadAnswer;
import coilside.board.BoardException.OverLimit;
import coilside.board.BoardException.Stopped;
import coilside.shot.Shot;
import coilside.signal.Scan;
import java.util.Objects;
import java.util.OptionalDouble;
import java.util.concurrent.atomic.AtomicInteger;
import java.util.function.LongSupplier;

/**
 * The guard: the only way to a transmitting board. Every shot is put on the board's grain, held
 * against the limits and the duty cycle over a rolling window, and refused while the board is not
 * armed, before a byte leaves. On any error the board is told to stop.
 *
 * <p>A scan whose samples came back damaged is played again, a bounded number of times, and every
 * repetition passes the guard like the first.
 *
 * <p>{@link #play}, {@link #temperature} from one thread at a time; the rest from any.
 */
public final class GuardedBoard implements Board {
  /** How often a damaged scan is played again. */
  public static final int MOST_RETRIES = 2;

  private final ShotPlayer player;
  private final BoardLimits limits;
  private final LongSupplier nanoClock;
  private final boolean requiresArming;
  private final DutyLedger ledger;
  private volatile boolean armed;
  private volatile boolean closed;
  private final AtomicInteger stops = new AtomicInteger();

  /**
   * @param player what plays the shots
   * @param limits the board's limits narrowed by the operator's
   * @param nanoClock time for the duty cycle, ns from any origin, such as System::nanoTime
   * @param requiresArming true for a real board, which starts disarmed; false for a simulated one,
   *     which is always armed
   */
  public GuardedBoard(
      ShotPlayer player, BoardLimits limits, LongSupplier nanoClock, boolean requiresArming) {
    this.player = Objects.requireNonNull(player, "player");
    this.limits = Objects.requireNonNull(limits, "limits");
    this.nanoClock = Objects.requireNonNull(nanoClock, "nanoClock");
    this.requiresArming = requiresArming;
    this.armed = !requiresArming;
    this.ledger = new DutyLedger(limits.dutyWindowSeconds());
  }

  @Override
  public BoardIdentity identity() {
    return player.identity();
  }

  @Override
  public BoardLimits limits() {
    return limits;
  }

  @Override
  public boolean armed() {
    return armed;
  }

  @Override
  public void arm() {
    armed = true;
  }

  @Override
  public void disarm() {
    armed = !requiresArming;
  }

  /** The shot as it would be played: every value on the board's grain. */
  public Shot asPlayed(Shot shot) {
    return ShotGrid.onGrid(shot, limits);
  }

  @Override
  public Scan play(Shot shot) throws BoardException {
    int retries = 0;
    int stopsBefore = stops.get();
    while (true) {
      ClearedShot cleared = clear(shot);
      boolean played = false;
      try {
        Scan scan = player.play(cleared);
        played = true;
        return retries == 0 ? scan : withRetries(scan, scan.retries() + retries);
      } catch (BadAnswer damaged) {
        if (retries >= MOST_RETRIES) {
          throw new BadAnswer(
              damaged.getMessage() + " The scan was tried " + (retries + 1) + " times in vain.");
        }
        if (stops.get() != stopsBefore) {
          throw new Stopped("stopped while a damaged scan was about to be played again");
        }
        retries++;
      } finally {
        if (!played) {
          player.stop();
        }
      }
    }
  }

  private ClearedShot clear(Shot wanted) throws BoardException {
    if (closed) {
      throw new Stopped("the board has been closed; open it again");
    }
    ShotCheck.check(wanted, limits);
    Shot shot = asPlayed(wanted);
    ShotCheck.check(shot, limits);
    if (!shot.receiveOnly() && !armed) {
      throw new OverLimit(
          "the board is not armed, so no pulse may be sent; check coil, load and surroundings, then"
              + " arm it. Nothing was sent.");
    }
    double now = nanoClock.getAsLong() * 1e-9;
    double share = ledger.worstShare(shot, now);
    if (share > limits.maxDutyCycle() * (1 + 1e-9)) {
      throw new OverLimit(
          "the transmitter would be on for "
              + ShotCheck.text(Math.rint(share * 1e5) / 1e3)
              + " % of "
              + ShotCheck.text(limits.dutyWindowSeconds())
              + " s, over the limit of "
              + ShotCheck.text(limits.maxDutyCycle() * 100)
              + " %; take a longer repetition time, shorter pulses or fewer of them. Nothing was"
              + " sent.");
    }
    ledger.charge(shot, now);
    return new ClearedShot(shot);
  }

  private static Scan withRetries(Scan scan, int retries) {
    return new Scan(
        scan.windows(),
        scan.peakFraction(),
        scan.clippedSamples(),
        scan.started(),
        scan.restSeconds(),
        scan.temperatureCelsius(),
        retries);
  }

  @Override
  public OptionalDouble temperature() throws BoardException {
    return player.temperature();
  }

  @Override
  public void stop() {
    stops.incrementAndGet();
    player.stop();
  }

  @Override
  public void close() {
    closed = true;
    stops.incrementAndGet();
    player.stop();
    player.close();
  }
}
