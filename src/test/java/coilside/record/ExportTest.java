package coilside.record;

import static org.junit.jupiter.api.Assertions.assertArrayEquals;
import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.bench.Capture;
import coilside.bench.KeepException;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.signal.Fid;
import coilside.signal.Scan;
import java.io.ByteArrayInputStream;
import java.nio.ByteBuffer;
import java.nio.ByteOrder;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.OptionalDouble;
import java.util.Random;
import javax.sound.sampled.AudioFormat;
import javax.sound.sampled.AudioInputStream;
import javax.sound.sampled.AudioSystem;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

class ExportTest {
  private static final double LINE_HERTZ = 750;

  @TempDir Path folder;

  /** Scans of one decaying line 750 Hz above the carrier, with noise. */
  private static Capture fidCapture(int scans, int points, double dwell) {
    Random random = new Random(11);
    Shot shot =
        new Shot(
            8.0895e6, 30, 0.6, List.of(new Pulse(11e-6, 0, 0.5), new Receive(points, dwell, 0)));
    List<Shot> shots = new ArrayList<>();
    List<Scan> played = new ArrayList<>();
    for (int i = 0; i < scans; i++) {
      double[] re = new double[points];
      double[] im = new double[points];
      for (int k = 0; k < points; k++) {
        double t = 5.5e-6 + k * dwell;
        double a = 1.2e-5 * Math.exp(-t / 0.008);
        re[k] = a * Math.cos(2 * Math.PI * LINE_HERTZ * t + 0.3) + 1e-7 * random.nextGaussian();
        im[k] = a * Math.sin(2 * Math.PI * LINE_HERTZ * t + 0.3) + 1e-7 * random.nextGaussian();
      }
      shots.add(shot);
      played.add(
          new Scan(
              List.of(new Fid(re, im, dwell, 5.5e-6, 8.0895e6)),
              0.4,
              0,
              Samples.START.plusSeconds(i),
              0.6,
              OptionalDouble.of(23.5),
              0));
    }
    return new Capture(
        "fid",
        Samples.START,
        shots,
        played,
        Samples.conditions("doped water ##END= $$ µ"),
        Map.of(),
        "Teaching console 3",
        true);
  }

  /** The standard's test values in its five forms: McDonald and Wilks 1988 (from memory). */
  @Test
  void theTestParserKnowsTheFivePackedForms() {
    double[] expected = {1, 2, 3, 3, 2, 1, 0, -1, -2, -3};
    for (String line :
        List.of(
            "99 1 2 3 3 2 1 0 -1 -2 -3",
            "99+1+2+3+3+2+1+0-1-2-3",
            "99ABCCBA@abc",
            "99AJJ%jjjjjj",
            "99AJT%jX")) {
      List<Double> starts = new ArrayList<>();
      assertArrayEquals(expected, JcampParser.table(List.of(line), starts), line);
      assertEquals(List.of(99.0), starts);
    }
  }

  @Test
  void aJcampFidReadsBackToNinePartsInABillion() throws Exception {
    Capture capture = fidCapture(4, 300, 2e-5);
    Path file = folder.resolve("a.jdx");
    Export.fids(capture, ExportFormat.JCAMP, file);
    String text = Files.readString(file, StandardCharsets.US_ASCII);
    assertJcampLines(text);
    JcampParser parsed = JcampParser.parse(text);
    assertEquals("5.01", parsed.records.get("JCAMPDX"));
    assertEquals("NMR FID", parsed.records.get("DATATYPE"));
    assertEquals("NTUPLES", parsed.records.get("DATACLASS"));
    assertEquals("^1H", parsed.records.get(".OBSERVENUCLEUS"));
    assertEquals("8.0895", parsed.records.get(".OBSERVEFREQUENCY"));
    assertEquals("2026/11/03 09:15:30.1234 +0000", parsed.records.get("LONGDATE"));
    assertEquals("SIMULTANEOUS", parsed.records.get(".ACQUISITIONMODE"));
    assertEquals("4", parsed.records.get(".AVERAGES"));
    assertArrayEquals(new double[] {300, 300, 300, 2}, parsed.numbers("VARDIM"));
    double[] last = parsed.numbers("LAST");
    // (points - 1) times the dwell time: readers reckon the time axis from it.
    assertEquals(299 * 2e-5, last[0] - parsed.numbers("FIRST")[0], 1e-15);
    double[] factor = parsed.numbers("FACTOR");
    assertEquals(2e-5, factor[0]);
    Fid average = Export.average(capture);
    assertEquals(2, parsed.pages.size());
    for (int k = 0; k < 300; k++) {
      assertEquals(average.re(k), parsed.pages.get(0)[k] * factor[1], 1.2e-5 * 1e-9);
      assertEquals(average.im(k), parsed.pages.get(1)[k] * factor[2], 1.2e-5 * 1e-9);
    }
    assertEquals(parsed.pages.get(0)[0] * factor[1], parsed.numbers("FIRST")[1]);
    assertEquals(parsed.pages.get(1)[299] * factor[2], last[2]);
    double x = 0;
    for (double start : parsed.lineStarts.get(0)) {
      assertTrue(start >= x && start < 300);
      x = start;
    }
  }

  private static void assertJcampLines(String text) {
    assertTrue(text.startsWith("##TITLE="), text);
    assertTrue(text.endsWith("##END=\n"), text);
    for (String line : text.split("\n")) {
      assertTrue(line.length() <= 80, line);
      assertTrue(line.chars().allMatch(c -> c >= 0x20 && c < 0x7f), line);
      if (!line.startsWith("##") && !line.startsWith("$$")) {
        // Exponents in tables are misread: E is a packed digit.
        assertTrue(line.matches("[-0-9 ]+") || line.matches("[-0-9.E, ]+, [12]"), line);
      }
    }
    assertEquals(1, text.split("##END=", -1).length - 1);
  }

  @Test
  void aJcampSpectrumHasItsLineWhereTheSignalIs() throws Exception {
    Path file = folder.resolve("s.jdx");
    Export.spectrum(fidCapture(1, 2048, 2e-5), ExportFormat.JCAMP, file);
    String text = Files.readString(file, StandardCharsets.US_ASCII);
    assertJcampLines(text);
    JcampParser parsed = JcampParser.parse(text);
    assertEquals("NMR SPECTRUM", parsed.records.get("DATATYPE"));
    assertTrue(parsed.records.get("UNITS").startsWith("HZ"));
    double first = parsed.numbers("FIRST")[0];
    double step = (parsed.numbers("LAST")[0] - first) / (parsed.numbers("VARDIM")[0] - 1);
    assertEquals(parsed.numbers("FACTOR")[0], step, 1e-9);
    double[] re = parsed.pages.get(0);
    int top = 0;
    for (int k = 0; k < re.length; k++) {
      top = re[k] > re[top] ? k : top;
    }
    assertEquals(LINE_HERTZ, first + top * step, step);
    // The table's first column is in steps of FACTOR.
    assertEquals(first / step, parsed.lineStarts.get(0)[0], 1e-9);
  }

  /** NumPy's format description: magic, version 1.0, header padded to 64 bytes, then the data. */
  @Test
  void aNumpyFileHoldsEveryWindow() throws Exception {
    Capture capture = Samples.capture("t2", "oil", 3, 17, 5);
    Path file = folder.resolve("a.npy");
    Export.fids(capture, ExportFormat.NPY, file);
    ByteBuffer bytes = ByteBuffer.wrap(Files.readAllBytes(file)).order(ByteOrder.LITTLE_ENDIAN);
    byte[] magic = new byte[8];
    bytes.get(magic);
    assertArrayEquals(new byte[] {(byte) 0x93, 'N', 'U', 'M', 'P', 'Y', 1, 0}, magic);
    byte[] header = new byte[bytes.getShort()];
    bytes.get(header);
    assertEquals(0, bytes.position() % 64);
    assertEquals(
        "{'descr': '<c16', 'fortran_order': False, 'shape': (4, 17), }",
        new String(header, StandardCharsets.US_ASCII).trim());
    assertEquals('\n', header[header.length - 1]);
    assertEquals(4 * 17 * 16, bytes.remaining());
    for (Scan scan : capture.scans()) {
      for (Fid fid : scan.windows()) {
        for (int k = 0; k < 17; k++) {
          assertEquals(fid.re(k), bytes.getDouble());
          assertEquals(fid.im(k), bytes.getDouble());
        }
      }
    }
  }

  /** Read by the Java platform's own audio reader. */
  @Test
  void aWavFileIsReadByAGeneralReader() throws Exception {
    Capture capture = fidCapture(1, 1000, 1.0 / 48000.4);
    Path file = folder.resolve("a.wav");
    Export.fids(capture, ExportFormat.WAV, file);
    byte[] all = Files.readAllBytes(file);
    try (AudioInputStream in = AudioSystem.getAudioInputStream(new ByteArrayInputStream(all))) {
      AudioFormat format = in.getFormat();
      assertEquals(48000, format.getSampleRate());
      assertEquals(2, format.getChannels());
      assertEquals(16, format.getSampleSizeInBits());
      assertEquals(1000, in.getFrameLength());
      ByteBuffer data = ByteBuffer.wrap(in.readAllBytes()).order(ByteOrder.LITTLE_ENDIAN);
      Fid fid = capture.scans().get(0).fid();
      double peak = 0;
      for (int k = 0; k < 1000; k++) {
        peak = Math.max(peak, Math.max(Math.abs(fid.re(k)), Math.abs(fid.im(k))));
      }
      for (int k = 0; k < 1000; k++) {
        assertEquals(fid.re(k), data.getShort() * peak / 32767, peak / 65000);
        assertEquals(fid.im(k), data.getShort() * peak / 32767, peak / 65000);
      }
    }
    String text = new String(all, StandardCharsets.ISO_8859_1);
    assertTrue(text.contains("Hz, stated as 48000 Hz"));
  }

  @Test
  void csvHoldsEveryDigit() throws Exception {
    Capture capture = Samples.capture("t2", "oil", 2, 3, 5);
    Path file = folder.resolve("a.csv");
    Export.fids(capture, ExportFormat.CSV, file);
    List<String> lines = List.of(Files.readString(file).split("\r\n"));
    assertEquals("scan,window,time [s],real [V],imaginary [V]", lines.get(0));
    assertEquals(1 + 9, lines.size());
    Fid fid = capture.scans().get(1).windows().get(1);
    String[] fields = lines.get(9).split(",");
    assertEquals("1", fields[0]);
    assertEquals("1", fields[1]);
    assertEquals(fid.time(2), Double.parseDouble(fields[2]));
    assertEquals(fid.re(2), Double.parseDouble(fields[3]));
    assertEquals(fid.im(2), Double.parseDouble(fields[4]));
  }

  @Test
  void whatCannotBeAveragedOrWouldOverwriteIsRefused() throws Exception {
    Capture mixed = Samples.capture("t2", "oil", 2, 3, 5);
    Path file = folder.resolve("a.wav");
    IllegalArgumentException e =
        assertThrows(
            IllegalArgumentException.class, () -> Export.fids(mixed, ExportFormat.WAV, file));
    assertTrue(e.getMessage().contains("csv and npy hold every scan"), e.getMessage());
    Files.writeString(file, "mine");
    assertThrows(
        KeepException.class, () -> Export.fids(fidCapture(1, 8, 1e-5), ExportFormat.WAV, file));
    assertEquals("mine", Files.readString(file));
    assertThrows(IllegalArgumentException.class, () -> ExportFormat.ofId("mp3"));
  }
}
