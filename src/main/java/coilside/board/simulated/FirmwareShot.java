package coilside.board.simulated;

import coilside.board.BoardLimits;
import coilside.board.profile.CommandName;
import coilside.board.profile.DeviceProfile;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Repeat;
import coilside.shot.Shot;
import coilside.shot.Step;
import coilside.shot.Wait;
import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Deque;
import java.util.List;
import java.util.Map;

/**
 * The shot in the board's memory: settings and steps as they were told, held against the board's
 * own limits (not the operator's, which the board does not know).
 */
final class FirmwareShot {
  private record Loop(int count, List<Step> outer) {}

  private final BoardLimits limits;
  private final DeviceProfile profile;
  private final Deque<Loop> loops = new ArrayDeque<>();
  private double carrierHertz;
  private double gainDecibels;
  private List<Step> steps = new ArrayList<>();
  private boolean open = true;
  private boolean broken;

  FirmwareShot(DeviceProfile profile) {
    this.profile = profile;
    this.limits = profile.boardLimits();
    reset();
  }

  /** As after switching on. */
  void reset() {
    carrierHertz = limits.carrierHertz().min();
    gainDecibels = limits.gainDecibels().min();
    clear();
  }

  private void clear() {
    steps = new ArrayList<>();
    loops.clear();
    open = true;
    broken = false;
  }

  /** Marks the shot as not to be played: a step of it was refused. */
  void spoil() {
    broken = true;
  }

  /** Carries one building command out. */
  void tell(CommandName command, Map<String, Double> values) throws FirmwareRefusal {
    settings(values);
    switch (command) {
      case BEGIN -> clear();
      case PULSE -> add(pulse(values));
      case WAIT -> add(waiting(values, "wait"));
      case RECEIVE -> add(receive(values));
      case REPEAT -> repeat(values);
      case END_REPEAT -> endRepeat();
      case END -> end();
      default -> {
        // Carrier and gain, done above.
      }
    }
  }

  private void settings(Map<String, Double> values) throws FirmwareRefusal {
    Double carrier = values.get("carrier");
    if (carrier != null) {
      carrierHertz = within("carrier", carrier, limits.carrierHertz(), "Hz");
    }
    Double gain = values.get("gain");
    if (gain != null) {
      gainDecibels = within("gain", gain, limits.gainDecibels(), "dB");
    }
  }

  private void add(Step step) throws FirmwareRefusal {
    if (!open && profile.command(CommandName.BEGIN).isEmpty()) {
      clear();
    }
    if (!open) {
      throw FirmwareRefusal.conflict("the shot has ended");
    }
    if (steps.size() >= limits.maxSteps()) {
      throw FirmwareRefusal.tooMuch("more than " + limits.maxSteps() + " steps");
    }
    steps.add(step);
  }

  private Pulse pulse(Map<String, Double> values) throws FirmwareRefusal {
    double width = within("pulse width", values.get("width"), limits.pulseSeconds(), "s");
    double amplitude = values.getOrDefault("amplitude", limits.amplitude().max());
    // Its grain is that of the code it travels in, not that of the limits.
    if (!limits.amplitude().contains(amplitude)) {
      throw FirmwareRefusal.range(
          "amplitude "
              + amplitude
              + " outside "
              + limits.amplitude().min()
              + ".."
              + limits.amplitude().max());
    }
    return new Pulse(width, values.getOrDefault("phase", 0.0), amplitude);
  }

  private Wait waiting(Map<String, Double> values, String name) throws FirmwareRefusal {
    return new Wait(within(name, values.get(name), limits.waitSeconds(), "s"));
  }

  private Receive receive(Map<String, Double> values) throws FirmwareRefusal {
    double phase = values.getOrDefault("receive_phase", 0.0);
    double dwell = values.getOrDefault("dwell", limits.dwellSeconds().min());
    if (values.containsKey("dwell")) {
      within("dwell", dwell, limits.dwellSeconds(), "s");
    }
    if (profile.samples().real().isPresent()) {
      return realSamples(values, dwell, phase);
    }
    int points = points(values.get("points"));
    receiveTime(points * dwell);
    return new Receive(points, dwell, phase);
  }

  /** A window of real samples, one a "point" of the window that is played. */
  private Receive realSamples(Map<String, Double> values, double dwell, double phase)
      throws FirmwareRefusal {
    double rate = profile.samples().real().orElseThrow().rateHertz();
    double samples =
        values.containsKey("samples")
            ? values.get("samples")
            : points(values.get("points")) * Math.rint(dwell * rate);
    if (!(samples >= 1) || samples != Math.rint(samples)) {
      throw FirmwareRefusal.range("samples " + samples + " below 1");
    }
    receiveTime(samples / rate);
    return new Receive((int) samples, 1 / rate, phase);
  }

  private int points(double points) throws FirmwareRefusal {
    boolean whole = points == Math.rint(points);
    if (!whole || points < limits.minPoints() || points > limits.maxPoints()) {
      throw FirmwareRefusal.range(
          "points " + points + " outside " + limits.minPoints() + ".." + limits.maxPoints());
    }
    return (int) points;
  }

  private void receiveTime(double seconds) throws FirmwareRefusal {
    if (seconds > limits.maxReceiveSeconds() * (1 + 1e-9)) {
      throw FirmwareRefusal.range(
          "receive time " + seconds + " s above " + limits.maxReceiveSeconds() + " s");
    }
  }

  private void repeat(Map<String, Double> values) throws FirmwareRefusal {
    double count = values.get("count");
    if (count < 1 || count > limits.maxRepeats() || count != Math.rint(count)) {
      throw FirmwareRefusal.range("repeat " + count + " outside 1.." + limits.maxRepeats());
    }
    if (!open && profile.command(CommandName.BEGIN).isEmpty()) {
      clear();
    }
    loops.push(new Loop((int) count, steps));
    steps = new ArrayList<>();
  }

  private void endRepeat() throws FirmwareRefusal {
    if (loops.isEmpty() || steps.isEmpty()) {
      throw FirmwareRefusal.conflict("no repeat is open, or it is empty");
    }
    Repeat repeat = new Repeat(loops.peek().count(), steps);
    steps = loops.pop().outer();
    steps.add(repeat);
  }

  private void end() throws FirmwareRefusal {
    if (!loops.isEmpty()) {
      throw FirmwareRefusal.conflict("a repeat is still open");
    }
    open = false;
  }

  /** The shot to play for a run; {@code every} or {@code rest} say how long the board rests. */
  Shot run(Map<String, Double> values) throws FirmwareRefusal {
    settings(values);
    if (broken) {
      throw FirmwareRefusal.conflict("a step of this shot was refused");
    }
    if (steps.isEmpty() || !loops.isEmpty()) {
      throw FirmwareRefusal.conflict("there is no whole shot to play");
    }
    if (open && profile.command(CommandName.END).isPresent()) {
      throw FirmwareRefusal.conflict("the shot has not been ended");
    }
    open = profile.command(CommandName.END).isEmpty() && open;
    Shot shot = new Shot(carrierHertz, gainDecibels, 0, steps);
    long windows = shot.flat().stream().filter(Receive.class::isInstance).count();
    if (windows < 1 || windows > limits.maxWindows()) {
      throw FirmwareRefusal.range("windows " + windows + " outside 1.." + limits.maxWindows());
    }
    double rest = values.getOrDefault("rest", 0.0);
    if (values.containsKey("every")) {
      rest = values.get("every") - shot.playedSeconds();
      // The repetition time is written in steps of its own: half a microsecond short is rounding.
      if (rest < -0.5e-6) {
        throw FirmwareRefusal.conflict(
            "repetition time " + values.get("every") + " s is shorter than the shot");
      }
    }
    if (rest < 0) {
      rest = 0;
    }
    Shot whole = shot.withRest(rest);
    if (!profile.keepsShot()) {
      clear();
    }
    return whole;
  }

  /** The shot of a fixed "pulse then receive" command. */
  Shot fixed(Map<String, Double> values, boolean pulses) throws FirmwareRefusal {
    settings(values);
    List<Step> fixed = new ArrayList<>();
    if (pulses) {
      fixed.add(pulse(values));
      if (values.containsKey("delay")) {
        fixed.add(waiting(values, "delay"));
      }
    }
    fixed.add(receive(values));
    double rest = values.getOrDefault("rest", 0.0);
    if (rest < 0) {
      throw FirmwareRefusal.range("rest " + rest + " s below 0 s");
    }
    return new Shot(carrierHertz, gainDecibels, rest, fixed);
  }

  double gainDecibels() {
    return gainDecibels;
  }

  private static double within(String what, double x, BoardLimits.Range range, String unit)
      throws FirmwareRefusal {
    if (!range.contains(x)) {
      throw FirmwareRefusal.range(
          (what + " " + x + " outside " + range.min() + ".." + range.max() + " " + unit).trim());
    }
    if (range.step() > 0) {
      double steps = x / range.step();
      if (Math.abs(steps - Math.rint(steps)) > 1e-3) {
        throw FirmwareRefusal.range(
            (what + " " + x + " is no multiple of " + range.step() + " " + unit).trim());
      }
    }
    return x;
  }
}
