package coilside.record;

import coilside.bench.Capture;
import coilside.bench.Conditions;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.shot.Step;
import coilside.signal.Fid;
import coilside.signal.Scan;
import com.google.gson.Gson;
import com.google.gson.GsonBuilder;
import com.google.gson.JsonArray;
import com.google.gson.JsonElement;
import com.google.gson.JsonObject;
import java.time.Instant;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.TreeMap;

/**
 * The metadata file of a capture: SigMF 1.2.6 core fields and the extension namespace {@code
 * coilside}, which {@code captures/coilside.sigmf-ext.md} describes. {@link CaptureReader} reads
 * it.
 */
final class CaptureMetadata {
  static final String SIGMF_VERSION = "1.2.6";
  static final String EXTENSION = "coilside";
  static final String EXTENSION_VERSION = "1.0.0";
  private static final double NANOSECONDS = 1e9;
  private static final Gson GSON =
      new GsonBuilder().disableHtmlEscaping().setPrettyPrinting().create();

  private CaptureMetadata() {}

  static String text(Capture capture, String sha512) {
    JsonObject root = new JsonObject();
    root.add("global", global(capture, sha512));
    JsonArray segments = new JsonArray();
    JsonArray annotations = new JsonArray();
    long sample = 0;
    for (int i = 0; i < capture.scans().size(); i++) {
      Scan scan = capture.scans().get(i);
      List<Instant> starts = windowStarts(capture.shots().get(i), scan);
      for (int w = 0; w < scan.windows().size(); w++) {
        Fid fid = scan.windows().get(w);
        segments.add(segment(fid, i, w, sample, starts.get(w)));
        annotations.add(annotation(fid, i, w, sample, scan));
        sample += fid.points();
      }
    }
    root.add("captures", segments);
    root.add("annotations", annotations);
    return GSON.toJson(root) + "\n";
  }

  private static JsonObject global(Capture capture, String sha512) {
    JsonObject global = new JsonObject();
    global.addProperty("core:datatype", CaptureData.DATATYPE);
    commonRate(capture, global);
    global.addProperty("core:version", SIGMF_VERSION);
    global.addProperty("core:sha512", sha512);
    global.addProperty(
        "core:description",
        Words.oneLine(capture.purpose() + ": " + capture.conditions().sample(), 500));
    global.addProperty("core:hw", Words.oneLine(capture.board(), 500));
    global.addProperty("core:recorder", "coilside");
    JsonObject extension = new JsonObject();
    extension.addProperty("name", EXTENSION);
    extension.addProperty("version", EXTENSION_VERSION);
    extension.addProperty("optional", true);
    JsonArray extensions = new JsonArray();
    extensions.add(extension);
    global.add("core:extensions", extensions);

    global.addProperty("coilside:purpose", capture.purpose());
    global.addProperty("coilside:started", Words.utc(capture.started()));
    global.addProperty("coilside:board", capture.board());
    global.addProperty("coilside:simulated", capture.simulated());
    global.add("coilside:conditions", conditions(capture.conditions()));
    JsonObject settings = new JsonObject();
    new TreeMap<>(capture.settings()).forEach(settings::addProperty);
    global.add("coilside:settings", settings);
    shotsAndScans(capture, global);
    return global;
  }

  /** The sample rate is a global field: given only where all windows share it. */
  private static void commonRate(Capture capture, JsonObject global) {
    double[] dwells =
        capture.scans().stream()
            .flatMap(s -> s.windows().stream())
            .mapToDouble(Fid::dwellSeconds)
            .distinct()
            .toArray();
    if (dwells.length == 1) {
      global.addProperty("core:sample_rate", 1 / dwells[0]);
    }
  }

  private static JsonObject conditions(Conditions c) {
    JsonObject out = new JsonObject();
    out.addProperty("board", c.board());
    out.addProperty("profile_sha256", c.profileDigest());
    out.add("carrier_hertz", Numbers.json(c.carrierHertz()));
    out.add("amplitude", Numbers.json(c.amplitude()));
    out.add("gain_decibels", Numbers.json(c.gainDecibels()));
    out.addProperty("sample", c.sample());
    out.addProperty("coil", c.coil());
    if (c.temperatureCelsius().isPresent()) {
      out.add("temperature_celsius", Numbers.json(c.temperatureCelsius().getAsDouble()));
    }
    return out;
  }

  /** Shots are written once each, however many scans played them. */
  private static void shotsAndScans(Capture capture, JsonObject global) {
    Map<Shot, Integer> numbers = new LinkedHashMap<>();
    JsonArray scans = new JsonArray();
    for (int i = 0; i < capture.scans().size(); i++) {
      Scan scan = capture.scans().get(i);
      int shot = numbers.computeIfAbsent(capture.shots().get(i), key -> numbers.size());
      JsonObject out = new JsonObject();
      out.addProperty("shot", shot);
      out.addProperty("started", Words.utc(scan.started()));
      out.add("rest_seconds", Numbers.json(scan.restSeconds()));
      out.add("peak_fraction", Numbers.json(scan.peakFraction()));
      out.addProperty("clipped_samples", scan.clippedSamples());
      out.addProperty("retries", scan.retries());
      if (scan.temperatureCelsius().isPresent()) {
        out.add("temperature_celsius", Numbers.json(scan.temperatureCelsius().getAsDouble()));
      }
      scans.add(out);
    }
    JsonArray shots = new JsonArray();
    numbers.keySet().forEach(shot -> shots.add(ShotJson.write(shot)));
    global.add("coilside:shots", shots);
    global.add("coilside:scans", scans);
  }

  private static JsonElement segment(Fid fid, int scan, int window, long sample, Instant start) {
    JsonObject out = new JsonObject();
    out.addProperty("core:sample_start", sample);
    out.add("core:frequency", Numbers.json(fid.carrierHertz()));
    out.addProperty("core:datetime", Words.utc(start));
    out.addProperty("coilside:scan", scan);
    out.addProperty("coilside:window", window);
    out.addProperty("coilside:points", fid.points());
    out.add("coilside:dwell_seconds", Numbers.json(fid.dwellSeconds()));
    out.add("coilside:start_seconds", Numbers.json(fid.startSeconds()));
    return out;
  }

  private static JsonElement annotation(Fid fid, int scan, int window, long sample, Scan s) {
    JsonObject out = new JsonObject();
    out.addProperty("core:sample_start", sample);
    out.addProperty("core:sample_count", fid.points());
    double half = fid.widthHertz() / 2;
    out.add("core:freq_lower_edge", Numbers.json(fid.carrierHertz() - half));
    out.add("core:freq_upper_edge", Numbers.json(fid.carrierHertz() + half));
    out.addProperty("core:label", label(scan, window));
    out.addProperty("core:generator", "coilside");
    if (s.clippedSamples() > 0) {
      out.addProperty("core:comment", s.clippedSamples() + " components at the ADC's rails");
    }
    return out;
  }

  /** At most the 20 characters the standard recommends. */
  private static String label(int scan, int window) {
    String label = "scan " + scan + " window " + window;
    return label.length() <= 20 ? label : scan + "/" + window;
  }

  /** When each window opened: the scan's start, its rest as it was, and the steps before it. */
  private static List<Instant> windowStarts(Shot shot, Scan scan) {
    List<Instant> starts = new ArrayList<>();
    double rest = Double.isFinite(scan.restSeconds()) ? scan.restSeconds() : 0;
    double seconds = Math.max(0, rest);
    for (Step step : shot.flat()) {
      if (step instanceof Receive && starts.size() < scan.windows().size()) {
        starts.add(scan.started().plusNanos(Math.round(seconds * NANOSECONDS)));
      }
      seconds += step.seconds();
    }
    while (starts.size() < scan.windows().size()) {
      starts.add(starts.isEmpty() ? scan.started() : starts.get(starts.size() - 1));
    }
    return starts;
  }
}
