package coilside.command;

import coilside.bench.Capture;
import coilside.bench.Reading;
import coilside.record.Json;
import coilside.record.JsonDocument;

/** What was read from one capture, as a JSON document. */
final class ReadingJson {
  private ReadingJson() {}

  static JsonDocument of(Capture capture, Reading reading, String name) {
    return new JsonDocument()
        .put("purpose", capture.purpose())
        .put("started", capture.started())
        .put("scans", (long) capture.scans().size())
        .put("values", Json.values(reading.values()))
        .putTexts("warnings", reading.warnings())
        .put("capture", name)
        .put("sample", capture.conditions().sample())
        .put("board", capture.board())
        .put("simulated", capture.simulated());
  }
}
