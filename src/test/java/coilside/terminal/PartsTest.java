package coilside.terminal;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.bench.Picture;
import coilside.bench.Rung;
import coilside.quantity.Measured;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.shot.Wait;
import coilside.signal.Fid;
import coilside.signal.Fourier;
import java.io.ByteArrayInputStream;
import java.io.InputStream;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.concurrent.atomic.AtomicLong;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** The parts the screen is made of, one by one. */
class PartsTest {
  @Test
  void dotsMakeTheCharactersOfTheUnicodeStandard() {
    // The Unicode Standard, Braille Patterns: dots 1-8 are bits 0-7 above U+2800.
    assertEquals('\u2801', DrawingStyle.BRAILLE.character(1));
    assertEquals('\u2808', DrawingStyle.BRAILLE.character(2));
    assertEquals('\u2840', DrawingStyle.BRAILLE.character(1 << 6));
    assertEquals('\u28ff', DrawingStyle.BRAILLE.character(255));
    assertEquals('█', DrawingStyle.BLOCK.character(15));
    assertEquals('▀', DrawingStyle.BLOCK.character(3));
  }

  @Test
  void aSteepLineHasNoHoles() {
    Canvas canvas = new Canvas(10, 10, new Glyphs(true));
    Dots dots = new Dots(canvas, canvas.area(), DrawingStyle.BRAILLE);
    dots.line(0, 39, 19, 0, Ink.SIGNAL);
    dots.paint();
    for (int y = 0; y < 10; y++) {
      assertFalse(canvas.row(y).isBlank(), "row " + y + " is empty\n" + canvas.text());
    }
  }

  @Test
  void ticksAreRoundAndFewAndInside() {
    for (double span : new double[] {1e-9, 3.7e-6, 0.42, 1, 17, 8e6}) {
      for (double low : new double[] {-span / 3, 0, 5 * span}) {
        Axis axis = new Axis(low, low + span, "s");
        List<Double> ticks = axis.ticks(5);
        assertTrue(ticks.size() >= 2 && ticks.size() <= 7, ticks + " for " + axis);
        double step = axis.step(5);
        double mantissa = step / Math.pow(10, Math.floor(Math.log10(step) + 1e-9));
        assertTrue(List.of(1L, 2L, 5L).contains(Math.round(mantissa)), "step " + step);
        for (double t : ticks) {
          assertTrue(t >= low - 1e-9 * span && t <= low + span * (1 + 1e-9));
        }
      }
    }
    assertEquals("ms", new Axis(0, 0.04, "s").unitText());
    assertEquals("20", new Axis(0, 0.04, "s").label(0.02, 4));
  }

  @Test
  void autoscaleRestsWhileNoiseMovesAndFollowsWhatLeavesIt() {
    Autoscale scale = new Autoscale(0.02);
    scale.update(-1, 1);
    double low = scale.low();
    double high = scale.high();
    for (int i = 0; i < 50; i++) {
      scale.update(-0.9 - 0.1 * Math.sin(i), 0.9 + 0.1 * Math.cos(i));
    }
    assertEquals(low, scale.low());
    assertEquals(high, scale.high());
    scale.update(-1, 3);
    assertTrue(scale.high() >= 3);
    for (int i = 0; i < 11; i++) {
      scale.update(-0.1, 0.1);
    }
    assertTrue(scale.high() >= 3, "it shrank too soon");
    scale.update(-0.1, 0.1);
    assertTrue(scale.high() < 0.2, "it never shrank");
  }

  @Test
  void aShotIsToScaleWhereItCanBe() {
    Shot even =
        new Shot(
            8e6,
            40,
            1e-3,
            List.of(new Pulse(1e-3, 0, 1), new Wait(1e-3), new Receive(1000, 1e-6, 0)));
    List<ShotStrip.Part> parts = ShotStrip.layOut(even, 80, Double.NaN, 1, new Glyphs(true));
    assertEquals(4, parts.size());
    assertTrue(parts.stream().allMatch(ShotStrip.Part::toScale), parts.toString());
    assertEquals(ShotStrip.Kind.DEAD_TIME, parts.get(2).kind());
    Shot uneven =
        new Shot(
            8e6, 40, 3, List.of(new Pulse(1e-5, 0, 1), new Wait(5e-5), new Receive(4096, 1e-5, 0)));
    List<ShotStrip.Part> broken = ShotStrip.layOut(uneven, 80, 1e-5, 1, new Glyphs(true));
    assertTrue(broken.get(0).cut());
    assertFalse(broken.get(1).toScale());
    assertTrue(broken.get(3).toScale());
    assertEquals("90° x", broken.get(1).above());
    int end = broken.get(3).column() + broken.get(3).columns();
    assertTrue(end <= 80 && end > 70, "the strip ends at " + end);
    assertEquals(0, ShotStrip.column(broken, 0));
    assertTrue(ShotStrip.column(broken, 3.02) > broken.get(3).column());
  }

  @Test
  void flipAngleCountsWidthAndAmplitude() {
    Shot shot =
        new Shot(8e6, 40, 1, List.of(new Pulse(2e-5, Math.PI, 0.5), new Receive(16, 1e-5, 0)));
    List<ShotStrip.Part> parts = ShotStrip.layOut(shot, 80, 1e-5, 1, new Glyphs(false));
    assertEquals("90deg -x", parts.get(1).above());
  }

  @Test
  void valuesCarryPrefixAndDigits() {
    assertEquals("33.0 ms", Numbers.si(0.033, "s", 3));
    assertEquals("8.089432 MHz", Numbers.si(8_089_432.17, "Hz", 7));
    assertEquals("-1.20 µV", Numbers.si(-1.2e-6, "V", 3));
    assertEquals("42.0 dB", Numbers.si(42, "dB", 3));
    assertEquals("0 s", Numbers.si(0, "s", 1));
    assertEquals("-", Numbers.si(Double.NaN, "s", 3));
    assertEquals("12:30", Numbers.clock(750));
    assertEquals("1:00:01", Numbers.clock(3601));
  }

  @Test
  void typedQuantitiesAreReadOrRefusedWithAnExample() {
    assertEquals(8.1e6, Quantities.read("8.1 MHz", "Hz", 1, ""), 1e-3);
    assertEquals(12.5e-6, Quantities.read("12.5us", "s", 1, ""), 1e-15);
    assertEquals(0.01, Quantities.read("1", "", 0.01, ""), 1e-15);
    assertEquals(0.02, Quantities.read("2 %", "", 0.01, ""), 1e-15);
    IllegalArgumentException e =
        assertThrows(
            IllegalArgumentException.class, () -> Quantities.read("8 V", "Hz", 1, "8.1 MHz"));
    assertTrue(e.getMessage().contains("'V'") && e.getMessage().contains("8.1 MHz"));
    assertThrows(IllegalArgumentException.class, () -> Quantities.read("", "Hz", 1, "8 MHz"));
  }

  @Test
  void headlineNumbersAreThoseOfTheSignal() {
    int n = 4096;
    double t2 = 0.02;
    double[] re = new double[n];
    double[] im = new double[n];
    java.util.Random random = new java.util.Random(3);
    for (int k = 0; k < n; k++) {
      double t = 50e-6 + k * 20e-6;
      double e = 1e-5 * Math.exp(-t / t2);
      re[k] = e * Math.cos(0.7 + 2 * Math.PI * 210 * t) + 1e-7 * random.nextGaussian();
      im[k] = e * Math.sin(0.7 + 2 * Math.PI * 210 * t) + 1e-7 * random.nextGaussian();
    }
    Fid fid = new Fid(re, im, 20e-6, 50e-6, 8e6);
    Picture.Trace trace =
        new Picture.Trace(
            Rung.T2STAR,
            fid,
            Optional.of(fid),
            0,
            Optional.of(Fourier.spectrum(fid)),
            List.of(),
            "");
    Map<Headline, Measured> got = Headline.of(trace);
    near(got.get(Headline.T2STAR), t2);
    near(got.get(Headline.LINEWIDTH), 1 / (Math.PI * t2));
    near(got.get(Headline.AMPLITUDE), 1e-5);
    near(got.get(Headline.FREQUENCY), 8e6 + 210);
    near(got.get(Headline.SNR), 100);
    Picture.Trace turned = Phased.of(trace);
    assertTrue(turned.fid().re(0) > 0.9e-5, "the phased decay starts real and positive");
    double largest = 0;
    double at = 0;
    for (int k = 0; k < n; k++) {
      double v = turned.spectrum().orElseThrow().re()[k];
      if (v > largest) {
        largest = v;
        at = turned.spectrum().orElseThrow().offsetHertz(k);
      }
    }
    assertEquals(210, at, 13, "the absorption line stands at the offset");
  }

  private static void near(Measured m, double truth) {
    assertEquals(truth, m.value(), 4 * m.u(), m.toString());
  }

  @Test
  void bestAndTrendLookBeyondTheNoise() {
    HeadlineHistory h = new HeadlineHistory(Headline.LINEWIDTH);
    for (double v : new double[] {10, 10.05, 9.96, 10.02, 9.99, 10}) {
      h.add(Measured.of(v, 0.1, coilside.quantity.Unit.HERTZ));
    }
    assertEquals(1, h.bests());
    assertEquals(0, h.trend());
    for (double v : new double[] {8, 7, 6}) {
      h.add(Measured.of(v, 0.1, coilside.quantity.Unit.HERTZ));
    }
    assertEquals(-1, h.trend());
    assertEquals(6, h.best().orElseThrow().value());
    assertEquals(4, h.bests());
  }

  @Test
  void aLoneEscapeIsHeldBackAndASplitSequenceIsNot() throws Exception {
    AtomicLong time = new AtomicLong();
    EscapeFilter filter = new EscapeFilter(InputStream.nullInputStream(), time::get);
    filter.offer(new byte[] {27}, 1);
    assertEquals(0, filter.available());
    time.addAndGet(20_000_000);
    filter.offer(new byte[] {'['}, 1);
    assertEquals(0, filter.available());
    time.addAndGet(20_000_000);
    filter.offer(new byte[] {'A'}, 1);
    assertEquals(3, filter.available());
    byte[] got = new byte[8];
    assertEquals(3, filter.read(got, 0, 8));
    filter.offer(new byte[] {'x', 27}, 2);
    assertEquals(1, filter.available());
    time.addAndGet(41_000_000);
    assertEquals(2, filter.available());
    assertEquals(2, filter.read(got, 0, 8));
    filter.offer(new byte[0], -1);
    assertEquals(-1, filter.read());
  }

  @Test
  void theFilterHoldsBackAnUnfinishedMouseReport() throws Exception {
    AtomicLong time = new AtomicLong();
    EscapeFilter filter = new EscapeFilter(InputStream.nullInputStream(), time::get);
    filter.offer(new byte[] {27, '[', 'M', ' '}, 4);
    assertEquals(0, filter.available());
    filter.offer(new byte[] {'A', '5'}, 2);
    assertEquals(6, filter.available());
  }

  @Test
  void theFilterPassesEverythingOnInOrder() throws Exception {
    byte[] all = "abc\u001b[A\u001b[5~z".getBytes(StandardCharsets.US_ASCII);
    try (EscapeFilter filter =
        new EscapeFilter(new ByteArrayInputStream(all), System::nanoTime).start()) {
      assertEquals(
          new String(all, StandardCharsets.US_ASCII),
          new String(filter.readAllBytes(), StandardCharsets.US_ASCII));
    }
  }

  @Test
  void coloursFollowTheEnvironment() {
    assertEquals(Palette.Depth.MANY, Palette.from(Map.of("TERM", "xterm-256color"), false).depth());
    assertEquals(Palette.Depth.SIXTEEN, Palette.from(Map.of("TERM", "screen"), false).depth());
    assertEquals(
        Palette.Depth.NONE,
        Palette.from(Map.of("TERM", "xterm-256color", "NO_COLOR", "1"), false).depth());
    assertEquals(
        Palette.Depth.MANY,
        Palette.from(Map.of("TERM", "xterm-256color", "NO_COLOR", ""), false).depth());
    assertTrue(Palette.from(Map.of("TERM", "xterm", "COLORFGBG", "0;15"), false).light());
    assertFalse(Palette.from(Map.of("TERM", "xterm", "COLORFGBG", "15;0"), false).light());
  }

  @Test
  void unusableTerminalsAreRefusedWithWhatToDo() throws Exception {
    Stage s = new Stage(80, 24);
    TerminalOptions good = s.options(StandardCharsets.UTF_8);
    assertEquals(Optional.empty(), TextInterface.unusable(good, true));
    assertTrue(TextInterface.unusable(good, false).orElseThrow().contains("coilside ready"));
    TerminalOptions dumb =
        new TerminalOptions(
            false,
            false,
            false,
            false,
            StandardCharsets.UTF_8,
            Map.of("TERM", "dumb"),
            Path.of("crash.log"),
            SettingsStore.none(),
            "tester",
            () -> s.now);
    assertTrue(TextInterface.unusable(dumb, true).orElseThrow().contains("TERM=dumb"));
    assertTrue(TextInterface.tooSmall(70, 20).contains("70 x 20"));
  }

  @Test
  void aCrashIsLoggedAndToldInOneParagraph(@TempDir Path folder) throws Exception {
    Path log = folder.resolve("sub").resolve("crash.log");
    String told = TextInterface.crashed(new IllegalStateException("odd"), log);
    assertFalse(told.contains("\n"));
    assertTrue(told.contains("odd") && told.contains("crash.log"));
    assertTrue(Files.readString(log).contains("PartsTest"));
  }

  @Test
  void signalsCanBeTaken() {
    assertTrue(Signals.handle("USR2", name -> {}));
    assertFalse(Signals.handle("NOSUCH", name -> {}));
  }
}
