package coilside.terminal;

import java.io.IOException;
import java.util.function.BooleanSupplier;
import java.util.function.LongSupplier;

/**
 * The drawing loop: takes keys, and draws when something changed, never faster than the line to the
 * terminal can carry. Runs on one thread; only this thread touches the terminal.
 */
final class ScreenLoop {
  /** Waits for a key or until the time is up. */
  interface Pause {
    void upTo(long millis) throws InterruptedException;
  }

  private static final long FRAME_NANOS = 50_000_000L;
  private static final long RUNNING_NANOS = 100_000_000L;
  private static final long IDLE_NANOS = 1_000_000_000L;
  private static final long SETTLE_NANOS = 300_000_000L;
  private static final int KEYS_A_TURN = 200;

  private final Cockpit cockpit;
  private final Watch watch;
  private final Surface surface;
  private final Pause pause;
  private final LongSupplier nanoTime;
  private final LongSupplier bytesWritten;
  private final double bytesASecond;
  private final Runnable suspend;
  private final BooleanSupplier leave;
  private long drawnVersion = -1;
  private long lastFrame;
  private long settleAt;
  private long frameBytes;
  private boolean keyed = true;
  private boolean hungUp;
  private long frames;

  /**
   * @param bytesWritten bytes sent to the terminal so far
   * @param bytesASecond how much the line shall carry on average
   * @param suspend gives the terminal back until the shell returns it
   * @param leave true once a signal asked to leave
   */
  ScreenLoop(
      Cockpit cockpit,
      Watch watch,
      Surface surface,
      Pause pause,
      LongSupplier nanoTime,
      LongSupplier bytesWritten,
      double bytesASecond,
      Runnable suspend,
      BooleanSupplier leave) {
    this.cockpit = cockpit;
    this.watch = watch;
    this.surface = surface;
    this.pause = pause;
    this.nanoTime = nanoTime;
    this.bytesWritten = bytesWritten;
    this.bytesASecond = bytesASecond;
    this.suspend = suspend;
    this.leave = leave;
    lastFrame = nanoTime.getAsLong() - IDLE_NANOS;
  }

  long frames() {
    return frames;
  }

  /** True when the terminal went away under it. */
  boolean hungUp() {
    return hungUp;
  }

  void run() throws IOException, InterruptedException {
    while (!cockpit.done() && !hungUp && !leave.getAsBoolean()) {
      turn();
      pause.upTo(20);
    }
  }

  /** One round: keys that wait, a size that changed, a frame that is due. */
  void turn() throws IOException {
    for (int i = 0; i < KEYS_A_TURN && !cockpit.done(); i++) {
      Key key = surface.poll();
      if (key == null) {
        break;
      }
      if (key.is(Key.Name.HANG_UP)) {
        hungUp = true;
        return;
      }
      cockpit.key(key);
      keyed = true;
    }
    if (cockpit.takeSuspend()) {
      suspend.run();
      cockpit.redraw();
      keyed = true;
    }
    cockpit.tick();
    boolean resized = surface.resize();
    long since = nanoTime.getAsLong() - lastFrame;
    if (resized) {
      settleAt = nanoTime.getAsLong() + SETTLE_NANOS;
    }
    boolean settled = settleAt != 0 && nanoTime.getAsLong() >= settleAt;
    if (resized || settled || due(since)) {
      // The terminal moved its text about by itself: what stands there is not what was sent.
      draw(resized || settled);
    }
    if (settled) {
      settleAt = 0;
    }
  }

  private boolean due(long since) {
    if (since < FRAME_NANOS) {
      return false;
    }
    if (keyed) {
      return true;
    }
    long carried = (long) (frameBytes / bytesASecond * 1e9);
    if (since < carried) {
      return false;
    }
    return watch.version() != drawnVersion
        || since >= (cockpit.running() ? RUNNING_NANOS : IDLE_NANOS);
  }

  private void draw(boolean everything) throws IOException {
    keyed = false;
    lastFrame = nanoTime.getAsLong();
    Snapshot state = watch.snapshot();
    drawnVersion = state.version();
    if (surface.palette().light() != cockpit.look().light) {
      surface.palette(surface.palette().withLight(cockpit.look().light));
    }
    surface.mouse(cockpit.look().mouse);
    long before = bytesWritten.getAsLong();
    surface.show(
        cockpit.frame(surface.width(), surface.height(), state),
        cockpit.takeRedraw() || everything);
    if (cockpit.work().takeBell(state)) {
      surface.bell();
    }
    frameBytes = bytesWritten.getAsLong() - before;
    frames++;
  }
}
