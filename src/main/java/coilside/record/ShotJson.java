package coilside.record;

import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Repeat;
import coilside.shot.Shot;
import coilside.shot.Step;
import coilside.shot.Wait;
import com.google.gson.JsonArray;
import com.google.gson.JsonObject;
import java.util.ArrayList;
import java.util.List;

/** Shots in and out of metadata, complete: what is read equals what was written. */
final class ShotJson {
  private static final int MAX_DEPTH = 16;
  private static final int MAX_STEPS = 100_000;
  private static final long MAX_PLAYED_STEPS = 10_000_000;

  private ShotJson() {}

  static JsonObject write(Shot shot) {
    JsonObject out = new JsonObject();
    out.add("carrier_hertz", Numbers.json(shot.carrierHertz()));
    out.add("gain_decibels", Numbers.json(shot.gainDecibels()));
    out.add("rest_seconds", Numbers.json(shot.restSeconds()));
    out.add("steps", write(shot.steps()));
    return out;
  }

  private static JsonArray write(List<Step> steps) {
    JsonArray out = new JsonArray();
    for (Step step : steps) {
      JsonObject o = new JsonObject();
      if (step instanceof Pulse pulse) {
        o.addProperty("step", "pulse");
        o.add("seconds", Numbers.json(pulse.seconds()));
        o.add("phase_radians", Numbers.json(pulse.phaseRadians()));
        o.add("amplitude", Numbers.json(pulse.amplitude()));
      } else if (step instanceof Wait wait) {
        o.addProperty("step", "wait");
        o.add("seconds", Numbers.json(wait.seconds()));
      } else if (step instanceof Receive receive) {
        o.addProperty("step", "receive");
        o.addProperty("points", receive.points());
        o.add("dwell_seconds", Numbers.json(receive.dwellSeconds()));
        o.add("phase_radians", Numbers.json(receive.phaseRadians()));
      } else if (step instanceof Repeat repeat) {
        o.addProperty("step", "repeat");
        o.addProperty("count", repeat.count());
        o.add("steps", write(repeat.steps()));
      } else {
        throw new IllegalStateException("a kind of step without a written form: " + step);
      }
      out.add(o);
    }
    return out;
  }

  static Shot read(Node node) throws CaptureException {
    List<Step> steps = steps(node.list("steps", MAX_STEPS), 0);
    requirePlayable(node, steps);
    try {
      return new Shot(
          node.number("carrier_hertz"),
          node.number("gain_decibels"),
          node.number("rest_seconds"),
          steps);
    } catch (IllegalArgumentException e) {
      throw node.wrong(e.getMessage());
    }
  }

  private static List<Step> steps(List<Node> nodes, int depth) throws CaptureException {
    List<Step> out = new ArrayList<>();
    for (Node node : nodes) {
      if (depth > MAX_DEPTH) {
        throw node.wrong("repeats lie more than " + MAX_DEPTH + " deep");
      }
      String kind = node.text("step");
      try {
        switch (kind) {
          case "pulse" ->
              out.add(
                  new Pulse(
                      node.number("seconds"),
                      node.number("phase_radians"),
                      node.number("amplitude")));
          case "wait" -> out.add(new Wait(node.number("seconds")));
          case "receive" ->
              out.add(
                  new Receive(
                      node.integer("points", 1, Integer.MAX_VALUE),
                      node.number("dwell_seconds"),
                      node.number("phase_radians")));
          case "repeat" ->
              out.add(
                  new Repeat(
                      node.integer("count", 1, Integer.MAX_VALUE),
                      steps(node.list("steps", MAX_STEPS), depth + 1)));
          default -> throw node.wrong("'" + Words.oneLine(kind, 40) + "' is no kind of step");
        }
      } catch (IllegalArgumentException e) {
        throw node.wrong(e.getMessage());
      }
    }
    return out;
  }

  /** Repeats within repeats multiply: bounded before anybody writes them out. */
  private static void requirePlayable(Node node, List<Step> steps) throws CaptureException {
    double played = played(steps);
    if (played > MAX_PLAYED_STEPS) {
      throw node.wrong("a shot that plays " + played + " steps; the limit is " + MAX_PLAYED_STEPS);
    }
  }

  private static double played(List<Step> steps) {
    double sum = 0;
    for (Step step : steps) {
      sum += step instanceof Repeat r ? r.count() * played(r.steps()) : 1;
    }
    return sum;
  }
}
