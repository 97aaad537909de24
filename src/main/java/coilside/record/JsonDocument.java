package coilside.record;

import com.google.gson.Gson;
import com.google.gson.GsonBuilder;
import com.google.gson.JsonArray;
import com.google.gson.JsonElement;
import com.google.gson.JsonNull;
import com.google.gson.JsonObject;
import com.google.gson.JsonPrimitive;
import java.time.Instant;
import java.time.temporal.ChronoUnit;
import java.util.List;

/**
 * A JSON object put together key by key, in that order. JSON has no number for NaN and the
 * infinities: they become {@code null}. Times are UTC to the millisecond.
 */
public final class JsonDocument {
  private static final Gson GSON =
      new GsonBuilder().disableHtmlEscaping().serializeNulls().setPrettyPrinting().create();
  private static final Gson ONE_LINE =
      new GsonBuilder().disableHtmlEscaping().serializeNulls().create();

  private final JsonObject object = new JsonObject();

  public JsonDocument put(String key, String text) {
    object.add(key, text == null ? JsonNull.INSTANCE : new JsonPrimitive(text));
    return this;
  }

  public JsonDocument put(String key, boolean truth) {
    object.addProperty(key, truth);
    return this;
  }

  public JsonDocument put(String key, long whole) {
    object.addProperty(key, whole);
    return this;
  }

  public JsonDocument put(String key, double number) {
    object.add(key, Double.isFinite(number) ? new JsonPrimitive(number) : JsonNull.INSTANCE);
    return this;
  }

  public JsonDocument put(String key, Instant when) {
    object.addProperty(key, when.truncatedTo(ChronoUnit.MILLIS).toString());
    return this;
  }

  public JsonDocument put(String key, JsonDocument child) {
    object.add(key, child.object);
    return this;
  }

  /** A list of texts. */
  public JsonDocument putTexts(String key, List<String> texts) {
    return put(key, array(texts.stream().map(JsonPrimitive::new).toList()));
  }

  /** A list of objects. */
  public JsonDocument putAll(String key, List<JsonDocument> children) {
    return put(key, array(children.stream().map(c -> c.object).toList()));
  }

  private JsonDocument put(String key, JsonArray array) {
    object.add(key, array);
    return this;
  }

  private static JsonArray array(List<? extends JsonElement> elements) {
    JsonArray array = new JsonArray();
    elements.forEach(array::add);
    return array;
  }

  /** The document on several lines, without a line end after the last. */
  public String text() {
    return GSON.toJson(object);
  }

  /** The document on one line. */
  public String line() {
    return ONE_LINE.toJson(object);
  }

  @Override
  public String toString() {
    return line();
  }
}
