package coilside.record;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.bench.Climb;
import coilside.bench.Finding;
import coilside.bench.Rung;
import coilside.bench.RungStatus;
import com.google.gson.JsonObject;
import com.google.gson.JsonParser;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.Set;
import org.junit.jupiter.api.Test;

/** Holds the documents of the command line's contract. */
class JsonTest {
  @Test
  void aFindingHasTheContractsKeysInOrder() {
    Finding finding = Samples.finding("f-1", Rung.NUTATION, "2026-11-03-091530-nutation");
    JsonObject o = JsonParser.parseString(Json.finding(finding).text()).getAsJsonObject();
    assertEquals(
        List.of("rung", "state", "started", "seconds", "scans", "values", "warnings", "capture"),
        new ArrayList<>(o.keySet()).subList(0, 8));
    assertEquals("nutation", o.get("rung").getAsString());
    assertEquals("fresh", o.get("state").getAsString());
    assertEquals("2026-11-03T09:15:30.123Z", o.get("started").getAsString());
    assertEquals(1.9, o.get("seconds").getAsDouble());
    assertEquals(14, o.get("scans").getAsInt());
    JsonObject pulse = o.getAsJsonObject("values").getAsJsonObject("pulse_90");
    assertEquals(List.of("value", "u", "unit"), new ArrayList<>(pulse.keySet()));
    assertEquals(1.0999999999999999e-5, pulse.get("value").getAsDouble());
    assertEquals(9e-8, pulse.get("u").getAsDouble());
    assertEquals("s", pulse.get("unit").getAsString());
    JsonObject nothing = o.getAsJsonObject("values").getAsJsonObject("nothing");
    assertTrue(nothing.get("value").isJsonNull());
    assertTrue(nothing.get("u").isJsonNull());
    assertEquals("not determined", nothing.get("why_no_u").getAsString());
    assertEquals(2, o.getAsJsonArray("warnings").size());
    assertFalse(o.has("refusal"));
  }

  @Test
  void aRefusalIsAFinding() {
    JsonObject o =
        JsonParser.parseString(Json.finding(Samples.refused("f-2", Rung.RESONANCE)).line())
            .getAsJsonObject();
    assertEquals("refused", o.get("state").getAsString());
    assertTrue(o.get("seconds").isJsonNull());
    JsonObject refusal = o.getAsJsonObject("refusal");
    assertTrue(refusal.get("reason").getAsString().startsWith("no resonance within"));
    assertEquals(2, refusal.getAsJsonArray("likely_causes").size());
  }

  @Test
  void readySaysSoAndListsTheRungs() {
    Finding noise = Samples.finding("f-1", Rung.NOISE, "");
    List<RungStatus> ladder =
        List.of(
            new RungStatus(Rung.NOISE, RungStatus.State.FRESH, Optional.of(noise), List.of()),
            new RungStatus(Rung.T2, RungStatus.State.MISSING, Optional.empty(), List.of("never")));
    JsonObject o = JsonParser.parseString(Json.ladder(ladder).text()).getAsJsonObject();
    assertEquals("ready", o.keySet().iterator().next());
    assertFalse(o.get("ready").getAsBoolean());
    JsonObject missing = o.getAsJsonArray("rungs").get(1).getAsJsonObject();
    assertEquals("t2", missing.get("rung").getAsString());
    assertEquals("missing", missing.get("state").getAsString());
    assertEquals("never", missing.getAsJsonArray("reasons").get(0).getAsString());

    JsonObject climbed =
        JsonParser.parseString(
                Json.ready(new Climb(ladder, List.of(noise), Set.of(Rung.T2))).text())
            .getAsJsonObject();
    assertTrue(climbed.get("ready").getAsBoolean());
    assertEquals("t2", climbed.getAsJsonArray("not_possible").get(0).getAsString());
  }

  @Test
  void aDocumentHoldsWhatWasPutInOrderAndEscaped() {
    String hostile = "a\"b\\c\u0000\u001b[31m</script>\u2028";
    JsonDocument document =
        new JsonDocument()
            .put("text", hostile)
            .put("none", (String) null)
            .put("number", Double.POSITIVE_INFINITY)
            .put("whole", 3)
            .put("truth", true)
            .putTexts("texts", List.of("x"))
            .putAll("objects", List.of(new JsonDocument().put("k", 1.5)))
            .put("child", new JsonDocument());
    String line = document.line();
    assertTrue(line.chars().noneMatch(c -> c < 0x20), line);
    JsonObject o = JsonParser.parseString(line).getAsJsonObject();
    assertEquals(hostile, o.get("text").getAsString());
    assertTrue(o.get("number").isJsonNull());
    assertEquals(
        "[text, none, number, whole, truth, texts, objects, child]", o.keySet().toString());
  }
}
