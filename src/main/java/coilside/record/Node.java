package coilside.record;

import com.google.gson.JsonElement;
import com.google.gson.JsonObject;
import com.google.gson.JsonParseException;
import com.google.gson.JsonParser;
import com.google.gson.Strictness;
import com.google.gson.stream.JsonReader;
import java.io.StringReader;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.OptionalDouble;

/**
 * One JSON object of a metadata file that somebody else may have written: every access checks kind
 * and bounds, and an error says where it stands.
 *
 * @param where path within the file, for messages
 */
record Node(String where, JsonObject object) {
  private static final int MAX_TEXT = 100_000;

  static Node parse(String file, String text) throws CaptureException {
    JsonReader reader = new JsonReader(new StringReader(text));
    reader.setStrictness(Strictness.STRICT);
    try {
      JsonElement root = JsonParser.parseReader(reader);
      if (reader.peek() != com.google.gson.stream.JsonToken.END_DOCUMENT || !root.isJsonObject()) {
        throw new CaptureException(file + " is not one JSON object");
      }
      return new Node(file, root.getAsJsonObject());
    } catch (JsonParseException | java.io.IOException | IllegalStateException e) {
      throw new CaptureException(file + " is no sound JSON: " + Trouble.words(e), e);
    }
  }

  CaptureException wrong(String what) {
    return new CaptureException(where + ": " + what);
  }

  boolean has(String key) {
    return object.has(key);
  }

  private JsonElement get(String key) throws CaptureException {
    JsonElement e = object.get(key);
    if (e == null || e.isJsonNull()) {
      throw wrong("'" + key + "' is missing");
    }
    return e;
  }

  String text(String key) throws CaptureException {
    JsonElement e = get(key);
    if (!e.isJsonPrimitive() || !e.getAsJsonPrimitive().isString()) {
      throw wrong("'" + key + "' must be text");
    }
    String text = e.getAsString();
    if (text.length() > MAX_TEXT) {
      throw wrong("'" + key + "' has " + text.length() + " characters; the limit is " + MAX_TEXT);
    }
    return text;
  }

  boolean truth(String key) throws CaptureException {
    JsonElement e = get(key);
    if (!e.isJsonPrimitive() || !e.getAsJsonPrimitive().isBoolean()) {
      throw wrong("'" + key + "' must be true or false");
    }
    return e.getAsBoolean();
  }

  /** A number, or one of the words that stand for those JSON has no number for. */
  double number(String key) throws CaptureException {
    JsonElement e = get(key);
    if (e.isJsonPrimitive()) {
      if (e.getAsJsonPrimitive().isNumber()) {
        double x = Double.parseDouble(e.getAsString());
        if (Double.isFinite(x)) {
          return x;
        }
      } else if (e.getAsJsonPrimitive().isString()) {
        switch (e.getAsString()) {
          case "NaN":
            return Double.NaN;
          case "Infinity":
            return Double.POSITIVE_INFINITY;
          case "-Infinity":
            return Double.NEGATIVE_INFINITY;
          default:
            break;
        }
      }
    }
    throw wrong("'" + key + "' must be a number");
  }

  OptionalDouble optionalNumber(String key) throws CaptureException {
    return has(key) ? OptionalDouble.of(number(key)) : OptionalDouble.empty();
  }

  long whole(String key, long min, long max) throws CaptureException {
    JsonElement e = get(key);
    if (!e.isJsonPrimitive() || !e.getAsJsonPrimitive().isNumber()) {
      throw wrong("'" + key + "' must be a whole number");
    }
    double x = Double.parseDouble(e.getAsString());
    if (x != Math.rint(x) || x < min || x > max) {
      throw wrong("'" + key + "' is " + e.getAsString() + "; it must be " + min + ".." + max);
    }
    return (long) x;
  }

  int integer(String key, int min, int max) throws CaptureException {
    return (int) whole(key, min, max);
  }

  Node child(String key) throws CaptureException {
    JsonElement e = get(key);
    if (!e.isJsonObject()) {
      throw wrong("'" + key + "' must be an object");
    }
    return new Node(where + ", " + key, e.getAsJsonObject());
  }

  List<Node> list(String key, int max) throws CaptureException {
    JsonElement e = get(key);
    if (!e.isJsonArray()) {
      throw wrong("'" + key + "' must be a list");
    }
    if (e.getAsJsonArray().size() > max) {
      throw wrong("'" + key + "' has " + e.getAsJsonArray().size() + " entries; limit " + max);
    }
    List<Node> out = new ArrayList<>();
    for (JsonElement item : e.getAsJsonArray()) {
      String here = where + ", " + key + "[" + out.size() + "]";
      if (!item.isJsonObject()) {
        throw new CaptureException(here + " must be an object");
      }
      out.add(new Node(here, item.getAsJsonObject()));
    }
    return out;
  }

  Map<String, String> texts() throws CaptureException {
    Map<String, String> out = new LinkedHashMap<>();
    for (String key : object.keySet()) {
      out.put(key, text(key));
    }
    return out;
  }
}
