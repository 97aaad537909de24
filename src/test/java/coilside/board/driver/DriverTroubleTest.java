package coilside.board.driver;

import static coilside.board.driver.TalkingLink.latin;
import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.Board;
import coilside.board.BoardException;
import coilside.board.BoardException.BadAnswer;
import coilside.board.BoardException.LinkLost;
import coilside.board.BoardException.Refused;
import coilside.board.BoardException.Silent;
import coilside.board.BoardException.Stopped;
import coilside.board.profile.ChecksumKind;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.ProfileReader;
import coilside.board.wire.Checksum;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.shot.Step;
import coilside.shot.Wait;
import coilside.signal.Fid;
import coilside.signal.Scan;
import java.io.ByteArrayOutputStream;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Clock;
import java.util.List;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;

/** What the driver does when a board does not do its part. */
@Timeout(20)
class DriverTroubleTest {
  private static final byte[] NOTHING = {};

  private static DeviceProfile shipped(String name) {
    return ProfileReader.read(Path.of("device-profiles", name + ".toml")).profile().orElseThrow();
  }

  private static final DeviceProfile PLAIN = shipped("plain-line-console");
  private static final DeviceProfile SCPI = shipped("scpi-console");

  /** The plain-line board as it should be: 16 points of one constant. */
  private static byte[] plain(String command) {
    if (command.equals("who")) {
      return latin("plain-line console 2.1\r\n");
    }
    if (command.startsWith("go ")) {
      return join(latin("ok\r\n"), block("data 0 64\r\n", 0), latin("done\r\n"));
    }
    return latin("ok\r\n");
  }

  private static byte[] join(byte[]... parts) {
    ByteArrayOutputStream out = new ByteArrayOutputStream();
    for (byte[] part : parts) {
      out.writeBytes(part);
    }
    return out.toByteArray();
  }

  private static byte[] block(String header, int damage) {
    byte[] samples = new byte[64];
    for (int k = 0; k < 64; k += 2) {
      samples[k + 1] = (byte) 0x81;
    }
    byte[] body = join(latin(header), samples);
    long crc = Checksum.of(ChecksumKind.CRC16_XMODEM, body, 0, body.length);
    body[body.length - 3] ^= (byte) damage;
    return join(body, new byte[] {(byte) (crc >> 8), (byte) crc}, latin("\r\n"));
  }

  private static Board open(DeviceProfile profile, TalkingLink link) throws BoardException {
    Board board = Boards.open(profile, link, link, Clock.systemUTC(), false);
    board.arm();
    link.heard.clear();
    return board;
  }

  private static Shot shot(Step... steps) {
    return new Shot(8.09e6, 20, 0.5, List.of(steps));
  }

  private static final Receive WINDOW = new Receive(16, 10e-6, 0);

  private static Shot usual() {
    return shot(new Pulse(10e-6, 0, 0.5), new Wait(20e-6), WINDOW);
  }

  @Test
  void aSilentBoardIsGivenUpWithAdvice() {
    TalkingLink link = new TalkingLink(c -> NOTHING);
    Silent silent = assertThrows(Silent.class, () -> open(PLAIN, link));
    assertTrue(silent.getMessage().contains("'who'"), silent.getMessage());
    assertTrue(silent.getMessage().contains("line ends"), silent.getMessage());
    assertTrue(link.closed);
    assertTrue(link.getAsLong() < 3e9, "after " + link.getAsLong() * 1e-9 + " s");
  }

  @Test
  void anotherBoardIsToldApart() {
    TalkingLink link = new TalkingLink(c -> latin("toaster \u001b[31m 5\r\n"));
    BadAnswer wrong = assertThrows(BadAnswer.class, () -> open(PLAIN, link));
    assertTrue(wrong.getMessage().contains("'toaster .[31m 5'"), wrong.getMessage());
    assertTrue(wrong.getMessage().contains("profile and port"), wrong.getMessage());
  }

  @Test
  void linesOfABootingBoardArePassedOver() throws BoardException {
    TalkingLink link =
        new TalkingLink(
            c -> c.equals("who") ? join(latin("\u0000\u00ffboot\r\n"), plain(c)) : plain(c));
    assertEquals("plain-line console 2.1", open(PLAIN, link).identity().name());
  }

  @Test
  void aRefusalIsSaidInTheBoardsWordsAndEverythingIsSentAfresh() throws BoardException {
    TalkingLink link =
        new TalkingLink(c -> c.startsWith("pulse") ? latin("err 17 too \u0007hot\r\n") : plain(c));
    Board board = open(PLAIN, link);
    Refused refused = assertThrows(Refused.class, () -> board.play(usual()));
    assertTrue(refused.getMessage().contains("17 'too .hot'"), refused.getMessage());
    assertEquals("halt", link.heard.get(link.heard.size() - 1));
    assertTrue(link.heard.stream().noneMatch(c -> c.startsWith("go ")));
    link.heard.clear();
    link.board = DriverTroubleTest::plain;
    board.play(usual());
    assertEquals("carrier 8090000", link.heard.get(0));
    assertEquals(8, link.heard.size());
  }

  @Test
  void aDamagedBlockIsPlayedAgainAndNeverUsed() throws BoardException {
    int[] runs = {0};
    TalkingLink link = new TalkingLink(DriverTroubleTest::plain);
    Board board = open(PLAIN, link);
    link.board =
        c ->
            c.startsWith("go ") && runs[0]++ == 0
                ? join(latin("ok\r\n"), block("data 0 64\r\n", 0x40), latin("done\r\n"))
                : plain(c);
    Scan scan = board.play(usual());
    assertEquals(1, scan.retries());
    for (int k = 0; k < scan.fid().points(); k++) {
      assertEquals(256 * 45.8e-6 / 10, scan.fid().re(k), 1e-12);
    }
    assertTrue(link.heard.contains("halt"));
  }

  @Test
  void alwaysDamagedMeansAnErrorAfterThreeTries() throws BoardException {
    TalkingLink link = new TalkingLink(DriverTroubleTest::plain);
    Board board = open(PLAIN, link);
    link.board =
        c ->
            c.startsWith("go ")
                ? join(latin("ok\r\n"), block("data 0 64\r\n", 1), latin("done\r\n"))
                : plain(c);
    BadAnswer bad = assertThrows(BadAnswer.class, () -> board.play(usual()));
    assertTrue(bad.getMessage().contains("checksum"), bad.getMessage());
    assertEquals(3, link.heard.stream().filter(c -> c.startsWith("go ")).count());
  }

  @Test
  void anEndMarkBeforeTheSamplesIsABadAnswer() throws BoardException {
    TalkingLink link = new TalkingLink(DriverTroubleTest::plain);
    Board board = open(PLAIN, link);
    link.board = c -> c.startsWith("go ") ? latin("ok\r\ndone\r\n") : plain(c);
    BadAnswer bad = assertThrows(BadAnswer.class, () -> board.play(usual()));
    assertTrue(bad.getMessage().contains("end mark came before"), bad.getMessage());
  }

  @Test
  void noSamplesMeansSilentAfterShotWireAndLimit() throws BoardException {
    TalkingLink link = new TalkingLink(DriverTroubleTest::plain);
    Board board = open(PLAIN, link);
    link.board = c -> c.startsWith("go ") ? NOTHING : plain(c);
    long from = link.getAsLong();
    assertThrows(Silent.class, () -> board.play(usual()));
    double waited = (link.getAsLong() - from) * 1e-9;
    // 0.5 s of shot, half a second of limit.
    assertTrue(waited > 1.0 && waited < 1.5, waited + " s");
    assertEquals("halt", link.heard.get(link.heard.size() - 1));
  }

  @Test
  void aBoardThatIsAskedTellsWhyThereAreNoSamples() throws BoardException {
    boolean[] ran = {false};
    TalkingLink link =
        new TalkingLink(
            c -> {
              if (c.equals("*IDN?")) {
                return latin("Coilside Examples,SC-20,0,1.4\n");
              }
              if (c.startsWith(":SHOT:RUN")) {
                ran[0] = true;
              }
              if (c.equals(":SYSTEM:ERROR?")) {
                boolean tell = ran[0];
                ran[0] = false;
                return latin(tell ? "-221,\"Settings conflict\"\n" : "0,\"No error\"\n");
              }
              return NOTHING;
            });
    Board board = open(SCPI, link);
    Refused refused = assertThrows(Refused.class, () -> board.play(usual()));
    assertTrue(refused.getMessage().contains("-221 'Settings conflict'"), refused.getMessage());
    assertEquals(":ABORT", link.heard.get(link.heard.size() - 1));
  }

  @Test
  void aLostLinkIsSaid() throws BoardException {
    TalkingLink link = new TalkingLink(DriverTroubleTest::plain);
    Board board = open(PLAIN, link);
    link.board = c -> NOTHING;
    link.whenWaitingInVain = () -> link.lost = true;
    LinkLost lost = assertThrows(LinkLost.class, () -> board.play(usual()));
    assertTrue(lost.getMessage().contains("cable"), lost.getMessage());
    board.close();
    board.close();
    assertTrue(link.closed);
  }

  @Test
  void stopEndsAScanAndReachesTheBoard() throws BoardException {
    TalkingLink link = new TalkingLink(DriverTroubleTest::plain);
    Board board = open(PLAIN, link);
    link.board = c -> c.startsWith("go ") ? latin("ok\r\n") : plain(c);
    link.whenWaitingInVain = board::stop;
    long from = link.getAsLong();
    assertThrows(Stopped.class, () -> board.play(usual()));
    assertTrue(link.getAsLong() - from < 100_000_000L);
    assertEquals("halt", link.heard.get(link.heard.size() - 1));
    assertEquals(1, link.heard.stream().filter("halt"::equals).count());
  }

  @Test
  void stopFromAnotherThreadEndsAScan() throws Exception {
    TalkingLink link = new TalkingLink(DriverTroubleTest::plain);
    Board board = open(PLAIN, link);
    link.board = c -> c.startsWith("go ") ? latin("ok\r\n") : plain(c);
    Thread[] stopper = {null};
    link.whenWaitingInVain =
        () -> {
          if (stopper[0] == null) {
            stopper[0] = new Thread(board::stop, "stopper");
            stopper[0].start();
            try {
              stopper[0].join();
            } catch (InterruptedException e) {
              throw new IllegalStateException(e);
            }
          }
        };
    assertThrows(Stopped.class, () -> board.play(usual()));
    assertEquals("halt", link.heard.get(link.heard.size() - 1));
  }

  @Test
  void aChatteringBoardIsEndedByTheDeadline() throws BoardException {
    TalkingLink link = new TalkingLink(DriverTroubleTest::plain);
    Board board = open(PLAIN, link);
    byte[] chatter = latin("blah\r\n".repeat(100));
    link.board = c -> c.startsWith("go ") ? latin("ok\r\n") : plain(c);
    link.whenWaitingInVain = () -> link.say(chatter);
    BadAnswer bad = assertThrows(BadAnswer.class, () -> board.play(usual()));
    assertTrue(bad.getMessage().contains("blah"), bad.getMessage());
  }

  @Test
  void aPhaseTheBoardCannotSayIsRefusedBeforeItRuns() throws BoardException {
    TalkingLink link = new TalkingLink(DriverTroubleTest::plain);
    Board board = open(PLAIN, link);
    Refused refused =
        assertThrows(
            Refused.class, () -> board.play(shot(new Pulse(10e-6, Math.PI / 4, 0.5), WINDOW)));
    assertTrue(refused.getMessage().contains("45.0 deg"), refused.getMessage());
    assertTrue(link.heard.stream().noneMatch(c -> c.startsWith("go ")));
  }

  @Test
  void phasesOfAFullTurnAreSentAsNone() throws BoardException {
    TalkingLink link = new TalkingLink(DriverTroubleTest::plain);
    Board board = open(PLAIN, link);
    board.play(shot(new Pulse(10e-6, 2 * Math.PI - 1e-9, 0.5), WINDOW));
    assertTrue(link.heard.contains("pulse 10.0 0 50.0"), link.heard.toString());
    board.play(shot(new Pulse(10e-6, -Math.PI / 2, 0.5), WINDOW));
    assertTrue(link.heard.contains("pulse 10.0 3 50.0"), link.heard.toString());
  }

  @Test
  void nonsenseTemperaturesAreNotBelieved() throws BoardException {
    TalkingLink link = new TalkingLink(c -> c.equals("temp") ? latin("temp 999.9\r\n") : plain(c));
    Board board = open(PLAIN, link);
    assertThrows(BadAnswer.class, board::temperature);
  }

  @Test
  void aTooShortWindowIsRefused() throws Exception {
    String text =
        Files.readString(Path.of("device-profiles", "plain-line-console.toml"))
            .replace("lost_samples = 2", "lost_samples = 16");
    DeviceProfile profile =
        ProfileReader.read("x.toml", text.getBytes(StandardCharsets.UTF_8)).profile().orElseThrow();
    TalkingLink link = new TalkingLink(DriverTroubleTest::plain);
    Board board = open(profile, link);
    Refused refused = assertThrows(Refused.class, () -> board.play(usual()));
    assertTrue(refused.getMessage().contains("lost to the receive filter"));
    assertEquals(List.of(), link.heard.stream().filter(c -> c.startsWith("go")).toList());
  }

  /** No phases on the wire: the host turns the samples; no {rest}: the host lets it pass. */
  @Test
  void theSimplestBoardIsHelpedByTheHost() throws Exception {
    String text =
        Files.readString(Path.of("device-profiles", "pulse-and-receive.toml"))
            .replace(" {rest}\"", "\"");
    DeviceProfile profile =
        ProfileReader.read("x.toml", text.getBytes(StandardCharsets.UTF_8)).profile().orElseThrow();
    byte[] samples = new byte[64];
    for (int k = 0; k < 64; k += 4) {
      samples[k + 3] = 1; // Q first: Q = 0, I = 256
    }
    TalkingLink link =
        new TalkingLink(
            c -> {
              if (c.equals("?")) {
                return latin("pulse-and-receive 1.0\n");
              }
              return c.startsWith("shoot")
                  ? join(latin("yes\nsamples 16\n"), samples, latin("\n"))
                  : latin("yes\n");
            });
    Board board = open(profile, link);
    long from = link.getAsLong();
    Scan scan =
        board.play(
            shot(
                new Pulse(10e-6, Math.PI / 2, 1),
                new Wait(20e-6),
                new Receive(16, 10e-6, Math.PI)));
    assertEquals(List.of("carrier 8090.000", "gain 20", "shoot 10.0 20.0 16 10.0"), link.heard);
    assertTrue(link.getAsLong() - from >= 500_000_000L);
    // Turned by the pulse's 90 deg and back by the receiver's 180: -90 deg.
    Fid fid = scan.fid();
    assertEquals(0, fid.re(0), 1e-12);
    assertEquals(-256 * 30.5e-6 / 10, fid.im(0), 1e-12);
    assertEquals(25e-6, fid.startSeconds(), 1e-15);
    assertTrue(scan.restSeconds() >= 0.5);
    Refused refused =
        assertThrows(
            Refused.class,
            () ->
                board.play(
                    shot(new Pulse(20e-6, 0, 1), new Wait(1e-3), new Pulse(10e-6, 0, 1), WINDOW)));
    assertTrue(refused.getMessage().contains("only one pulse"), refused.getMessage());
  }

  /** A board that lives by the clock rests longer when the host dawdles; one that does not, not. */
  @Test
  void theRestIsToldAsItWas() throws BoardException {
    TalkingLink link = new TalkingLink(DriverTroubleTest::plain);
    Board board = open(PLAIN, link);
    long[] due = {Long.MAX_VALUE};
    link.board =
        c -> {
          if (c.startsWith("go ")) {
            due[0] = link.getAsLong() + 500_190_000L;
            return latin("ok\r\n");
          }
          return plain(c);
        };
    link.whenWaitingInVain =
        () -> {
          if (link.getAsLong() >= due[0]) {
            due[0] = Long.MAX_VALUE;
            link.say(join(block("data 0 64\r\n", 0), latin("done\r\n")));
          }
        };
    assertEquals(0.5, board.play(usual()).restSeconds());
    link.pass(2_000_000_000L);
    assertEquals(2.5, board.play(usual()).restSeconds(), 0.05);

    TalkingLink fast = new TalkingLink(DriverTroubleTest::plain);
    Board ahead = open(PLAIN, fast);
    ahead.play(usual());
    fast.pass(2_000_000_000L);
    assertEquals(0.5, ahead.play(usual()).restSeconds());
  }

  /** The board of the reference page's worked example, as its sheet describes it. */
  @Test
  void theWorkedExampleOfTheReferencePageWorks() throws Exception {
    StringBuilder toml = new StringBuilder();
    Matcher m =
        Pattern.compile("(?s)```toml\n(.*?)```")
            .matcher(Files.readString(Path.of("device-profiles", "README.md")));
    while (m.find()) {
      toml.append(m.group(1).replaceAll("(?m)^   ", "")).append('\n');
    }
    DeviceProfile profile =
        ProfileReader.read("magnet-box.toml", toml.toString().getBytes(StandardCharsets.UTF_8))
            .profile()
            .orElseThrow();
    byte[] samples = new byte[4 * 2048];
    samples[0] = 100; // I of the first point
    samples[2] = -100; // Q of the first point, low byte of -100
    samples[3] = -1;
    TalkingLink link =
        new TalkingLink(
            c -> {
              if (c.equals("?")) {
                return latin("magnet-box 2\n");
              }
              return c.startsWith("shot ")
                  ? join(latin("+\nn=2048\n"), samples)
                  : c.matches("freq [0-9.]+|att [0-9]+") ? latin("+\n") : latin("-what?\n");
            });
    Board board = open(profile, link);
    assertEquals("magnet-box 2", board.identity().name());
    Scan scan =
        board.play(
            new Shot(
                8.09e6,
                28,
                0.5,
                List.of(new Pulse(10e-6, 0, 1), new Wait(50e-6), new Receive(2048, 5e-6, 0))));
    assertEquals(List.of("freq 8.090000", "att 12", "shot 10 50 2048 5"), link.heard);
    double volts = 100 * 30.5e-6 / Math.pow(10, 28 / 20.0);
    assertEquals(volts, scan.fid().re(0), 1e-12);
    assertEquals(-volts, scan.fid().im(0), 1e-12);
    assertEquals(55e-6, scan.fid().startSeconds(), 1e-15);
    link.heard.clear();
    board.play(new Shot(8.09e6, 28, 0.5, List.of(new Receive(2048, 5e-6, 0))));
    assertEquals(List.of("freq 8.090000", "att 12", "shot 0 0 2048 5"), link.heard);
  }
}
