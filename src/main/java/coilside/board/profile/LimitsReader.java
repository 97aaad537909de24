package coilside.board.profile;

import coilside.board.BoardLimits;
import coilside.board.BoardLimits.Range;
import coilside.board.profile.ValueName.Dimension;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalDouble;

/** Reads the board's limits and the operator's, which only ever narrow them. */
final class LimitsReader {
  private static final double LONGEST = 1e5;
  private final Section limits;
  private final Section operator;
  private final double tick;

  LimitsReader(Section limits, Section operator) {
    this.limits = limits;
    this.operator = operator;
    this.tick = limits.quantity("tick", Dimension.TIME, 1e-12, 1, "tick = \"10ns\"").orElse(0);
  }

  double tickSeconds() {
    return tick;
  }

  BoardLimits board(Map<CommandName, Command> commands, SampleFormat samples) {
    Range carrier =
        need(
            "carrier",
            Dimension.FREQUENCY,
            1,
            1e10,
            "carrier = { from = \"1MHz\", to = \"30MHz\", step = \"1Hz\" }");
    Range gain =
        need(
            "gain",
            Dimension.GAIN,
            -60,
            160,
            "gain = { from = \"0dB\", to = \"60dB\", step = \"2dB\" }");
    Range pulse =
        need(
            "pulse",
            Dimension.TIME,
            1e-9,
            10,
            "pulse = { from = \"1us\", to = \"500us\", step = \"0.1us\" }");
    Range amplitude =
        limits
            .range(
                "amplitude",
                Dimension.FRACTION,
                0,
                1,
                "amplitude = { from = 0, to = 1, step = 0.001 }")
            .orElse(new Range(0, 1, 0));
    Range wait =
        need(
            "wait",
            Dimension.TIME,
            0,
            LONGEST,
            "wait = { from = \"1us\", to = \"100s\", step = \"0.1us\" }");
    Range dwell =
        need(
            "dwell",
            Dimension.TIME,
            1e-9,
            1,
            "dwell = { from = \"0.5us\", to = \"1ms\", step = \"0.1us\" }");
    Range points =
        need("points", Dimension.COUNT, 1, 1 << 22, "points = { from = 16, to = 65536 }");
    boolean fixed = commands.containsKey(CommandName.PULSE_AND_RECEIVE);
    int windows = limits.whole("windows", 1, 65_536, 1);
    if (fixed && windows > 1) {
      limits.problem("windows", "1 with pulse_and_receive", "windows = 1");
    }
    int steps = limits.whole("steps", 1, 1 << 20, 1024);
    int repeats = limits.whole("repeats", 1, Integer.MAX_VALUE, 65_535);
    double receive =
        limits
            .quantity("receive_time", Dimension.TIME, 1e-6, LONGEST, "receive_time = \"10s\"")
            .orElse(LONGEST);
    double duty = limits.number("duty_cycle", 1e-6, 1, 1);
    if (!limits.has("duty_cycle")) {
      limits.missing(
          "duty_cycle", "the largest share of time the transmitter may be on", "duty_cycle = 0.05");
    }
    double dutyWindow =
        limits
            .quantity("duty_window", Dimension.TIME, 1e-3, 3600, "duty_window = \"1s\"")
            .orElse(1);
    samples
        .real()
        .ifPresent(
            r -> {
              double perStep = dwell.step() * r.rateHertz();
              if (dwell.step() == 0 || Math.abs(perStep - Math.rint(perStep)) > 1e-6) {
                limits.problem(
                    "dwell",
                    "a step of a whole number of samples at samples.rate",
                    "step = \"" + 1e6 / r.rateHertz() + "us\"");
              }
            });
    return new BoardLimits(
        carrier,
        gain,
        pulse,
        amplitude,
        wait,
        dwell,
        (int) points.min(),
        (int) points.max(),
        windows,
        steps,
        repeats,
        receive,
        duty,
        dutyWindow,
        !fixed,
        commands.values().stream().anyMatch(c -> c.template().mentions(ValueName.PHASE)),
        commands.containsKey(CommandName.REPEAT),
        commands.values().stream().anyMatch(c -> c.template().mentions(ValueName.RECEIVE_PHASE)),
        commands.containsKey(CommandName.TEMPERATURE));
  }

  private Range need(String key, Dimension dimension, double least, double most, String example) {
    return limits
        .requiredRange(key, dimension, least, most, example)
        .orElse(new Range(least, most, 0));
  }

  BoardLimits narrowed(BoardLimits b) {
    Range carrier =
        narrow(
            "carrier",
            Dimension.FREQUENCY,
            1,
            1e10,
            b.carrierHertz(),
            "carrier = { from = \"7.5MHz\", to = \"8.5MHz\" }");
    Range gain =
        narrow("gain", Dimension.GAIN, -60, 160, b.gainDecibels(), "gain = { to = \"40dB\" }");
    Range pulse =
        narrow("pulse", Dimension.TIME, 1e-9, 10, b.pulseSeconds(), "pulse = { to = \"200us\" }");
    OptionalDouble most =
        operator.quantity("amplitude_limit", Dimension.FRACTION, 0, 1, "amplitude_limit = 0.8");
    Range amplitude = b.amplitude();
    if (most.isPresent() && most.getAsDouble() < amplitude.min()) {
      operator.problem(
          "amplitude_limit",
          "at least " + amplitude.min() + ", the board's lowest",
          "amplitude_limit = " + amplitude.max());
    } else if (most.isPresent()) {
      amplitude = amplitude.narrowedBy(new Range(amplitude.min(), most.getAsDouble(), 0));
    }
    double duty = Math.min(b.maxDutyCycle(), operator.number("duty_cycle", 1e-6, 1, 1));
    double receive =
        Math.min(
            b.maxReceiveSeconds(),
            operator
                .quantity("receive_time", Dimension.TIME, 1e-6, LONGEST, "receive_time = \"2s\"")
                .orElse(LONGEST));
    return new BoardLimits(
        carrier,
        gain,
        pulse,
        amplitude,
        b.waitSeconds(),
        b.dwellSeconds(),
        b.minPoints(),
        b.maxPoints(),
        b.maxWindows(),
        b.maxSteps(),
        b.maxRepeats(),
        receive,
        duty,
        b.dutyWindowSeconds(),
        b.arbitraryShots(),
        b.pulsePhases(),
        b.repeatLoops(),
        b.settableReceivePhase(),
        b.reportsTemperature());
  }

  private Range narrow(
      String key, Dimension dimension, double least, double most, Range board, String example) {
    Optional<Range> mine = operator.range(key, dimension, least, most, example);
    if (mine.isEmpty()) {
      return board;
    }
    if (mine.get().min() > board.max() || mine.get().max() < board.min()) {
      operator.problem(
          key, "something within the board's own " + board.min() + " to " + board.max(), example);
      return board;
    }
    return board.narrowedBy(mine.get());
  }

  OperatorSection operator(BoardLimits narrowed) {
    String coil =
        operator.text("coil", "a note on coil and tuning", "coil = \"10 mm solenoid\"").orElse("");
    Optional<Range> resonance =
        operator.range(
            "resonance",
            Dimension.FREQUENCY,
            1,
            1e10,
            "resonance = { from = \"7.9MHz\", to = \"8.3MHz\" }");
    if (resonance.isPresent()
        && (!narrowed.carrierHertz().contains(resonance.get().min())
            || !narrowed.carrierHertz().contains(resonance.get().max())
            || resonance.get().min() >= resonance.get().max())) {
      operator.problem(
          "resonance",
          "a range within the carrier's "
              + narrowed.carrierHertz().min()
              + " Hz to "
              + narrowed.carrierHertz().max()
              + " Hz",
          "resonance = { from = \"7.9MHz\", to = \"8.3MHz\" }");
    }
    double amplitude =
        operator
            .quantity("amplitude", Dimension.FRACTION, 1e-6, 1, "amplitude = 0.5")
            .orElse(narrowed.amplitude().max());
    if (!narrowed.amplitude().contains(amplitude)) {
      operator.problem(
          "amplitude",
          "from " + narrowed.amplitude().min() + " to " + narrowed.amplitude().max(),
          "amplitude = " + narrowed.amplitude().max());
    }
    return new OperatorSection(
        coil,
        resonance.map(r -> OptionalDouble.of(r.min())).orElse(OptionalDouble.empty()),
        resonance.map(r -> OptionalDouble.of(r.max())).orElse(OptionalDouble.empty()),
        amplitude);
  }
}
