package coilside.report;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.bench.Conditions;
import coilside.bench.Finding;
import coilside.bench.LogRow;
import coilside.bench.Picture;
import coilside.bench.Refusal;
import coilside.bench.Rung;
import coilside.bench.RungStatus;
import coilside.quantity.Measured;
import coilside.quantity.Unit;
import coilside.signal.Fid;
import coilside.signal.Fourier;
import java.io.StringReader;
import java.time.Instant;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalDouble;
import javax.xml.parsers.DocumentBuilderFactory;
import org.junit.jupiter.api.Test;
import org.w3c.dom.Document;
import org.w3c.dom.Element;
import org.w3c.dom.NodeList;
import org.xml.sax.InputSource;

class ReportPageTest {
  private static final Instant NOW = Instant.parse("2026-11-03T10:00:00Z");
  private static final String HOSTILE =
      "</td><script>alert(1)</script>\u001b[31m\" onload='x' & \u202e\u0000";

  private static Finding nutation(String sample) {
    Map<String, Measured> values = new LinkedHashMap<>();
    values.put("pulse_90", Measured.of(1.1e-5, 9e-8, Unit.SECOND));
    values.put("b1_spread", Measured.withoutUncertainty(0.02, Unit.ONE, "too few widths"));
    return new Finding(
        "f-1",
        Rung.NUTATION,
        NOW.minusSeconds(600),
        1.9,
        14,
        values,
        List.of("warned of " + sample),
        Optional.empty(),
        new Conditions("b", "d", 8.0895e6, 0.5, 36, sample, "c", OptionalDouble.of(23.4)),
        "2026-11-03-095000-nutation",
        Map.of(),
        true);
  }

  private static Finding refused() {
    return new Finding(
        "f-2",
        Rung.T1,
        NOW.minusSeconds(60),
        1,
        64,
        Map.of(),
        List.of(),
        Optional.of(new Refusal("T1 is not determined", List.of("give more scans"))),
        nutation("x").conditions(),
        "",
        Map.of(),
        false);
  }

  private static Picture.Curve curve() {
    double[] x = {5e-6, 11e-6, 22e-6, 44e-6};
    double[] y = {6e-6, 1e-5, Double.NaN, -1e-6};
    double[] u = {1e-7, 1e-7, 1e-7, 0};
    return new Picture.Curve(
        Rung.NUTATION,
        "pulse width",
        "s",
        "amplitude",
        "V",
        x,
        y,
        u,
        new double[] {0, 11e-6, 44e-6},
        new double[] {0, 1e-5, 0},
        new double[] {44e-6},
        "90-degree pulse 11.00(9) µs");
  }

  private static Picture.Trace trace(int points) {
    double[] re = new double[points];
    double[] im = new double[points];
    for (int k = 0; k < points; k++) {
      re[k] = 1e-5 * Math.exp(-k / 300.0) * Math.cos(0.05 * k);
      im[k] = 1e-5 * Math.exp(-k / 300.0) * Math.sin(0.05 * k);
    }
    Fid fid = new Fid(re, im, 1e-4, 1e-4, 8e6);
    return new Picture.Trace(
        Rung.T2STAR,
        fid,
        Optional.of(fid),
        4,
        Optional.of(Fourier.spectrum(fid)),
        List.of("first samples left out"),
        "T2* 30.0(2) ms");
  }

  private static List<LogRow> log() {
    List<LogRow> rows = new ArrayList<>();
    for (int i = 0; i < 50; i++) {
      Map<String, Measured> values =
          i == 20
              ? Map.of()
              : Map.of("larmor_frequency", Measured.of(8089500 + 0.3 * i, 0.2, Unit.HERTZ));
      Instant at = NOW.plusSeconds(30L * i);
      String note = i == 20 ? "link lost " + HOSTILE : "";
      rows.add(new LogRow("r", i, at, at, values, OptionalDouble.empty(), 0, note, ""));
    }
    return rows;
  }

  private static String page(String sample) {
    List<RungStatus> ladder =
        List.of(
            new RungStatus(
                Rung.NUTATION,
                RungStatus.State.STALE,
                Optional.of(nutation(sample)),
                List.of("the sample changed")),
            new RungStatus(
                Rung.T1, RungStatus.State.REFUSED, Optional.of(refused()), List.of("refused")),
            new RungStatus(
                Rung.T2, RungStatus.State.MISSING, Optional.empty(), List.of("never measured")));
    return ReportPage.html(
        new Report(NOW, "board", sample, true, ladder, List.of(curve(), trace(5000)), log()));
  }

  @Test
  void thePageSaysWhatIsKnownAndHowWell() {
    String page = page("doped water");
    assertTrue(page.contains("11.000(90) µs"), page);
    assertTrue(page.contains("◐ stale"));
    assertTrue(page.contains("10 min"));
    assertTrue(page.contains("the sample changed"));
    assertTrue(page.contains("<b>Refused:</b> T1 is not determined"));
    assertTrue(page.contains("give more scans"));
    assertTrue(page.contains("○ missing"));
    assertTrue(page.contains("too few widths"));
    assertTrue(page.contains("capture 2026-11-03-095000-nutation"));
    assertTrue(page.contains("Measured on a simulated bench."));
    assertTrue(page.contains("not every rung is fresh"));
  }

  @Test
  void hostileTextStaysText() throws Exception {
    String page = page(HOSTILE);
    assertFalse(page.contains("<script"), "a script got through");
    assertTrue(page.chars().noneMatch(c -> c < 0x20 && c != '\n'));
    assertFalse(page.contains("\u202e"));
    parse(page);
  }

  @Test
  void nothingIsFetchedAndNothingRuns() {
    String page = page("oil");
    for (String word : List.of("http:", "https:", "src=", "href=", "url(", "@import", "<script")) {
      assertFalse(page.contains(word), word);
    }
  }

  /** The page is kept well-formed, so that a general XML reader can look into the pictures. */
  private static Document parse(String page) throws Exception {
    String xml =
        page.replace("<!DOCTYPE html>\n", "")
            .replaceAll("<(meta[^>]*)>", "<$1/>")
            .replace("<br>", "<br/>");
    return DocumentBuilderFactory.newInstance()
        .newDocumentBuilder()
        .parse(new InputSource(new StringReader(xml)));
  }

  @Test
  void picturesShowTheirPointsInsideTheFrame() throws Exception {
    Document page = parse(page("oil"));
    NodeList drawings = page.getElementsByTagName("svg");
    // Nutation; FID, residual, spectrum; one strip chart.
    assertEquals(5, drawings.getLength());
    Element nutation = (Element) drawings.item(0);
    NodeList dots = nutation.getElementsByTagName("circle");
    assertEquals(3, dots.getLength());
    double lastX = 0;
    for (int i = 0; i < dots.getLength(); i++) {
      double x = Double.parseDouble(((Element) dots.item(i)).getAttribute("cx"));
      double y = Double.parseDouble(((Element) dots.item(i)).getAttribute("cy"));
      assertTrue(x > lastX && x < 640, "x " + x);
      assertTrue(y > 0 && y < 300, "y " + y);
      lastX = x;
    }
    double top = Double.parseDouble(((Element) dots.item(1)).getAttribute("cy"));
    double bottom = Double.parseDouble(((Element) dots.item(2)).getAttribute("cy"));
    assertTrue(top < bottom, "larger values stand higher");
    for (int i = 0; i < drawings.getLength(); i++) {
      assertFalse(((Element) drawings.item(i)).getAttribute("aria-label").isBlank());
    }
  }

  @Test
  void aLongTraceKeepsThePageSmall() {
    String page =
        ReportPage.html(
            new Report(NOW, "b", "s", false, List.of(), List.of(trace(65536)), List.of()));
    assertTrue(page.length() < 250_000, page.length() + " characters");
  }

  @Test
  void ticksAreRoundAndCarryThePrefix() {
    Axis axis = new Axis("time", "s", 0, 0.0123);
    assertEquals("time / ms", axis.label());
    List<Double> ticks = axis.ticks(6);
    assertEquals("5", axis.tickText(0.005, 0.005));
    assertEquals(0.002, ticks.get(1) - ticks.get(0), 1e-12);
    assertEquals(new Axis("n", "V", 0, 1), Axis.around("n", "V", 0, new double[0]));
    Axis flat = Axis.around("n", "V", 0.1, new double[] {3, 3});
    assertTrue(flat.min() < 3 && flat.max() > 3);
  }
}
