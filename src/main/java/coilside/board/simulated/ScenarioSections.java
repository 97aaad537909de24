package coilside.board.simulated;

import static coilside.board.simulated.ScenarioUnit.ANGLE;
import static coilside.board.simulated.ScenarioUnit.COEFFICIENT;
import static coilside.board.simulated.ScenarioUnit.DRIFT;
import static coilside.board.simulated.ScenarioUnit.FREQUENCY;
import static coilside.board.simulated.ScenarioUnit.NOISE_DENSITY;
import static coilside.board.simulated.ScenarioUnit.NUMBER;
import static coilside.board.simulated.ScenarioUnit.TEMPERATURE;
import static coilside.board.simulated.ScenarioUnit.TEMPERATURE_STEP;
import static coilside.board.simulated.ScenarioUnit.TIME;
import static coilside.board.simulated.ScenarioUnit.VOLTAGE;

import coilside.board.profile.ProfileProblem;
import coilside.board.simulated.Scenario.Coil;
import coilside.board.simulated.Scenario.Component;
import coilside.board.simulated.Scenario.Interference;
import coilside.board.simulated.Scenario.Magnet;
import coilside.board.simulated.Scenario.Receiver;
import coilside.board.simulated.Scenario.Sample;
import coilside.board.simulated.Scenario.Shape;
import coilside.board.simulated.Scenario.TemperatureCourse;
import coilside.board.simulated.Scenario.Transmitter;
import java.util.ArrayList;
import java.util.List;

/** The tables of a scenario file one by one; what they give counts only when no problem came up. */
final class ScenarioSections {
  private static final int MOST_COMPONENTS = 8;
  private static final double HIGHEST = 500e6;

  private final List<ProfileProblem> problems;

  ScenarioSections(List<ProfileProblem> problems) {
    this.problems = problems;
  }

  /** The scenario; null when there are problems. */
  Scenario scenario(ScenarioTable top) {
    String name = top.text("name", null, 64);
    String note = top.text("note", "", 200);
    Sample sample = sample(top.table("sample"));
    Magnet magnet = magnet(top.table("magnet"));
    Coil coil = coil(top.table("coil"));
    Transmitter transmitter = transmitter(top.table("transmitter"));
    Receiver receiver = receiver(top.table("receiver"));
    List<Interference> lines = new ArrayList<>();
    for (ScenarioTable t : top.tables("interference")) {
      lines.add(
          new Interference(
              t.required("frequency", FREQUENCY, 1, HIGHEST, "\"8.1MHz\""),
              t.required("amplitude", VOLTAGE, 0, 1, "\"1uV\"")));
      t.complainAboutTheRest();
    }
    top.complainAboutTheRest();
    return problems.isEmpty()
        ? new Scenario(name, note, sample, magnet, coil, transmitter, receiver, lines)
        : null;
  }

  private Sample sample(ScenarioTable t) {
    double signal = t.required("signal", VOLTAGE, 0, 1, "\"50uV\"");
    double phase = t.optional("phase", ANGLE, -10, 10, "\"35deg\"", 0);
    List<Component> components = new ArrayList<>();
    List<ScenarioTable> tables = t.tables("component");
    if (tables.isEmpty() || tables.size() > MOST_COMPONENTS) {
      t.problem("component", "1 to " + MOST_COMPONENTS + " tables", "[[sample.component]]");
    }
    for (ScenarioTable c : tables) {
      double fraction = c.required("fraction", NUMBER, 1e-6, 1e6, "1");
      double t1 = c.required("t1", TIME, 1e-6, 1e4, "\"120ms\"");
      double t2 = c.required("t2", TIME, 1e-6, 1e4, "\"110ms\"");
      double shift = c.optional("shift", FREQUENCY, -1e6, 1e6, "\"5Hz\"", 0);
      if (t2 > 2 * t1) {
        c.problem("t2", "at most twice t1", "t2 = \"" + t1 + "s\"");
      }
      c.complainAboutTheRest();
      if (problems.isEmpty()) {
        components.add(new Component(fraction, t1, t2, shift));
      }
    }
    t.complainAboutTheRest();
    return problems.isEmpty() ? new Sample(signal, phase, components) : null;
  }

  private static Magnet magnet(ScenarioTable t) {
    double larmor = t.required("larmor", FREQUENCY, 1e3, HIGHEST, "\"8.0895MHz\"");
    double reference = t.optional("reference", TEMPERATURE, -50, 150, "\"25degC\"", 25);
    double coefficient = t.optional("coefficient", COEFFICIENT, -0.01, 0.01, "\"-400ppm/K\"", 0);
    Shape shape = t.choice("shape", Shape.class, Shape.LORENTZIAN);
    double width = t.required("width", FREQUENCY, 0, 1e6, "\"50Hz\"");
    double mains = t.optional("mains", FREQUENCY, 1, 1e4, "\"50Hz\"", 50);
    double swing = t.optional("mains_swing", FREQUENCY, 0, 1e4, "\"3Hz\"", 0);
    ScenarioTable course = t.table("temperature");
    TemperatureCourse temperature =
        new TemperatureCourse(
            course.optional("start", TEMPERATURE, -50, 150, "\"25degC\"", reference),
            course.optional("drift", DRIFT, -1, 1, "\"0.02K/h\"", 0),
            course.optional("swing", TEMPERATURE_STEP, 0, 50, "\"0.1K\"", 0),
            course.optional("period", TIME, 1, 1e6, "\"8min\"", 3600));
    course.complainAboutTheRest();
    t.complainAboutTheRest();
    return new Magnet(larmor, reference, coefficient, shape, width, mains, swing, temperature);
  }

  private static Coil coil(ScenarioTable t) {
    Coil coil =
        new Coil(
            t.required("tuned", FREQUENCY, 1e3, HIGHEST, "\"8.09MHz\""),
            t.required("quality", NUMBER, 1, 1e5, "254"),
            t.optional("ring", VOLTAGE, 0, 100, "\"5mV\"", 0),
            t.optional("b1_spread", NUMBER, 0, 0.2, "0.02", 0));
    t.complainAboutTheRest();
    return coil;
  }

  private static Transmitter transmitter(ScenarioTable t) {
    Transmitter transmitter =
        new Transmitter(
            t.required("pulse_90", TIME, 1e-8, 0.1, "\"20us\""),
            t.optional("compression", NUMBER, 0, 0.4, "0.1", 0),
            t.flag("dead"));
    t.complainAboutTheRest();
    return transmitter;
  }

  private static Receiver receiver(ScenarioTable t) {
    Receiver receiver =
        new Receiver(
            t.required("noise", NOISE_DENSITY, 0, 1, "\"1nV/Hz^0.5\""),
            t.optional("rail", VOLTAGE, 1e-6, 1e3, "\"2V\"", Double.POSITIVE_INFINITY),
            t.optional("offset_i", VOLTAGE, -100, 100, "\"3mV\"", 0),
            t.optional("offset_q", VOLTAGE, -100, 100, "\"-2mV\"", 0),
            t.optional("gain_error", NUMBER, -0.5, 0.5, "0.01", 0),
            t.optional("phase_error", ANGLE, -0.5, 0.5, "\"0.5deg\"", 0),
            t.flag("swapped"));
    t.complainAboutTheRest();
    return receiver;
  }
}
