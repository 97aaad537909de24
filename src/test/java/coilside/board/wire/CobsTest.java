package coilside.board.wire;

import static org.junit.jupiter.api.Assertions.assertArrayEquals;
import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import java.util.Arrays;
import java.util.HexFormat;
import java.util.Random;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/**
 * Validation: worked examples of consistent-overhead byte stuffing (Cheshire and Baker 1999), those
 * of common use.
 */
class CobsTest {
  private static byte[] hex(String text) {
    return HexFormat.of().parseHex(text);
  }

  @ParameterizedTest
  @CsvSource({
    "'', 01",
    "00, 0101",
    "0000, 010101",
    "001100, 01021101",
    "11220033, 0311220233",
    "11223344, 0511223344",
    "11000000, 0211010101",
    "DEADBEEF, 05DEADBEEF",
    "DEAD00BEEF, 03DEAD03BEEF",
  })
  void examples(String plain, String encoded) {
    assertArrayEquals(hex(encoded), Cobs.encode(hex(plain)));
    byte[] out = new byte[64];
    int n = Cobs.decode(hex(encoded), hex(encoded).length, out);
    assertArrayEquals(hex(plain), Arrays.copyOf(out, n));
  }

  @Test
  void fullGroups() {
    byte[] full = new byte[254];
    byte[] over = new byte[255];
    for (int i = 0; i < 255; i++) {
      over[i] = (byte) (i + 1);
      if (i < 254) {
        full[i] = (byte) (i + 1);
      }
    }
    byte[] encoded = Cobs.encode(full);
    assertEquals(255, encoded.length);
    assertEquals((byte) 0xff, encoded[0]);
    byte[] longer = Cobs.encode(over);
    assertEquals(257, longer.length);
    assertEquals(2, longer[255]);
    assertEquals((byte) 0xff, longer[256]);
    byte[] out = new byte[300];
    assertEquals(254, Cobs.decode(encoded, 255, out));
    assertEquals(255, Cobs.decode(longer, 257, out));
    // Some encoders add an empty group after a full one.
    assertEquals(254, Cobs.decode(Arrays.copyOf(encoded, 256), 255, out));
    byte[] trailing = Arrays.copyOf(encoded, 256);
    trailing[255] = 1;
    assertEquals(254, Cobs.decode(trailing, 256, out));
  }

  @Test
  void whateverGoesInComesOutAndHoldsNoZero() {
    Random random = new Random(7);
    for (int i = 0; i < 2000; i++) {
      byte[] plain = new byte[random.nextInt(700)];
      random.nextBytes(plain);
      for (int k = 0; k < plain.length; k++) {
        if (random.nextInt(5) == 0) {
          plain[k] = 0;
        }
      }
      byte[] encoded = Cobs.encode(plain);
      assertTrue(encoded.length <= Cobs.longestEncoding(plain.length));
      for (byte b : encoded) {
        assertTrue(b != 0);
      }
      byte[] out = new byte[encoded.length];
      assertArrayEquals(plain, Arrays.copyOf(out, Cobs.decode(encoded, encoded.length, out)));
    }
  }

  @Test
  void brokenEncodingsAreSeen() {
    assertEquals(-1, Cobs.decode(hex("0511"), 2, new byte[8]));
    assertEquals(-1, Cobs.decode(hex("0211001122"), 5, new byte[8]));
  }
}
