package coilside.board.simulated;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertNotEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.profile.DeviceProfile;
import coilside.board.profile.ProfileReader;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Optional;
import java.util.Random;
import org.junit.jupiter.api.Test;

/** The firmware behaves as a board: limits, errors, stops, faults, time. */
class FirmwareTest {
  private final ToneBench bench = new ToneBench(1e-3, 8.0937e6, 21);
  private long now;

  private Firmware firmware(String profile, boolean paced, FirmwareFaults faults) {
    return new Firmware(
        FirmwareExchangeTest.profile(profile),
        new FirmwareAdc(FirmwareExchangeTest.profile(profile), bench),
        paced,
        faults);
  }

  private Firmware scpi() {
    return firmware("scpi-console", false, FirmwareFaults.none());
  }

  private Firmware plain(FirmwareFaults faults) {
    Firmware f = firmware("plain-line-console", false, faults);
    f.connect();
    assertEquals("plain-line console 2.1 ready\r\n", said(f));
    return f;
  }

  private void tell(Firmware firmware, String text) {
    byte[] bytes = text.getBytes(StandardCharsets.ISO_8859_1);
    firmware.hear(bytes, 0, bytes.length, now);
  }

  private String said(Firmware firmware) {
    StringBuilder out = new StringBuilder();
    for (Optional<byte[]> next = firmware.say(now); next.isPresent(); next = firmware.say(now)) {
      out.append(new String(next.get(), StandardCharsets.ISO_8859_1));
    }
    return out.toString();
  }

  private String answer(Firmware firmware, String text) {
    tell(firmware, text);
    return said(firmware);
  }

  @Test
  void whatIsOverTheBoardsLimitsIsRefusedInItsOwnWords() {
    Firmware f = plain(FirmwareFaults.none());
    assertEquals("ok\r\n", answer(f, "new\n"));
    assertEquals("ok\r\n", answer(f, "pulse 500.0 0 100.0\n"));
    assertEquals(
        "err 222 Data out of range;pulse width 5.001E-4 outside 1.0E-6..5.0E-4 s\r\n",
        answer(f, "pulse 500.1 0 100.0\n"));
    assertTrue(answer(f, "pulse 0.9 0 100.0\n").startsWith("err 222 "));
    assertTrue(answer(f, "pulse 10.0 0 100.1\n").startsWith("err 222 "));
    assertTrue(answer(f, "wait 0.5\n").startsWith("err 222 "));
    assertTrue(answer(f, "listen 15 10.0\n").startsWith("err 222 "));
    assertTrue(answer(f, "listen 32769 10.0\n").startsWith("err 222 "));
    assertTrue(answer(f, "listen 1000 0.9\n").startsWith("err 222 "));
    assertTrue(answer(f, "listen 32768 1000.0\n").startsWith("err 222 "), "6 s of samples");
    assertTrue(answer(f, "carrier 999999\n").startsWith("err 222 "));
    assertTrue(answer(f, "gain 49\n").startsWith("err 222 "));
    // A shot of which a step was refused must not be played.
    assertEquals("ok\r\n", answer(f, "listen 16 10.0\n"));
    assertEquals("ok\r\n", answer(f, "end\n"));
    assertEquals(
        "err 221 Settings conflict;a step of this shot was refused\r\n",
        answer(f, "go 1 500.0000\n"));
    assertEquals("ok\r\n", answer(f, "new\n"));
    assertEquals("ok\r\n", answer(f, "pulse 10.0 0 50.0\n"));
    assertEquals("ok\r\n", answer(f, "listen 16 10.0\n"));
    assertTrue(answer(f, "go 1 500.0000\n").startsWith("err 221 "), "not ended");
    assertEquals("ok\r\n", answer(f, "end\n"));
    assertTrue(answer(f, "go 1 0.1000\n").startsWith("err 221 "), "shorter than the shot");
    assertTrue(answer(f, "go 1 500.0000\n").startsWith("ok\r\ndata 0 64\r\n"));
  }

  @Test
  void aRunOverTheBoardsDutyCycleIsRefusedAndTheNextOneMayCome() {
    Firmware f = plain(FirmwareFaults.none());
    answer(f, "new\npulse 500.0 0 100.0\nlisten 16 1.0\nend\n");
    // 0.5 ms on in every 4 ms is 12.5 %, the board's limit 10 % of any second.
    String refused = answer(f, "go 1000 4.0000\n");
    assertTrue(refused.startsWith("err 221 Settings conflict;transmitter on for 10.0"), refused);
    assertTrue(refused.endsWith(" % of 1.000 s, limit 10.00 %\r\n"), refused);
    assertTrue(answer(f, "go 200 4.0000\n").startsWith("ok\r\n"), "as many as a second stands");
    assertTrue(answer(f, "go 1 4.0000\n").startsWith("err 221 "), "the second is not over yet");
    now += 1_000_000_000L;
    assertTrue(answer(f, "go 1 4.0000\n").startsWith("ok\r\n"));
    // 0.5 ms in every 5 ms is the limit itself.
    now += 10_000_000_000L;
    assertTrue(answer(f, "go 1000 5.0000\n").startsWith("ok\r\n"));
    // What does not transmit does not count.
    answer(f, "new\npulse 500.0 0 0.0\nlisten 16 1.0\nend\n");
    assertTrue(answer(f, "go 1000 1.0000\n").startsWith("ok\r\n"));
  }

  @Test
  void numbersOfTheWrongFormAreRefused() {
    Firmware f = plain(FirmwareFaults.none());
    for (String wrong :
        new String[] {"carrier 8.09E6\n", "carrier 8090000.5\n", "pulse 10 0 50.0\n", "gain x\n"}) {
      assertTrue(answer(f, wrong).startsWith("err 120 "), wrong);
    }
    assertTrue(answer(f, "carier 8090000\n").startsWith("err 113 "));
    assertTrue(answer(f, "x".repeat(5000) + "\n").startsWith("err 223 "));
    assertEquals("ok\r\n", answer(f, "gain 20\n"), "it goes on after a line too long");
    assertEquals("", answer(f, "\n"), "an empty line means nothing");
  }

  @Test
  void scpiErrorsQueueUpInOrderAndAreClearedByReading() {
    Firmware f = scpi();
    assertEquals("", answer(f, ":SOURCE:FREQUENCY 1\n:NO:SUCH 1\n"));
    assertTrue(answer(f, ":SYSTEM:ERROR?\n").startsWith("-222,\"Data out of range;carrier"));
    assertEquals("-113,\"Undefined header;:NO:SUCH 1\"\n", answer(f, ":SYSTEM:ERROR?\n"));
    assertEquals("0,\"No error\"\n", answer(f, ":SYSTEM:ERROR?\n"));
    tell(f, ":NO:SUCH 2\n*CLS\n");
    assertEquals("0,\"No error\"\n", answer(f, ":SYSTEM:ERROR?\n"));
    for (int k = 0; k < 40; k++) {
      tell(f, ":NO:SUCH 3\n");
    }
    String all = "";
    for (int k = 0; k < 16; k++) {
      all += answer(f, ":SYSTEM:ERROR?\n");
    }
    // SCPI-1999: when the queue is full its last entry becomes -350.
    assertTrue(all.endsWith("-350,\"Queue overflow\"\n"), all);
    assertEquals("0,\"No error\"\n", answer(f, ":SYSTEM:ERROR?\n"));
  }

  @Test
  void runsManyScansAndStopsBetweenThem() {
    Firmware f = plain(FirmwareFaults.none());
    tell(f, "new\npulse 10.0 0 50.0\nlisten 16 10.0\nend\n");
    assertEquals("ok\r\nok\r\nok\r\nok\r\n", said(f));
    String three = answer(f, "go 3 500.0000\n");
    assertEquals(3, three.split("done\r\n", -1).length - 1);
    tell(f, "go 1000000 500.0000\n");
    assertEquals("ok\r\n", new String(f.say(now).orElseThrow(), StandardCharsets.ISO_8859_1));
    assertTrue(f.say(now).isPresent());
    assertTrue(answer(f, "halt\n").equals("ok\r\n"));
    assertEquals(Long.MAX_VALUE, f.nextNanos(now));
  }

  @Test
  void pacedAnswersComeWhenTheyWould() {
    Firmware f = firmware("plain-line-console", true, FirmwareFaults.none());
    f.connect();
    said(f);
    tell(f, "new\npulse 10.0 0 50.0\nlisten 16 10.0\nend\n");
    said(f);
    assertEquals("ok\r\n", answer(f, "go 2 500.0000\n"));
    assertEquals(500_000_000L, f.nextNanos(now));
    now = 499_999_999L;
    assertEquals("", said(f));
    assertTrue(answer(f, "gain 3\n").startsWith("err 221 "), "a run is in hand");
    now = 500_000_000L;
    assertTrue(said(f).startsWith("data 0 64\r\n"));
    assertEquals(1_000_000_000L, f.nextNanos(now));
    assertEquals("ok\r\n", answer(f, "halt\n"), "in the middle of a run");
    now = 2_000_000_000L;
    assertEquals("", said(f));
    tell(f, "go 1 500.0000\n");
    assertEquals(1.5, bench.idled, 1e-9, "the spins recovered meanwhile");
  }

  @Test
  void blocksAreDamagedCutAndShortenedAsToldAndNotOtherwise() {
    Firmware f = scpi();
    f.setFaults(FirmwareFaults.none().withDamageOneBlockIn(2));
    tell(f, ":SHOT:CLEAR\n:SHOT:PULSE 0.0000100,0.0,0.500\n:SHOT:RECEIVE 16,0.0000100,0.0\n");
    tell(f, ":SHOT:END\n:SHOT:RUN 1,0.5000000\n");
    String sound = answer(f, ":SHOT:DATA? 0\n");
    assertEquals(4 + 64 + 1, sound.length());
    String damaged = answer(f, ":SHOT:DATA? 0\n");
    assertEquals(sound.length(), damaged.length());
    assertNotEquals(sound, damaged);
    assertEquals(sound, answer(f, ":SHOT:DATA? 0\n"), "fetching again gives the same samples");
    f.setFaults(FirmwareFaults.none().withCutOneBlockIn(1));
    assertTrue(sound.startsWith(answer(f, ":SHOT:DATA? 0\n")));
    f.setFaults(FirmwareFaults.none().withShortOneBlockIn(1));
    assertTrue(answer(f, ":SHOT:DATA? 0\n").startsWith("#260"));
    f.setFaults(FirmwareFaults.none());
    assertEquals(sound, answer(f, ":SHOT:DATA? 0\n"));
    assertTrue(answer(f, ":SHOT:DATA? 1\n").startsWith("-222,"), "there is one window only");
  }

  @Test
  void silenceRestartsAndRubbish() {
    Firmware f = plain(FirmwareFaults.none().withSilentAfterCommands(2));
    assertEquals("ok\r\n", answer(f, "gain 1\n"));
    assertEquals("ok\r\n", answer(f, "gain 2\n"));
    assertEquals("", answer(f, "gain 3\n"));
    Firmware g = plain(FirmwareFaults.none().withRestartAfterScans(1));
    tell(g, "new\npulse 10.0 0 50.0\nlisten 16 10.0\nend\n");
    said(g);
    assertEquals("ok\r\nplain-line console 2.1 ready\r\n", answer(g, "go 5 500.0000\n"));
    assertTrue(answer(g, "go 1 500.0000\n").startsWith("err 221 "), "the shot is forgotten");
    Firmware h = plain(FirmwareFaults.none().withRubbishBeforeOneAnswerIn(2));
    assertEquals("ok\r\n", answer(h, "gain 1\n"));
    assertTrue(answer(h, "gain 2\n").matches("(?s).+\r\nok\r\n"));
  }

  @Test
  void aBoardThatEchoesSendsEveryLineBackFirst() {
    Firmware f = firmware("direct-sampling", false, FirmwareFaults.none());
    assertEquals("version\r\nversion direct-sampling 3\r\n", answer(f, "version\r"));
    assertEquals("gain 7\r\n", answer(f, "gain 7\r"));
    assertTrue(answer(f, "gain 51\r").startsWith("gain 51\r\n! Data out of range;gain 51"));
  }

  @Test
  void framesWithAWrongChecksumAreRefused() {
    Firmware f = firmware("radio-frame", false, FirmwareFaults.none());
    // 11 28 sets the gain to 20 dB. Its CRC-16/IBM-3740 by a general-purpose library, Python's
    // binascii.crc_hqx(b"\x11\x28", 0xffff), is 0x8827.
    assertEquals(0x80, frame(answer(f, "\u0005\u0011\u0028\u0027\u0088\u0000")));
    assertEquals(0x8f, frame(answer(f, "\u0005\u0011\u0028\u0026\u0088\u0000")));
    assertEquals(0x8f, frame(answer(f, "\u0009\u0011\u0028\u0000")));
    assertEquals(0x80, frame(answer(f, "\u0000\u0000\u0005\u0011\u0028\u0027\u0088\u0000")));
  }

  private static int frame(String stuffed) {
    assertTrue(stuffed.endsWith("\0"));
    byte[] plain =
        FirmwareCobs.unstuff(
            stuffed.substring(0, stuffed.length() - 1).getBytes(StandardCharsets.ISO_8859_1));
    return plain[0] & 0xff;
  }

  @Test
  void noRubbishBringsItDown() {
    Random random = new Random(11);
    for (String name : new String[] {"scpi-console", "plain-line-console", "radio-frame"}) {
      Firmware f = firmware(name, false, FirmwareFaults.none());
      f.connect();
      for (int k = 0; k < 3000; k++) {
        byte[] bytes = new byte[random.nextInt(40)];
        random.nextBytes(bytes);
        if (k % 2 == 0 && bytes.length > 0) {
          bytes[bytes.length - 1] = (byte) (name.equals("radio-frame") ? 0 : '\n');
        }
        f.hear(bytes, 0, bytes.length, now);
        assertTrue(said(f).length() < 4096);
      }
    }
  }

  @Test
  void aProfileThatCannotBeSimulatedIsToldSo() throws Exception {
    String text =
        Files.readString(Path.of("device-profiles", "plain-line-console.toml"))
            .replace("expect_example = \"plain-line console 2.1\"\n", "");
    DeviceProfile profile =
        ProfileReader.read("changed", text.getBytes(StandardCharsets.UTF_8))
            .profile()
            .orElseThrow();
    IllegalArgumentException e =
        assertThrows(
            IllegalArgumentException.class,
            () ->
                new Firmware(
                    profile, new FirmwareAdc(profile, bench), false, FirmwareFaults.none()));
    assertTrue(e.getMessage().contains("needs an example"), e.getMessage());
    assertFalse(e.getMessage().isBlank());
  }
}
