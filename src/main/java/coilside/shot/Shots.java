package coilside.shot;

import coilside.shot.PhaseCycle.Phases;
import java.util.ArrayList;
import java.util.List;

/**
 * The usual experiments as shots. Times between pulses are from centre to centre; the widths are
 * taken off the waits. Nothing is rounded to a board's grain here.
 *
 * <p>Refocusing pulses stand a quarter turn from the exciting one (S. Meiboom and D. Gill, Rev.
 * Sci. Instrum. 29, 688-691, 1958).
 */
public final class Shots {
  private static final double QUARTER = Math.PI / 2;

  private Shots() {}

  /** Settings that every scan has: carrier, Hz; gain, dB; rest before the first step, s. */
  public record Frame(double carrierHertz, double gainDecibels, double restSeconds) {
    Shot shot(List<Step> steps) {
      return new Shot(carrierHertz, gainDecibels, restSeconds, steps);
    }
  }

  /** Widths for 90 and 180 degrees, s, at this amplitude (0..1). */
  public record Widths(double seconds90, double seconds180, double amplitude) {
    /** Both from the 90-degree width. */
    public static Widths of90(double seconds90, double amplitude) {
      return new Widths(seconds90, 2 * seconds90, amplitude);
    }

    Pulse excite(double phase) {
      return new Pulse(seconds90, phase, amplitude);
    }

    Pulse flip(double phase) {
      return new Pulse(seconds180, phase, amplitude);
    }
  }

  /** A receive window that opens {@code delaySeconds} after the end of the last pulse. */
  public record Window(double delaySeconds, int points, double dwellSeconds) {
    double seconds() {
      return points * dwellSeconds;
    }

    void add(List<Step> steps, double phase) {
      pause(steps, delaySeconds, "receive delay");
      steps.add(new Receive(points, dwellSeconds, phase));
    }
  }

  /** One pulse of any width, then receive. */
  public static Shot single(
      Frame frame, double pulseSeconds, double amplitude, Window window, Phases phases) {
    List<Step> steps = new ArrayList<>();
    steps.add(new Pulse(pulseSeconds, phases.excite(), amplitude));
    window.add(steps, phases.receive());
    return frame.shot(steps);
  }

  /** Receive with the transmitter off. */
  public static Shot receiveOnly(Frame frame, int points, double dwellSeconds, double phase) {
    return frame.shot(List.of(new Receive(points, dwellSeconds, phase)));
  }

  /** 180 degrees, the recovery time, 90 degrees, receive. */
  public static Shot inversionRecovery(
      Frame frame, Widths widths, double recoverySeconds, Window window, Phases phases) {
    List<Step> steps = new ArrayList<>();
    steps.add(widths.flip(phases.flip()));
    pause(
        steps,
        recoverySeconds - (widths.seconds180() + widths.seconds90()) / 2,
        "recovery time between the pulses");
    steps.add(widths.excite(phases.excite()));
    window.add(steps, phases.receive());
    return frame.shot(steps);
  }

  /**
   * A comb of 90-degree pulses that destroys the magnetisation, the recovery time, 90 degrees,
   * receive. The waits in the comb grow by a half each time, so that no echo of one falls on the
   * next; give a first wait of several T2*.
   *
   * @param comb number of saturating pulses, &gt;= 1
   * @param spoilSeconds first wait between comb pulses, s
   */
  public static Shot saturationRecovery(
      Frame frame,
      Widths widths,
      int comb,
      double spoilSeconds,
      double recoverySeconds,
      Window window,
      Phases phases) {
    if (comb < 1) {
      throw new IllegalArgumentException("a comb of " + comb + " pulses saturates nothing");
    }
    List<Step> steps = new ArrayList<>();
    double spoil = spoilSeconds;
    for (int i = 0; i < comb; i++) {
      steps.add(widths.excite(phases.excite() + i * QUARTER));
      if (i + 1 < comb) {
        pause(steps, spoil - widths.seconds90(), "wait in the saturating comb");
        spoil *= 1.5;
      }
    }
    pause(steps, recoverySeconds - widths.seconds90(), "recovery time between the pulses");
    steps.add(widths.excite(phases.excite()));
    window.add(steps, phases.receive());
    return frame.shot(steps);
  }

  /**
   * 90 degrees, half the echo time, 180 degrees, and a receive window with the echo at sample
   * {@code points / 2}.
   */
  public static Shot echo(
      Frame frame,
      Widths widths,
      double echoSeconds,
      int points,
      double dwellSeconds,
      Phases phases) {
    return echoTrain(frame, widths, echoSeconds, 1, points, dwellSeconds, phases);
  }

  /**
   * An echo train: 90 degrees, then {@code echoes} times 180 degrees with a receive window each,
   * the echo at sample {@code points / 2} of it.
   *
   * @param spacingSeconds from echo to echo, and from refocusing pulse to refocusing pulse, s
   */
  public static Shot echoTrain(
      Frame frame,
      Widths widths,
      double spacingSeconds,
      int echoes,
      int points,
      double dwellSeconds,
      Phases phases) {
    double half = spacingSeconds / 2;
    double before = half - widths.seconds180() / 2 - points / 2 * dwellSeconds;
    double after = half - widths.seconds180() / 2 - (points - points / 2) * dwellSeconds;
    List<Step> steps = new ArrayList<>();
    steps.add(widths.excite(phases.excite()));
    pause(
        steps,
        half - (widths.seconds90() + widths.seconds180()) / 2,
        "wait between the 90- and the 180-degree pulse");
    List<Step> one = new ArrayList<>();
    one.add(widths.flip(phases.flip() + QUARTER));
    pause(one, before, "wait between pulse and window");
    one.add(new Receive(points, dwellSeconds, phases.receive()));
    if (echoes > 1) {
      pause(one, after, "wait between window and pulse");
      steps.add(new Repeat(echoes, one));
    } else {
      steps.addAll(one);
    }
    return frame.shot(steps);
  }

  private static void pause(List<Step> steps, double seconds, String what) {
    if (!(seconds >= 0)) {
      throw new IllegalArgumentException(
          "the "
              + what
              + " would be "
              + seconds
              + " s: pulses and window do not fit into the times asked for; lengthen these");
    }
    if (seconds > 0) {
      steps.add(new Wait(seconds));
    }
  }
}
