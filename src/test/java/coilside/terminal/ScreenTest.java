package coilside.terminal;

import static org.junit.jupiter.api.Assertions.assertArrayEquals;
import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.bench.Picture;
import coilside.bench.Rung;
import coilside.bench.RungStatus;
import coilside.bench.Work;
import com.googlecode.lanterna.TerminalSize;
import com.googlecode.lanterna.input.KeyType;
import java.nio.charset.StandardCharsets;
import java.util.List;
import java.util.Map;
import java.util.stream.IntStream;
import org.junit.jupiter.api.Test;

/** What the operator sees and what the keys do, on Lanterna's virtual terminal. */
class ScreenTest {
  private static void assertShows(Stage stage, String... texts) {
    for (String text : texts) {
      assertTrue(stage.shows(text), "'" + text + "' is not on the screen:\n" + stage.text());
    }
  }

  @Test
  void aColdBenchSaysWhatIsMissingAndWhatToDo() throws Exception {
    Stage s = new Stage(80, 24);
    assertShows(s, "SIMULATED", "doped water", "teaching bench", "idle", "1 noise     ○ missing");
    assertShows(s, "8 t2        ○ missing", "Press r to bring the bench up to date", "q quit");
  }

  @Test
  void readyFillsTheLadderWithConciseValuesAndAges() throws Exception {
    Stage s = new Stage(80, 24);
    s.press("r");
    s.finish();
    assertShows(s, "8.089 432 17(12) MHz", "90° 11.020(90) µs", "201.2(6.1) ms", "8.31(11) ms");
    assertShows(s, "● fresh", "all rungs fresh");
    s.now = s.now.plusSeconds(7200);
    s.turn();
    assertShows(s, "2 h");
  }

  @Test
  void theShotShowsItsPartsWithFlipAngleOnceKnown() throws Exception {
    Stage s = new Stage(80, 24);
    s.press("l");
    IntStream.range(0, 3).forEach(i -> s.desk.advance());
    s.turn();
    assertShows(s, "rest", "dead", "receive 2048", "900ms", "60µs", "41.0ms", "11.0µs x");
    assertTrue(s.row(3).contains("//"), "the rest is not marked as cut: " + s.row(3));
    s.press("s");
    s.finish();
    s.press("r");
    s.finish();
    s.press("l");
    IntStream.range(0, 3).forEach(i -> s.desk.advance());
    s.turn();
    assertShows(s, "90° x", "live");
  }

  @Test
  void anEchoTrainLeavesRepeatsOutAndSaysHowMany() throws Exception {
    Stage s = new Stage(80, 24);
    s.press("r");
    s.finish();
    assertShows(s, "×63 more", "180° y");
  }

  @Test
  void theMovingMarkFollowsTheShot() throws Exception {
    Stage s = new Stage(80, 24);
    s.press("l");
    s.desk.advance();
    s.turn();
    int late = s.row(3).indexOf('▲');
    assertTrue(late > 70, "after its 0.94 s the mark stands at the end, is at " + late);
  }

  @Test
  void eachRungHasItsPictureWithAxesAndFit() throws Exception {
    Stage s = new Stage(80, 24);
    s.press("r");
    s.finish();
    s.press("5");
    assertShows(s, "nutation: amplitude", "12 points", "fit", "residual", "pulse width (µs)", "µV");
    assertShows(s, "90-degree pulse 11.02(9) us");
    s.press("6");
    assertShows(s, "t1: amplitude", "time (s)");
    s.press("7");
    assertShows(s, "FID, real", "residual", "time (ms)");
    s.press("u");
    assertShows(s, "spectrum, real", "line at 12", "offset (");
    s.press("1");
    assertShows(s, "no line above 5 sigma", "░ noise");
    s.press("2");
    assertShows(s, "resonance: detection", "carrier (MHz)", "sigma");
  }

  @Test
  void pointsArriveWithTheNextWidthMarked() throws Exception {
    Stage s = new Stage(80, 24);
    s.press("5m");
    IntStream.range(0, 13).forEach(i -> s.desk.advance());
    s.turn();
    assertShows(s, "3 points", "◇ next", "measuring", "scan 3 of 12");
  }

  @Test
  void liveShowsHeadlineNumbersWithUncertaintyTrendAndBest() throws Exception {
    Stage s = new Stage(80, 24);
    s.press("l");
    for (int i = 0; i < 60; i++) {
      s.desk.advance();
    }
    s.turn();
    assertShows(s, "linewidth 3", "best", "T2* 8.", "30.1 µV", "SNR 7", "8.089532 MHz");
    s.press("g");
    assertShows(s, "linewidth in Hz", "████");
    s.press("n");
    assertShows(s, "T2* in ms");
    s.press("qs");
    s.finish();
    assertShows(s, "idle");
  }

  @Test
  void aNewBestRingsTheBellOnlyWhenAskedTo() throws Exception {
    Stage quiet = new Stage(80, 24);
    quiet.press("l");
    for (int i = 0; i < 90; i++) {
      quiet.desk.advance();
      quiet.turn();
    }
    assertEquals(0, quiet.bells);
    Stage loud = new Stage(80, 24);
    loud.press("Bl");
    for (int i = 0; i < 90; i++) {
      loud.desk.advance();
      loud.turn();
    }
    assertTrue(loud.bells > 0);
    assertTrue(loud.bells < 30, loud.bells + " bells in 30 scans");
  }

  @Test
  void aStaleRungTellsWhyAndWhatRestsOnIt() throws Exception {
    Stage s = new Stage(80, 24);
    s.press("r");
    s.finish();
    s.desk.state(Rung.NUTATION, RungStatus.State.STALE, List.of("the sample has changed"));
    s.desk.tell(new coilside.bench.Progress.LadderChanged(s.desk.ladder()));
    s.turn();
    assertShows(s, "◐ stale");
    s.press("5i");
    assertShows(s, "because the sample has changed", "nutation rate", "532.9(4.4) µT");
    s.press(KeyType.End);
    assertShows(s, "Rests on", "Rests on it", "History, newest first");
    s.press("q");
    assertFalse(s.shows("Rests on it"));
  }

  @Test
  void aChangedSampleIsPricedBeforeItIsTakenOver() throws Exception {
    Stage s = new Stage(80, 24);
    s.press("r");
    s.finish();
    s.press("ee");
    s.press(" 2");
    assertShows(s, "Would make stale: nutation, t1, t2star, t2");
    assertEquals("doped water", s.desk.settings().sample());
    s.press(KeyType.Enter);
    assertEquals("doped water 2", s.desk.settings().sample());
    s.press("q");
    assertShows(s, "sample is now doped water 2; 4 rungs are stale, r measures.", "◐ stale");
  }

  @Test
  void aSettingOutOfRangeIsRefusedWithTheRange() throws Exception {
    Stage s = new Stage(80, 24);
    s.press("e");
    s.press("nn");
    s.press("e");
    s.ctrl('u');
    s.press("900MHz");
    assertShows(s, "900 MHz is outside 1 MHz to 30 MHz");
    s.press(KeyType.Enter);
    assertEquals(7.9e6, s.desk.settings().searchLowHertz());
    s.ctrl('u');
    s.press("8 MHz");
    s.press(KeyType.Enter);
    assertEquals(8e6, s.desk.settings().searchLowHertz());
  }

  @Test
  void aRealBoardTransmitsOnlyAfterTheCautions() throws Exception {
    Stage s = new Stage(80, 24, false, StandardCharsets.UTF_8, Map.of());
    assertShows(s, "locked, may not transmit");
    s.press("r");
    assertEquals(0, s.desk.begun());
    assertShows(s, "people or animals", "implants", "hands off", "Press y to arm");
    s.press("q");
    assertEquals(0, s.desk.begun());
    assertFalse(s.desk.armed());
    s.press("ry");
    assertTrue(s.desk.armed());
    assertEquals("tester", s.desk.armedBy);
    assertEquals(1, s.desk.begun());
    assertShows(s, "ARMED, may transmit");
    s.press("s");
    s.finish();
    s.press("a");
    assertFalse(s.desk.armed());
  }

  @Test
  void listeningNeedsNoArming() throws Exception {
    Stage s = new Stage(80, 24, false, StandardCharsets.UTF_8, Map.of());
    s.press("o");
    assertEquals(1, s.desk.begun());
    s.desk.playSome(10);
    s.turn();
    assertShows(s, "listening");
  }

  @Test
  void changingFromLiveToListeningWaitsForTheEnd() throws Exception {
    Stage s = new Stage(80, 24);
    s.press("l");
    s.desk.playSome(5);
    s.press("o");
    assertEquals(1, s.desk.begun());
    s.desk.advance();
    s.turn();
    assertEquals(2, s.desk.begun());
    assertShows(s, "listening");
  }

  @Test
  void helpNamesOnlyWhatWorksNow() throws Exception {
    Stage s = new Stage(120, 60);
    s.press("?");
    assertShows(s, "Ready: bring every rung up to date");
    assertFalse(s.shows("Stop the work in hand"));
    s.press("qr?");
    assertFalse(s.shows("Ready: bring every rung up to date"));
    assertShows(s, "Stop the work in hand");
  }

  @Test
  void actionsAreFoundByWord() throws Exception {
    Stage s = new Stage(80, 24);
    s.press("/shim");
    assertShows(s, "Live: tune and shim");
    s.press(KeyType.Enter);
    assertEquals(1, s.desk.begun());
    assertShows(s, "live");
  }

  @Test
  void messagesStayReadable() throws Exception {
    Stage s = new Stage(80, 24);
    for (int i = 0; i < 40; i++) {
      s.desk.tell(new coilside.bench.Progress.Message(i % 2 == 0, "message " + i));
    }
    s.turn();
    assertTrue(s.row(22).contains("message 39"));
    s.press("h");
    assertShows(s, "message 30");
    s.press(KeyType.Home);
    assertShows(s, "message 0");
  }

  @Test
  void quittingAtWorkAsksAndQuittingIdleDoesNot() throws Exception {
    Stage s = new Stage(80, 24);
    s.press("r");
    s.press("q");
    assertFalse(s.cockpit.done());
    assertShows(s, "will be stopped");
    s.press("q");
    assertFalse(s.cockpit.done());
    s.press("qy");
    assertTrue(s.cockpit.done());
    Stage idle = new Stage(80, 24);
    idle.press("q");
    assertTrue(idle.cockpit.done());
    Stage hasty = new Stage(80, 24);
    hasty.press("r");
    hasty.ctrl('c');
    assertTrue(hasty.cockpit.interrupted());
  }

  @Test
  void cursorZoomPartAndScaleAct() throws Exception {
    Stage s = new Stage(120, 40);
    s.press("r");
    s.finish();
    s.press("7");
    s.press("c");
    assertShows(s, "ms  real");
    s.press("z");
    assertShows(s, "zoomed ×2");
    s.press("v");
    assertShows(s, "FID, imaginary");
    s.press("v");
    assertShows(s, "FID, magnitude");
    s.press("y");
    assertShows(s, "log");
  }

  @Test
  void aClickChoosesARungOrPlacesTheCursor() throws Exception {
    Stage s = new Stage(80, 24);
    s.press("r");
    s.finish();
    assertFalse(s.cockpit.look().mouse);
    s.press("M");
    assertTrue(s.cockpit.look().mouse);
    s.click(3, 14);
    assertEquals(Rung.NUTATION, s.cockpit.look().chosen);
    s.press("7");
    s.click(60, 9);
    assertTrue(s.cockpit.pictures().focused().orElseThrow().cursorOn());
    assertShows(s, " ms  real ");
  }

  @Test
  void theSpectrumListsItsLinesAndItsNoiseInHertzOrPpm() throws Exception {
    Stage s = new Stage(160, 50);
    s.press("r");
    s.finish();
    s.press("7u");
    s.press(KeyType.Tab);
    assertShows(s, "offset (Hz)", "     width ", "widths and areas include the window");
    assertShows(s, "noise level ");
    s.press("j");
    assertShows(s, "offset (ppm)");
  }

  @Test
  void aFittedCurveShowsItsUncertainty() {
    double[] x = {0, 1, 2};
    double[] y = {0, 0.5, 1};
    double[] u = {0.1, 0.2, 0.3};
    Picture.Curve curve =
        new Picture.Curve(
            Rung.T1, "recovery time", "s", "signal", "V", x, y, u, x, y, u, new double[0], "");
    List<Series> series = PictureModels.of(curve, Part.REAL, false, "").get(0).series();
    Series band = series.stream().filter(v -> v.form() == Series.Form.BAND).findAny().orElseThrow();
    assertArrayEquals(u, band.u());
    assertArrayEquals(y, band.y());
  }

  @Test
  void aStaleRungSaysWhyBesideItsPicture() throws Exception {
    Stage s = new Stage(80, 24);
    s.press("r");
    s.finish();
    s.desk.apply(s.desk.settings().withSample("cooking oil"));
    s.press("7");
    assertShows(s, "stale: ");
  }

  @Test
  void keysFasterThanFramesMeanThePictureChosen() throws Exception {
    Stage s = new Stage(120, 40);
    s.press("r");
    s.finish();
    s.press("7");
    s.cockpit.key(Key.of('5'));
    s.cockpit.key(Key.of('c'));
    s.turn();
    s.turn();
    assertShows(s, "nutation: amplitude", "µs  fit");
    s.press("7");
    assertFalse(s.shows("ms  real"));
  }

  @Test
  void lookIsKeptForTheNextStart() throws Exception {
    Stage s = new Stage(80, 24);
    s.press("5tw");
    Stage again = new Stage(80, 24, true, StandardCharsets.UTF_8, s.kept);
    assertEquals(Rung.NUTATION, again.cockpit.look().chosen);
    assertEquals(DrawingStyle.BLOCK, again.cockpit.look().style);
    assertTrue(again.cockpit.look().wide);
  }

  @Test
  void withoutUtf8EverythingIsAscii() throws Exception {
    Stage s = new Stage(80, 24, true, StandardCharsets.US_ASCII, Map.of());
    s.press("r");
    s.finish();
    for (String keys : List.of("5", "7", "u", "i", "qe", "qg", "q?", "ql")) {
      s.press(keys);
      s.desk.playSome(6);
      s.turn();
      String text = s.text();
      assertTrue(text.chars().allMatch(c -> c < 127), keys + "\n" + text);
    }
  }

  @Test
  void hostileTextCannotReachTheTerminal() throws Exception {
    Stage s = new Stage(80, 24);
    s.desk.tell(new coilside.bench.Progress.Message(true, "a\u001b[2Jb\u202ec\u0007d\u009be"));
    s.turn();
    assertTrue(s.row(22).contains("a?[2Jb?c?d?e"), s.row(22));
  }

  @Test
  void tooSmallAsksForRoomAndComesBack() throws Exception {
    Stage s = new Stage(80, 24);
    s.terminal.setTerminalSize(new TerminalSize(60, 20));
    s.turn();
    assertShows(s, "80 x 24 is needed", "here is 60 x 20");
    s.terminal.setTerminalSize(new TerminalSize(200, 60));
    s.turn();
    assertShows(s, "1 noise", "q quit");
  }

  @Test
  void aLargeScreenShowsMoreOfEachRungAndPlotsSideBySide() throws Exception {
    Stage s = new Stage(200, 60);
    s.press("r");
    s.finish();
    s.press("7");
    assertShows(s, "rate 22.69(19) kHz", "repeat every 1.006(30) s", "width 38.30(50) Hz");
    assertTrue(
        s.text().lines().anyMatch(l -> l.contains("FID, real") && l.contains("spectrum, real")));
  }

  @Test
  void theLogDrawsStripChartsWithGapsCounted() throws Exception {
    Stage s = new Stage(80, 24);
    s.press("k");
    s.desk.playSome(200);
    s.turn();
    assertShows(s, "Larmor frequency less 8.08943", "linewidth", "gaps", "logging");
    assertEquals(1, s.desk.begun());
  }

  @Test
  void ctrlZWaitsWhileTheBenchIsAtWork() throws Exception {
    Stage s = new Stage(80, 24);
    s.press("r");
    s.ctrl('z');
    assertEquals(0, s.suspends);
    s.finish();
    s.ctrl('z');
    assertEquals(1, s.suspends);
  }

  @Test
  void theWorkAskedForIsTheWorkBegun() throws Exception {
    Stage s = new Stage(80, 24);
    s.press("5");
    s.press(KeyType.Enter);
    assertEquals(new Work.Measure(Rung.NUTATION), s.watch.snapshotWork().orElseThrow());
  }
}
