package coilside.record;

import com.google.gson.JsonElement;
import com.google.gson.JsonPrimitive;

/** Numbers in metadata: JSON numbers where they are finite, else "NaN", "Infinity", "-Infinity". */
final class Numbers {
  private Numbers() {}

  static JsonElement json(double x) {
    return Double.isFinite(x) ? new JsonPrimitive(x) : new JsonPrimitive(Double.toString(x));
  }
}
