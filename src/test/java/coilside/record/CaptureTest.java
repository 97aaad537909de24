package coilside.record;

import static org.junit.jupiter.api.Assertions.assertArrayEquals;
import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.bench.Capture;
import coilside.bench.KeepException;
import coilside.signal.Fid;
import coilside.signal.Scan;
import com.google.gson.JsonObject;
import com.google.gson.JsonParser;
import com.networknt.schema.InputFormat;
import com.networknt.schema.JsonSchemaFactory;
import com.networknt.schema.SpecVersion;
import com.networknt.schema.ValidationMessage;
import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.channels.WritableByteChannel;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Set;
import java.util.function.UnaryOperator;
import java.util.stream.Stream;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

class CaptureTest {
  @TempDir Path folder;

  @Test
  void aCaptureComesBackToTheLastBit() throws Exception {
    Capture capture = Samples.capture("nutation", "doped water", 5, 33, 7);
    String base = CapturesFolder.open(folder).keep(capture);
    assertEquals("2026-11-03-091530-nutation-doped-water", base);
    assertSame(capture, CaptureReader.read(folder.resolve(base)));
    assertSame(capture, CaptureReader.read(folder.resolve(base + ".sigmf-meta")));
    assertSame(capture, CaptureReader.read(folder.resolve(base + ".sigmf-data")));
  }

  static void assertSame(Capture expected, Capture actual) {
    assertEquals(expected.purpose(), actual.purpose());
    assertEquals(expected.started(), actual.started());
    assertEquals(expected.shots(), actual.shots());
    assertEquals(expected.conditions(), actual.conditions());
    assertEquals(expected.settings(), actual.settings());
    assertEquals(expected.board(), actual.board());
    assertEquals(expected.simulated(), actual.simulated());
    assertEquals(expected.scans().size(), actual.scans().size());
    for (int i = 0; i < expected.scans().size(); i++) {
      Scan a = expected.scans().get(i);
      Scan b = actual.scans().get(i);
      assertEquals(a.peakFraction(), b.peakFraction());
      assertEquals(a.clippedSamples(), b.clippedSamples());
      assertEquals(a.started(), b.started());
      assertEquals(a.restSeconds(), b.restSeconds());
      assertEquals(a.temperatureCelsius(), b.temperatureCelsius());
      assertEquals(a.retries(), b.retries());
      assertEquals(a.windows().size(), b.windows().size());
      for (int w = 0; w < a.windows().size(); w++) {
        Fid f = a.windows().get(w);
        Fid g = b.windows().get(w);
        assertArrayEquals(f.re(), g.re());
        assertArrayEquals(f.im(), g.im());
        assertEquals(f.dwellSeconds(), g.dwellSeconds());
        assertEquals(f.startSeconds(), g.startSeconds());
        assertEquals(f.carrierHertz(), g.carrierHertz());
      }
    }
  }

  /** Validation against the official SigMF 1.2.6 schema where its copy is at hand. */
  @Test
  void theMetadataConformToTheStandard() throws Exception {
    String base =
        CapturesFolder.open(folder).keep(Samples.capture("t2", "oil \u001b[31m/../é", 6, 16, 3));
    assertEquals(List.of(), CaptureChecks.problems(folder.resolve(base)));
    Path schema = Path.of("..", "shared", "sigmf", "sigmf-schema.json");
    if (Files.isReadable(schema)) {
      assertEquals(Set.of(), schemaProblems(schema, folder.resolve(base + ".sigmf-meta")));
    } else {
      System.out.println(
          "The official SigMF schema is not beside the project ("
              + schema
              + "): our own stricter checks ran, the official ones did not.");
    }
  }

  static Set<ValidationMessage> schemaProblems(Path schema, Path meta) throws IOException {
    return JsonSchemaFactory.getInstance(SpecVersion.VersionFlag.V202012)
        .getSchema(Files.readString(schema))
        .validate(Files.readString(meta), InputFormat.JSON);
  }

  @Test
  void namesAreUniqueSafeAndNeverOverwritten() throws Exception {
    CapturesFolder captures = CapturesFolder.open(folder);
    String hostile = "../../etc/\u001b[2Jpasswd\u0000 \u202e" + "x".repeat(300);
    Capture capture = Samples.capture("fid", hostile, 1, 4, 1);
    String first = captures.keep(capture);
    byte[] before = Files.readAllBytes(folder.resolve(first + ".sigmf-data"));
    String second = captures.keep(Samples.capture("fid", hostile, 1, 4, 2));
    String nameless = captures.keep(Samples.capture("fid", "\u65e5\u672c", 1, 4, 2));
    assertTrue(first.matches("2026-11-03-091530-fid-etc-2jpasswd-x+"), first);
    assertTrue(first.length() < 80, first);
    assertEquals(first + "-2", second);
    assertEquals("2026-11-03-091530-fid", nameless);
    assertArrayEquals(before, Files.readAllBytes(folder.resolve(first + ".sigmf-data")));
    assertEquals(List.of(nameless, first, second), CapturesFolder.list(folder));
  }

  @Test
  void segmentsSayWhenTheirFirstSampleWasTaken() throws Exception {
    String base = CapturesFolder.open(folder).keep(Samples.capture("t2", "oil", 2, 10, 3));
    JsonObject meta =
        JsonParser.parseString(Files.readString(folder.resolve(base + ".sigmf-meta")))
            .getAsJsonObject();
    var segments = meta.getAsJsonArray("captures");
    assertEquals(3, segments.size());
    Scan train = CaptureReader.read(folder.resolve(base)).scans().get(1);
    // Rest as it was, then 11 us + 1 ms + 22 us + 1 ms to the first of the train's windows.
    long nanos = Math.round((train.restSeconds() + 11e-6 + 1e-3 + 22e-6 + 1e-3) * 1e9);
    assertEquals(
        train.started().plusNanos(nanos).toString(),
        segments.get(1).getAsJsonObject().get("core:datetime").getAsString());
    assertEquals(20, segments.get(2).getAsJsonObject().get("core:sample_start").getAsInt());
  }

  @Test
  void samplesThatAreNoNumbersAreNotKept() throws Exception {
    Capture good = Samples.capture("fid", "oil", 1, 4, 1);
    good.scans().get(0).fid().im()[2] = Double.NaN;
    KeepException e =
        assertThrows(KeepException.class, () -> CapturesFolder.open(folder).keep(good));
    assertTrue(e.getMessage().contains("sample 2 of scan 0"), e.getMessage());
    assertEquals(0, fileCount());
  }

  private long fileCount() throws IOException {
    try (Stream<Path> files = Files.list(folder)) {
      return files.count();
    }
  }

  /** Stopping the bench interrupts its thread; what was measured must still be kept. */
  @Test
  void anInterruptedThreadStillKeepsItsCapture() throws Exception {
    CapturesFolder captures = CapturesFolder.open(folder);
    Capture capture = Samples.capture("fid", "oil", 2, 16, 1);
    Thread.currentThread().interrupt();
    String base = captures.keep(capture);
    assertTrue(Thread.interrupted());
    assertSame(capture, CaptureReader.read(folder.resolve(base)));
    assertEquals(List.of(), CaptureChecks.problems(folder.resolve(base)));
  }

  @Test
  void aFullDiskLeavesNothingHalfDone() throws Exception {
    // Room for the data of one capture and less than its metadata, then for the data in part.
    for (int room : new int[] {16 * 64 + 100, 500, 0}) {
      CapturesFolder captures = CapturesFolder.open(folder, new SmallDisk(room));
      KeepException e =
          assertThrows(
              KeepException.class, () -> captures.keep(Samples.capture("fid", "oil", 1, 64, 1)));
      assertTrue(e.getMessage().contains("free some space"), e.getMessage());
      assertEquals(0, fileCount());
    }
  }

  /** A disk with room for so many bytes, then "No space left on device" as the system says it. */
  private static final class SmallDisk extends FileWriter {
    private int room;

    SmallDisk(int room) {
      this.room = room;
    }

    @Override
    void write(Path file, Body body) throws IOException {
      super.write(
          file,
          out ->
              body.writeTo(
                  new WritableByteChannel() {
                    @Override
                    public int write(ByteBuffer bytes) throws IOException {
                      if (room == 0) {
                        throw new IOException("No space left on device");
                      }
                      int n = Math.min(room, bytes.remaining());
                      ByteBuffer part = bytes.slice(bytes.position(), n);
                      bytes.position(bytes.position() + n);
                      room -= n;
                      return out.write(part);
                    }

                    @Override
                    public boolean isOpen() {
                      return out.isOpen();
                    }

                    @Override
                    public void close() throws IOException {
                      out.close();
                    }
                  }));
    }
  }

  @Test
  void whatAnInterruptedRunLeftIsFinishedOrCleared() throws Exception {
    CapturesFolder captures = CapturesFolder.open(folder);
    Capture capture = Samples.capture("fid", "oil", 2, 16, 1);
    String base = captures.keep(capture);
    // Killed between the two renames: data in place, metadata whole under their hidden name.
    Path meta = folder.resolve(base + ".sigmf-meta");
    Files.move(meta, folder.resolve("." + base + ".sigmf-meta.aside"));
    assertEquals(List.of(), CapturesFolder.list(folder));
    // Killed earlier in another one: hidden data, metadata cut short.
    Files.write(folder.resolve(".other.sigmf-data.aside"), new byte[100]);
    Files.writeString(folder.resolve(".other.sigmf-meta.aside"), "{\"glo");
    // Somebody's own file of this kind is left alone.
    Files.write(folder.resolve("mine.sigmf-data"), new byte[16]);

    captures.clearLeftovers();
    assertEquals(List.of(base), CapturesFolder.list(folder));
    assertSame(capture, CaptureReader.read(folder.resolve(base)));
    assertEquals(List.of(), CaptureChecks.problems(folder.resolve(base)));
    assertEquals(3, fileCount());
  }

  @Test
  void ourChecksSeeWhatTheOfficialSchemaLetsPass() throws Exception {
    String base = CapturesFolder.open(folder).keep(Samples.capture("fid", "oil", 2, 16, 1));
    Path data = folder.resolve(base + ".sigmf-data");
    byte[] bytes = Files.readAllBytes(data);

    byte[] damaged = bytes.clone();
    damaged[40] ^= 1;
    Files.write(data, damaged);
    assertProblem(base, "SHA-512");
    Files.write(data, java.util.Arrays.copyOf(bytes, bytes.length - 3));
    assertProblem(base, "bytes");
    Files.write(data, bytes);
    assertEquals(List.of(), CaptureChecks.problems(folder.resolve(base)));

    edited(base, s -> s.replaceFirst("(core:datetime\": \"[^\"]*)Z", "$1+01:00"), "UTC");
    edited(base, s -> s.replace("\"cf64_le\"", "\"cf64_lexx\""), "datatype");
    edited(base, s -> s.replace("\"core:sample_start\": 16", "\"core:sample_start\": 99"), "");
    edited(base, s -> s.replace("coilside:purpose", "other:purpose"), "other:purpose");
    edited(base, s -> s.replace("\"core:hw\"", "\"core:hardware\""), "core:hardware");
  }

  private void edited(String base, UnaryOperator<String> edit, String expected) throws Exception {
    Path meta = folder.resolve(base + ".sigmf-meta");
    String before = Files.readString(meta);
    String after = edit.apply(before);
    assertFalse(before.equals(after));
    Files.writeString(meta, after);
    assertProblem(base, expected);
    Files.writeString(meta, before);
  }

  private void assertProblem(String base, String expected) throws Exception {
    List<String> problems = CaptureChecks.problems(folder.resolve(base));
    assertTrue(
        problems.stream().anyMatch(p -> p.contains(expected)), expected + " not in " + problems);
  }
}
