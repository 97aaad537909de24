package coilside.board.profile;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertTimeoutPreemptively;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.BoardLimits.Range;
import coilside.board.profile.Expectation.FrameLayout;
import coilside.board.profile.Expectation.LinePattern;
import coilside.board.profile.SampleBlocks.BlockChecksum;
import java.io.IOException;
import java.nio.ByteOrder;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.security.MessageDigest;
import java.time.Duration;
import java.util.Arrays;
import java.util.HexFormat;
import java.util.List;
import java.util.Optional;
import java.util.OptionalDouble;
import java.util.OptionalInt;
import java.util.Random;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/** What a profile file says ends up in the model, and what is wrong with it is said in full. */
class ProfileReaderTest {
  private static String shipped(String name) throws IOException {
    return Files.readString(Path.of("device-profiles", name + ".toml"));
  }

  private static ProfileReading read(String toml) {
    return ProfileReader.read("my.toml", toml.getBytes(StandardCharsets.UTF_8));
  }

  private static DeviceProfile sound(String toml) {
    ProfileReading reading = read(toml);
    assertEquals(List.of(), reading.problems().stream().map(ProfileProblem::message).toList());
    return reading.profile().orElseThrow();
  }

  /** A shipped profile with one text replaced. */
  private static ProfileReading changed(String name, String from, String to) throws IOException {
    String good = shipped(name);
    assertTrue(good.contains(from), from);
    return read(good.replace(from, to));
  }

  @Test
  void everythingOfTheLineConsole() throws Exception {
    DeviceProfile p = sound(shipped("plain-line-console"));
    byte[] bytes = Files.readAllBytes(Path.of("device-profiles", "plain-line-console.toml"));
    assertEquals(
        HexFormat.of().formatHex(MessageDigest.getInstance("SHA-256").digest(bytes)), p.digest());
    assertEquals(
        new SerialAttachment(List.of("1209:c512"), Optional.of("ttyUSB*"), 921_600, false, false),
        p.serial().orElseThrow());
    assertEquals(new TcpAttachment("127.0.0.1", 4012), p.tcp().orElseThrow());
    assertEquals(0.3, p.settleSeconds());
    assertEquals(
        "plain-line console .* ready",
        ((LinePattern) p.greeting().orElseThrow()).pattern().source());
    assertEquals(new Framing.Lines("\n", "\r\n", 512, false), p.framing());
    assertEquals("who", p.identification().ask().orElseThrow().source());
    assertEquals(Replies.Mode.EACH, p.replies().mode());
    assertEquals(1, p.replies().ahead());
    assertEquals(0.5, p.replies().timeLimitSeconds());
    assertEquals(1, p.replies().ignore().size());
    assertEquals("rf off", p.setup().get(0).source());
    assertEquals("rf off", p.farewell().get(0).source());
    assertTrue(p.keepsShot());
    assertFalse(p.limits().repeatLoops());
    assertFalse(p.limits().settableReceivePhase());
    assertTrue(p.limits().arbitraryShots());
    assertTrue(p.limits().reportsTemperature());
    WireValue amplitude = p.values().get(ValueName.AMPLITUDE);
    assertEquals(0.01, amplitude.unitInSi());
    assertEquals(new NumberFormat(NumberFormat.Kind.DECIMAL, 1), amplitude.format());
    WireValue phase = p.values().get(ValueName.PHASE);
    assertEquals(Math.PI / 2, phase.unitInSi());
    assertEquals(1, phase.step());
    SampleFormat s = p.samples();
    assertEquals(SampleFormat.Type.I16, s.type());
    assertEquals(ByteOrder.LITTLE_ENDIAN, s.byteOrder());
    assertTrue(s.offsetBinary());
    assertTrue(s.conjugated());
    assertEquals(2, s.lostSamples());
    assertEquals(1.5, s.filterDelaySamples());
    assertEquals(45.8e-6, s.voltsPerCount());
    SampleBlocks b = p.blocks();
    assertEquals(SampleBlocks.Kind.LINE, b.kind());
    assertEquals(SampleBlocks.Per.WINDOW, b.per());
    assertEquals("\r\n", b.afterBlock());
    assertEquals(
        new BlockChecksum(
            ChecksumKind.CRC16_XMODEM,
            BlockChecksum.Covers.HEADER_AND_SAMPLES,
            BlockChecksum.Place.AFTER_BIG),
        b.checksum().orElseThrow());
    assertTrue(b.endMark().isPresent());
    assertEquals(1e-7, p.clockTickSeconds());
    assertEquals(new Range(1e6, 20e6, 1), p.boardLimits().carrierHertz());
    // The operator narrows: 500 us to 400 us, full drive to 0.8, ten percent to five.
    assertEquals(500e-6, p.boardLimits().pulseSeconds().max(), 1e-15);
    assertEquals(400e-6, p.limits().pulseSeconds().max(), 1e-15);
    assertEquals(0.8, p.limits().amplitude().max());
    assertEquals(0.05, p.limits().maxDutyCycle());
    assertEquals(OptionalDouble.of(7.9e6), p.operator().lowestResonanceHertz());
    assertEquals(OptionalDouble.of(8.3e6), p.operator().highestResonanceHertz());
    assertEquals(0.5, p.operator().amplitude());
    assertTrue(p.operator().coil().contains("solenoid"));
  }

  @Test
  void everythingOfTheFramedBoard() throws IOException {
    DeviceProfile p = sound(shipped("radio-frame"));
    assertEquals(
        new Framing.Cobs(ByteOrder.LITTLE_ENDIAN, Optional.of(ChecksumKind.CRC16_IBM_3740), 2048),
        p.framing());
    assertEquals(8, p.replies().ahead());
    assertEquals(50e-9, p.values().get(ValueName.WAIT).unitInSi(), 1e-20);
    assertEquals(65_536, p.values().get(ValueName.PHASE).scale());
    Template pulse = p.command(CommandName.PULSE).orElseThrow().template();
    assertEquals(new Template.Literal("\u0021"), pulse.parts().get(0));
    assertEquals(List.of("width", "phase", "amplitude"), pulse.slotNames());
    FrameLayout header = (FrameLayout) p.blocks().header().orElseThrow();
    assertEquals(List.of("window", "first", "samples"), header.layout().slotNames());
    assertEquals(256, p.blocks().frameSamples());
    assertEquals(SampleFormat.Type.I24, p.samples().type());
    assertTrue(p.limits().repeatLoops());
    assertTrue(p.limits().settableReceivePhase());
  }

  @Test
  void everythingOfTheRealSampleBoard() throws IOException {
    DeviceProfile p = sound(shipped("direct-sampling"));
    assertEquals(
        new SampleFormat.RealSampling(2e6, OptionalDouble.of(500e3)),
        p.samples().real().orElseThrow());
    assertEquals(SampleBlocks.Per.SCAN, p.blocks().per());
    assertEquals(BlockChecksum.Place.AFTER_HEX, p.blocks().checksum().orElseThrow().place());
    assertTrue(((Framing.Lines) p.framing()).echo());
    assertEquals(Replies.Mode.NONE, p.replies().mode());
  }

  @Test
  void theMinimalBoardPlaysFixedShotsOnly() throws IOException {
    DeviceProfile p = sound(shipped("pulse-and-receive"));
    assertTrue(p.fixedShotOnly());
    assertFalse(p.limits().arbitraryShots());
    assertEquals(1, p.limits().maxWindows());
  }

  @ParameterizedTest
  @CsvSource({
    "i8, i8",
    "i16, i16",
    "i24, i24",
    "i32, i32",
    "f32, f32",
  })
  void everySampleType(String word, String ignored) throws IOException {
    ProfileReading reading =
        changed("scpi-console", "type = \"i16\"", "type = \"" + word + "\"\n#" + ignored);
    assertEquals(
        word.toUpperCase(java.util.Locale.ROOT),
        reading.profile().orElseThrow().samples().type().name());
  }

  @ParameterizedTest
  @CsvSource({"iq", "qi", "planar"})
  void everyComplexLayout(String word) throws IOException {
    ProfileReading reading =
        changed("scpi-console", "layout = \"iq\"", "layout = \"" + word + "\"");
    assertEquals(
        word.toUpperCase(java.util.Locale.ROOT),
        reading.profile().orElseThrow().samples().layout().name());
  }

  @Test
  void everyChecksumAndPlace() throws IOException {
    for (ChecksumKind kind : ChecksumKind.values()) {
      for (String place : List.of("after-little", "after-big", "after-hex")) {
        ProfileReading reading =
            read(
                shipped("plain-line-console")
                    .replace("crc-16/xmodem\"", kind.word() + "\"")
                    .replace("place = \"after-big\"", "place = \"" + place + "\""));
        assertEquals(kind, reading.profile().orElseThrow().blocks().checksum().get().kind());
      }
    }
    DeviceProfile inHeader =
        sound(
            shipped("plain-line-console")
                .replace(
                    "header = 'data (?<window>[0-9]+) (?<bytes>[0-9]+)'",
                    "header = 'data (?<window>[0-9]+) (?<bytes>[0-9]+) (?<checksum>[0-9A-F]{4})'")
                .replace("\"data {window} {bytes}\"", "\"data {window} {bytes} {checksum:hex4}\"")
                .replace("covers = \"header-and-samples\"", "covers = \"samples\"")
                .replace("place = \"after-big\"", "place = \"header\""));
    assertEquals(BlockChecksum.Place.HEADER, inHeader.blocks().checksum().orElseThrow().place());
  }

  /** Profile, what is changed, into what, and the words that must be in the complaint. */
  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      quoteCharacter = '`',
      value = {
        "scpi-console|speed = 115200|sped = 115200|serial.sped is an unknown key|speed",
        "scpi-console|settle = \"100ms\"|settle = 100|open.settle is 100|with its unit",
        "scpi-console|settle = \"100ms\"|settle = \"100 parsec\"|open.settle is \"100 parsec\"|ms",
        "scpi-console|mode = \"asked\"|mode = \"maybe\"|replies.mode is \"maybe\"|each, asked, none",
        "scpi-console|unit = \"Hz\"|unit = \"us\"|values.carrier.unit is \"us\"|MHz",
        "scpi-console|{carrier}\"|{carier}\"|commands.carrier|{carrier}",
        "scpi-console|{carrier}\"|{carrier\"|commands.carrier|'{' without '}'",
        "scpi-console|stop = \":ABORT\"|#|commands.stop is missing|needed",
        "scpi-console|end_repeat = \":SHOT:REPEAT:END\"|#|commands.end_repeat is missing|together",
        "scpi-console|[values.wait]|[values.waiting]|values.waiting|wait",
        "scpi-console|(?<name>Coilside|(?<name>Coilside(|identify.expect|regular expression",
        "scpi-console|\"Coilside Examples,SC-20,0,1.4\"|\"other\"|identify.expect_example|'other' does not match",
        "scpi-console|(?<code>|(?<kode>|replies.error|kode",
        "scpi-console|duty_cycle = 0.10|duty_cycle = 10|limits.duty_cycle is 10|from 1.0E-6 to 1.0",
        "scpi-console|from = \"1MHz\", to = \"30MHz\"|from = \"30MHz\", to = \"1MHz\"|limits.carrier|not above",
        "scpi-console|from = \"7.9MHz\"|from = \"0.9MHz\"|operator.resonance|within the carrier",
        "scpi-console|amplitude = 0.5|amplitude = 0.9|operator.amplitude is 0.9|to 0.8",
        "scpi-console|pulse = { to = \"400us\" }|pulse = { to = \"0.4us\" }|operator.pulse|within",
        "scpi-console|kind = \"block\"|kind = \"frame\"|samples.block.kind is \"frame\"|line or block",
        "scpi-console|format = \"integer\"|format = \"u32\"|values.carrier.format is \"u32\"|integer",
        "radio-frame|carrier = \"10 {carrier}\"|carrier = \"1 {carrier}\"|commands.carrier|hexadecimal",
        "radio-frame|to = \"500us\", step|to = \"5ms\", step|values.width.format is \"u16\"|20 to 100000",
        "radio-frame|{code:u8}|{code}|replies.error|binary type",
        "radio-frame|{first:u32} {samples:samples}|{samples:samples} {first:u32}|header|last field",
        "plain-line-console|header = 'data (?<window>[0-9]+) (?<bytes>[0-9]+)'|header = 'data (?<window>[0-9]+) [0-9]+'|samples.block.header|bytes",
        "direct-sampling|rate = \"2MHz\"|#|samples.rate is missing|samples a second",
        "direct-sampling|step = \"0.5us\" }|step = \"0.3us\" }|limits.dwell|whole number of samples",
        "pulse-and-receive|stop = \"stop\"|run = \"go\"|commands.run|pulse_and_receive",
        "scpi-console|answer = '(?<celsius>[-+]?[0-9]+\\.[0-9]+)'|#|commands.temperature.answer is missing|celsius",
      })
  void everyComplaintNamesKeyValueAndWhatIsAllowed(
      String profile, String from, String to, String key, String words) throws IOException {
    ProfileReading reading = changed(profile, from, to);
    assertFalse(reading.sound());
    assertTrue(
        reading.problems().stream()
            .map(ProfileProblem::message)
            .anyMatch(m -> m.contains(key) && m.contains(words)),
        reading.problems().stream().map(ProfileProblem::message).toList().toString());
  }

  @Test
  void lineNumbersAreThoseOfTheFile() throws IOException {
    String text = shipped("scpi-console").replace("dtr = true", "dtr = \"yes\"");
    int line = text.substring(0, text.indexOf("dtr = ")).split("\n", -1).length;
    ProfileProblem problem = read(text).problems().get(0);
    assertEquals(OptionalInt.of(line), problem.line());
    assertTrue(problem.message().startsWith("my.toml:" + line + ": serial.dtr is \"yes\""));
  }

  @Test
  void allProblemsComeAtOnceInOrder() throws IOException {
    List<ProfileProblem> problems =
        read(shipped("scpi-console")
                .replace("port = 5025", "port = 502500")
                .replace("settle = \"100ms\"", "settle = \"soon\"")
                .replace("type = \"i16\"", "type = \"i12\"")
                .replace("windows = 4096", "window = 4096"))
            .problems();
    assertEquals(
        List.of("tcp.port", "open.settle", "samples.type", "limits.window"),
        problems.stream().map(ProfileProblem::key).toList());
  }

  @Test
  void oneMistakeIsOneProblem() throws IOException {
    ProfileReading reading = changed("radio-frame", "to = \"500us\", step", "to = \"5ms\", step");
    assertEquals(
        List.of("values.width.format"),
        reading.problems().stream().map(ProfileProblem::key).toList());
  }

  @Test
  void anEmptyFileListsWhatIsNeeded() {
    List<String> keys = read("").problems().stream().map(ProfileProblem::key).toList();
    assertTrue(
        keys.containsAll(
            List.of(
                "name",
                "identify.expect",
                "replies.mode",
                "samples.type",
                "limits.carrier",
                "commands.run",
                "samples.block.header")),
        keys.toString());
  }

  @Test
  void brokenSyntaxIsSaidWithItsLine() {
    ProfileReading reading = read("name = \"x\"\n[serial\nspeed = 1\n");
    assertFalse(reading.sound());
    assertEquals(OptionalInt.of(2), reading.problems().get(0).line());
  }

  @Test
  void filesThatCannotBeReadAreProblemsToo(@TempDir Path folder) throws IOException {
    assertTrue(
        ProfileReader.read(folder.resolve("none.toml"))
            .problems()
            .get(0)
            .message()
            .contains("not there"));
    assertTrue(ProfileReader.read(folder).problems().get(0).message().contains("not readable"));
    Path large = folder.resolve("large.toml");
    Files.write(large, new byte[ProfileReader.LONGEST_FILE + 1]);
    assertTrue(ProfileReader.read(large).problems().get(0).message().contains("longer than"));
    Path binary = folder.resolve("binary.toml");
    Files.write(binary, new byte[] {(byte) 0xff, (byte) 0xfe, 0});
    assertTrue(ProfileReader.read(binary).problems().get(0).message().contains("UTF-8"));
  }

  @Test
  void controlCharactersOfTheFileDoNotReachTheMessage() throws IOException {
    String text = shipped("scpi-console").replace("\"asked\"", "\"a\\u001b[2Jb\"");
    String message = read(text).problems().get(0).message();
    assertTrue(message.chars().noneMatch(Character::isISOControl), message);
  }

  /** Torn and scrambled files: always an answer, never an exception. */
  @Test
  void anyTextIsAnswered() throws IOException {
    Random random = new Random(8);
    for (String name : List.of("scpi-console", "radio-frame", "direct-sampling")) {
      List<String> lines = Arrays.asList(shipped(name).split("\n"));
      for (int i = 0; i < 120; i++) {
        List<String> mixed = new java.util.ArrayList<>(lines);
        for (int k = 0; k < 3; k++) {
          int at = random.nextInt(mixed.size());
          switch (random.nextInt(4)) {
            case 0 -> mixed.remove(at);
            case 1 -> mixed.set(at, mixed.get(random.nextInt(mixed.size())));
            case 2 ->
                mixed.set(at, mixed.get(at).replaceAll("[0-9]+", Long.toString(random.nextLong())));
            default -> mixed.set(at, mixed.get(at).replace('"', ' '));
          }
        }
        ProfileReading reading = read(String.join("\n", mixed));
        assertEquals(reading.sound(), reading.profile().isPresent());
      }
    }
  }

  @Test
  void aPatternCannotHangTheProgram() throws IOException {
    DeviceProfile p =
        sound(
            shipped("scpi-console")
                .replace("'(?<name>Coilside Examples,SC-[0-9]+,[^,]*,[^,]*)'", "'(a+)+b|(.*)*c'")
                .replace("expect_example", "#"));
    BoundedPattern pattern = ((LinePattern) p.identification().expect()).pattern();
    assertTimeoutPreemptively(
        Duration.ofSeconds(5),
        () -> {
          assertTrue(pattern.match("a".repeat(4000)).isEmpty());
          assertTrue(pattern.match("a".repeat(100_000)).isEmpty());
        });
    assertTrue(pattern.match("aab").isPresent());
  }
}
