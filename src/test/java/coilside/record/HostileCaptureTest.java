package coilside.record;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.ByteOrder;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Random;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** Captures that were damaged or made to do harm: every one ends in a clear error. */
class HostileCaptureTest {
  @TempDir Path folder;

  private Path base;
  private Path meta;
  private Path data;
  private String sound;

  @BeforeEach
  void keepOne() throws Exception {
    base = folder.resolve(CapturesFolder.open(folder).keep(Samples.capture("t2", "oil", 3, 8, 1)));
    meta = CaptureReader.sibling(base, ".sigmf-meta");
    data = CaptureReader.sibling(base, ".sigmf-data");
    sound = Files.readString(meta);
  }

  private void refused(String text, String expected) throws IOException {
    assertFalse(text.equals(sound), "nothing was changed for: " + expected);
    Files.writeString(meta, text);
    CaptureException e = assertThrows(CaptureException.class, () -> CaptureReader.read(base));
    assertTrue(e.getMessage().contains(expected), e.getMessage());
  }

  @Test
  void absurdNumbersAreRefusedBeforeMemoryIsTaken() throws Exception {
    refused(sound.replaceFirst("(coilside:points\": )8", "$13000000000"), "must be 1..2147483647");
    refused(sound.replaceFirst("(coilside:points\": )8", "$12000000"), "the data file holds 32");
    refused(sound.replaceFirst("(sample_start\": )8", "$19"), "instead of 8");
    refused(sound.replaceFirst("(coilside:dwell_seconds\": )1.0E-5", "$1-1"), "dwell -1.0 s");
    refused(sound.replaceFirst("(coilside:start_seconds\": )[^,\n]*", "$1\"NaN\""), "start NaN s");
    refused(sound.replaceFirst("(\"shot\": )0", "$17"), "must be 0..1");
    refused(sound.replaceFirst("(\"count\": )2", "$12000000000"), "the limit is 10000000");
    refused(sound.replaceFirst("(\"count\": )2", "$11.5"), "must be 1..2147483647");
    refused(sound.replaceFirst("(\"amplitude\": )0.5(,?\\s+\\})", "$17$2"), "must be 0..1");
    refused(sound.replaceFirst("(carrier_hertz\": )8089500.0", "$11e999"), "must be a number");
    refused(sound.replaceFirst("\"wait\"", "\"nap\""), "'nap' is no kind of step");
    refused(sound.replaceFirst("cf64_le", "ci16_le"), "cf64_le and cf32_le can be read");
    refused(sound.replaceFirst("coilside:scans", "else:scans"), "cannot be analysed again");
    refused(sound.substring(0, sound.length() / 2), "no sound JSON");
    refused("[".repeat(100_000), "no sound JSON");
    refused("[1]", "not one JSON object");
  }

  @Test
  void samplesThatAreNoNumbersAndShortFilesAreRefused() throws Exception {
    byte[] bytes = Files.readAllBytes(data);
    byte[] nan = bytes.clone();
    ByteBuffer.wrap(nan).order(ByteOrder.LITTLE_ENDIAN).putDouble(16 * 5 + 8, Double.NaN);
    Files.write(data, nan);
    CaptureException e = assertThrows(CaptureException.class, () -> CaptureReader.read(base));
    assertTrue(e.getMessage().contains("sample 5 is not a finite number"), e.getMessage());
    Files.write(data, java.util.Arrays.copyOf(bytes, bytes.length - 16));
    assertThrows(CaptureException.class, () -> CaptureReader.read(base));
    Files.delete(data);
    CaptureException gone = assertThrows(CaptureException.class, () -> CaptureReader.read(base));
    assertTrue(gone.getMessage().contains("there is no such file"), gone.getMessage());
    assertThrows(CaptureException.class, () -> CaptureReader.read(Path.of("/")));
    assertThrows(CaptureException.class, () -> CaptureReader.read(folder));
  }

  /** Property: whatever bytes the metadata hold, the answer is a capture or a capture error. */
  @Test
  void randomDamageNeverEscapesAsAnotherError() throws Exception {
    Random random = new Random(20);
    byte[] good = sound.getBytes(StandardCharsets.UTF_8);
    int refusals = 0;
    for (int i = 0; i < 400; i++) {
      byte[] bad = good.clone();
      int hits = 1 + random.nextInt(4);
      for (int h = 0; h < hits; h++) {
        int at = random.nextInt(bad.length);
        bad[at] =
            random.nextBoolean() ? (byte) random.nextInt(256) : good[random.nextInt(good.length)];
      }
      Files.write(meta, bad);
      try {
        CaptureReader.read(base);
      } catch (CaptureException e) {
        refusals++;
        assertFalse(e.getMessage().isBlank());
      }
      CaptureChecks.problems(base);
    }
    assertTrue(refusals > 150, refusals + " refusals");
    Files.write(meta, good);
    assertEquals(3, CaptureReader.read(base).scans().size());
  }

  /** The other datatype that the reader takes: half the bytes, seven digits. */
  @Test
  void singlePrecisionIsReadToo() throws Exception {
    ByteBuffer in = ByteBuffer.wrap(Files.readAllBytes(data)).order(ByteOrder.LITTLE_ENDIAN);
    ByteBuffer out = ByteBuffer.allocate(in.limit() / 2).order(ByteOrder.LITTLE_ENDIAN);
    double[] expected = new double[in.limit() / 8];
    for (int i = 0; in.hasRemaining(); i++) {
      expected[i] = (float) in.getDouble();
      out.putFloat((float) expected[i]);
    }
    Files.write(data, out.array());
    Files.writeString(meta, sound.replace("cf64_le", "cf32_le"));
    var fid = CaptureReader.read(base).scans().get(0).fid();
    assertEquals(expected[0], fid.re(0));
    assertEquals(expected[15], fid.im(7));
  }
}
