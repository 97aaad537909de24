package coilside.board.wire;

import static org.junit.jupiter.api.Assertions.assertArrayEquals;
import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertInstanceOf;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.profile.ChecksumKind;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.ProfileReader;
import java.io.ByteArrayOutputStream;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Map;
import java.util.Random;
import java.util.concurrent.ConcurrentHashMap;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

/**
 * Decoders under hostile bytes: nothing is thrown, nothing grows, and the next good block is found.
 * Every case is drawn from a fixed seed, so that a failure repeats.
 */
class DecoderFuzzTest {
  private static final int SAMPLE_BYTES = 96;

  private static final Map<String, DeviceProfile> PROFILES = new ConcurrentHashMap<>();

  private static DeviceProfile profile(String name) {
    return PROFILES.computeIfAbsent(
        name,
        n -> ProfileReader.read(Path.of("device-profiles", n + ".toml")).profile().orElseThrow());
  }

  private static byte[] latin(String text) {
    return text.getBytes(StandardCharsets.ISO_8859_1);
  }

  private static byte[] join(byte[]... parts) {
    ByteArrayOutputStream out = new ByteArrayOutputStream();
    for (byte[] part : parts) {
      out.writeBytes(part);
    }
    return out.toByteArray();
  }

  private static byte[] samples(Random random) {
    byte[] out = new byte[SAMPLE_BYTES];
    random.nextBytes(out);
    return out;
  }

  /** A good block as the board of this profile sends it, written down independently of decoders. */
  private static byte[] good(String profile, byte[] samples) {
    return switch (profile) {
      case "scpi-console" -> join(latin("#3096"), samples, latin("\n"));
      case "plain-line-console" -> {
        byte[] body = join(latin("data 0 96\r\n"), samples);
        long crc = Checksum.of(ChecksumKind.CRC16_XMODEM, body, 0, body.length);
        yield join(body, new byte[] {(byte) (crc >> 8), (byte) crc}, latin("\r\n"));
      }
      case "pulse-and-receive" -> join(latin("samples 24\n"), samples, latin("\n"));
      case "direct-sampling" -> {
        long crc = Checksum.of(ChecksumKind.CRC32_ISO_HDLC, samples, 0, samples.length);
        yield join(latin("#296"), samples, latin(String.format("%08X\r\n", crc)));
      }
      case "radio-frame" -> join(frame(samples, 0, 10), frame(samples, 10, 16));
      default -> throw new IllegalArgumentException(profile);
    };
  }

  private static byte[] frame(byte[] samples, int from, int to) {
    byte[] body =
        join(
            new byte[] {(byte) 0x90, 0, 0, (byte) from, 0, 0, 0},
            Arrays.copyOfRange(samples, 6 * from, 6 * to));
    long crc = Checksum.of(ChecksumKind.CRC16_IBM_3740, body, 0, body.length);
    return join(Cobs.encode(join(body, new byte[] {(byte) crc, (byte) (crc >> 8)})), new byte[1]);
  }

  /** What separates garbage from the next message on a real line: the end of a line or frame. */
  private static byte[] separator(String profile) {
    return switch (profile) {
      case "radio-frame" -> new byte[1];
      case "plain-line-console", "direct-sampling" -> latin("\r\n");
      default -> latin("\n");
    };
  }

  private static List<byte[]> blocks(List<WireEvent> events) {
    return events.stream()
        .filter(WireEvent.SampleBlock.class::isInstance)
        .map(e -> ((WireEvent.SampleBlock) e).bytes())
        .toList();
  }

  @ParameterizedTest
  @ValueSource(
      strings = {
        "scpi-console",
        "plain-line-console",
        "pulse-and-receive",
        "direct-sampling",
        "radio-frame"
      })
  void goodBlocksComeThroughHoweverTheyAreCut(String name) {
    Random random = new Random(1);
    byte[] samples = samples(random);
    byte[] stream = good(name, samples);
    for (int cut = 0; cut <= stream.length; cut++) {
      WireDecoder decoder = WireDecoder.of(profile(name));
      decoder.expectBlocks(new int[] {SAMPLE_BYTES});
      List<WireEvent> events = new ArrayList<>();
      decoder.feed(stream, 0, cut, events::add);
      decoder.feed(stream, cut, stream.length - cut, events::add);
      assertEquals(1, events.size(), "cut at " + cut + ": " + events);
      assertArrayEquals(samples, blocks(events).get(0));
    }
  }

  @ParameterizedTest
  @ValueSource(
      strings = {
        "scpi-console",
        "plain-line-console",
        "pulse-and-receive",
        "direct-sampling",
        "radio-frame"
      })
  void randomBytesAreSurvivedAndTheNextGoodBlockIsFound(String name) {
    for (int seed = 0; seed < 300; seed++) {
      Random random = new Random(seed);
      WireDecoder decoder = WireDecoder.of(profile(name));
      decoder.expectBlocks(new int[] {SAMPLE_BYTES});
      List<WireEvent> events = new ArrayList<>();
      byte[] garbage = new byte[random.nextInt(6000)];
      random.nextBytes(garbage);
      if (random.nextBoolean()) {
        // Garbage that looks like the protocol: only its own alphabet.
        byte[] alphabet = latin("#0123456789 data\r\n,\"");
        for (int i = 0; i < garbage.length; i++) {
          garbage[i] = alphabet[random.nextInt(alphabet.length)];
        }
      }
      for (int at = 0; at < garbage.length; ) {
        int n = Math.min(garbage.length - at, 1 + random.nextInt(200));
        decoder.feed(garbage, at, n, events::add);
        at += n;
      }
      if (!blocks(events).isEmpty()) {
        continue; // Without a checksum random bytes may by chance be a block.
      }
      byte[] samples = samples(random);
      // A header found by chance in the garbage may swallow what comes next; the block after that
      // must come through.
      for (int i = 0; i < 3 && blocks(events).isEmpty(); i++) {
        decoder.feed(separator(name), 0, separator(name).length, events::add);
        byte[] stream = good(name, samples);
        decoder.feed(stream, 0, stream.length, events::add);
      }
      assertEquals(1, blocks(events).size(), "seed " + seed);
    }
  }

  /** A truncated block followed at once by a good one: with a checksum the good one is found. */
  @ParameterizedTest
  @ValueSource(strings = {"plain-line-console", "radio-frame", "direct-sampling", "scpi-console"})
  void aBlockThatLostBytesIsDamagedAndTheOneAfterIsFound(String name) {
    Random random = new Random(5);
    byte[] samples = samples(random);
    byte[] whole = good(name, samples);
    for (int lost = 1; lost < 60; lost++) {
      int from = 30;
      byte[] torn =
          join(Arrays.copyOf(whole, from), Arrays.copyOfRange(whole, from + lost, whole.length));
      WireDecoder decoder = WireDecoder.of(profile(name));
      decoder.expectBlocks(new int[] {SAMPLE_BYTES});
      List<WireEvent> events = new ArrayList<>();
      decoder.feed(torn, 0, torn.length, events::add);
      assertEquals(List.of(), blocks(events), "lost " + lost);
      decoder.feed(whole, 0, whole.length, events::add);
      assertEquals(1, blocks(events).size(), "lost " + lost + ": " + events);
      assertArrayEquals(samples, blocks(events).get(0), "lost " + lost);
      assertTrue(
          events.stream().anyMatch(e -> !(e instanceof WireEvent.SampleBlock)),
          "the damage is said");
    }
  }

  @ParameterizedTest
  @ValueSource(strings = {"plain-line-console", "radio-frame", "direct-sampling"})
  void everySingleFlippedBitOfABlockIsSeen(String name) {
    byte[] samples = samples(new Random(9));
    byte[] whole = good(name, samples);
    for (int bit = 0; bit < 8 * whole.length; bit++) {
      byte[] flipped = whole.clone();
      flipped[bit / 8] ^= (byte) (1 << bit % 8);
      boolean sameHexDigit =
          name.equals("direct-sampling")
              && bit / 8 >= 4 + SAMPLE_BYTES
              && Character.toUpperCase(flipped[bit / 8]) == whole[bit / 8];
      if (sameHexDigit) {
        continue; // A checksum in lower case says the same.
      }
      WireDecoder decoder = WireDecoder.of(profile(name));
      decoder.expectBlocks(new int[] {SAMPLE_BYTES});
      List<WireEvent> events = new ArrayList<>();
      decoder.feed(flipped, 0, flipped.length, events::add);
      assertEquals(List.of(), blocks(events), "bit " + bit);
    }
  }

  @Test
  void absurdLengthsTakeNoMemory() {
    for (String head :
        List.of("#9999999999", "#0", "#10", "#9000000000", "#3095", "#41000", "#1", "#a12")) {
      WireDecoder decoder = WireDecoder.of(profile("scpi-console"));
      decoder.expectBlocks(new int[] {SAMPLE_BYTES});
      List<WireEvent> events = new ArrayList<>();
      byte[] bytes = latin(head + "\n");
      decoder.feed(bytes, 0, bytes.length, events::add);
      assertEquals(List.of(), blocks(events));
      byte[] whole = good("scpi-console", samples(new Random(2)));
      decoder.feed(whole, 0, whole.length, events::add);
      assertEquals(1, blocks(events).size(), head);
    }
    for (String head :
        List.of("data 0 99999999999999999999", "data 0 -5", "data 7 96", "data 0 4000000000")) {
      WireDecoder decoder = WireDecoder.of(profile("plain-line-console"));
      decoder.expectBlocks(new int[] {SAMPLE_BYTES});
      List<WireEvent> events = new ArrayList<>();
      byte[] bytes = latin(head + "\r\n");
      decoder.feed(bytes, 0, bytes.length, events::add);
      assertEquals(1, events.size(), head);
      byte[] whole = good("plain-line-console", samples(new Random(2)));
      decoder.feed(whole, 0, whole.length, events::add);
      assertEquals(1, blocks(events).size(), head);
    }
  }

  @Test
  void aLineWithoutEndIsPassedOverAndCounted() {
    WireDecoder decoder = WireDecoder.of(profile("plain-line-console"));
    List<WireEvent> events = new ArrayList<>();
    byte[] x = new byte[1_000_000];
    Arrays.fill(x, (byte) 'x');
    decoder.feed(x, 0, x.length, events::add);
    assertEquals(List.of(), events);
    byte[] end = latin("\r\nok\r\n");
    decoder.await(profile("plain-line-console").replies().success().orElseThrow());
    decoder.feed(end, 0, end.length, events::add);
    assertEquals(new WireEvent.Garbage(1_000_002), events.get(0));
    assertInstanceOf(WireEvent.Answer.class, events.get(1));
  }

  @Test
  void blocksNobodyAskedForAreNotBelieved() {
    WireDecoder decoder = WireDecoder.of(profile("plain-line-console"));
    List<WireEvent> events = new ArrayList<>();
    byte[] bytes = latin("data 0 96\r\n");
    decoder.feed(bytes, 0, bytes.length, events::add);
    assertEquals(List.of(new WireEvent.Other("data 0 96")), events);
  }

  @Test
  void controlCharactersDoNotComeThrough() {
    WireDecoder decoder = WireDecoder.of(profile("plain-line-console"));
    List<WireEvent> events = new ArrayList<>();
    byte[] bytes = latin("\u001b[2Jhello\u0007\u009b\r\nerr 7 bad \u001b]0;x\u0007\r\n");
    decoder.feed(bytes, 0, bytes.length, events::add);
    assertEquals(
        List.of(new WireEvent.Other(".[2Jhello.."), new WireEvent.ErrorReply("7", "bad .]0;x.")),
        events);
  }
}
