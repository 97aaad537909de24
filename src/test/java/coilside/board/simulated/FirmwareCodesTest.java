package coilside.board.simulated;

import static org.junit.jupiter.api.Assertions.assertArrayEquals;
import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertNull;
import static org.junit.jupiter.api.Assertions.assertThrows;

import coilside.board.profile.ChecksumKind;
import coilside.board.profile.NumberFormat;
import java.nio.ByteOrder;
import java.nio.charset.StandardCharsets;
import java.util.HexFormat;
import java.util.Random;
import java.util.zip.CRC32;
import java.util.zip.CRC32C;
import org.junit.jupiter.api.Test;

/** Checksums, stuffing and numbers of the board's side against published values. */
class FirmwareCodesTest {
  private static final byte[] DIGITS = "123456789".getBytes(StandardCharsets.US_ASCII);

  /** The check values of the CRC RevEng catalogue, reveng.sourceforge.io. */
  @Test
  void checksumsGiveTheCataloguesCheckValues() {
    assertEquals(0x29B1, crc(ChecksumKind.CRC16_IBM_3740));
    assertEquals(0x31C3, crc(ChecksumKind.CRC16_XMODEM));
    assertEquals(0x2189, crc(ChecksumKind.CRC16_KERMIT));
    assertEquals(0x906E, crc(ChecksumKind.CRC16_IBM_SDLC));
    assertEquals(0x4B37, crc(ChecksumKind.CRC16_MODBUS));
    assertEquals(0xCBF43926L, crc(ChecksumKind.CRC32_ISO_HDLC));
    assertEquals(0xE3069283L, crc(ChecksumKind.CRC32_ISCSI));
    assertEquals(0xFC891918L, crc(ChecksumKind.CRC32_BZIP2));
    assertEquals(0x0376E6E7L, crc(ChecksumKind.CRC32_MPEG_2));
  }

  private static long crc(ChecksumKind kind) {
    byte[] framed = new byte[DIGITS.length + 2];
    System.arraycopy(DIGITS, 0, framed, 1, DIGITS.length);
    return FirmwareCrc.of(kind, framed, 1, DIGITS.length);
  }

  /** Against the Java platform's own two. */
  @Test
  void longChecksumsAgreeWithThePlatform() {
    byte[] noise = new byte[10_000];
    new Random(3).nextBytes(noise);
    CRC32 iso = new CRC32();
    iso.update(noise);
    CRC32C castagnoli = new CRC32C();
    castagnoli.update(noise);
    assertEquals(
        iso.getValue(), FirmwareCrc.of(ChecksumKind.CRC32_ISO_HDLC, noise, 0, noise.length));
    assertEquals(
        castagnoli.getValue(), FirmwareCrc.of(ChecksumKind.CRC32_ISCSI, noise, 0, noise.length));
  }

  /** Worked examples of consistent-overhead byte stuffing, from the definition. */
  @Test
  void stuffingGivesTheWorkedExamples() {
    String[][] examples = {
      {"", "01"},
      {"00", "0101"},
      {"0000", "010101"},
      {"001100", "01021101"},
      {"11220033", "0311220233"},
      {"11223344", "0511223344"},
      {"11000000", "0211010101"},
      {"deadbeef", "05deadbeef"},
      {"dead00beef", "03dead03beef"}
    };
    for (String[] example : examples) {
      byte[] plain = HexFormat.of().parseHex(example[0]);
      byte[] stuffed = HexFormat.of().parseHex(example[1]);
      assertArrayEquals(stuffed, FirmwareCobs.stuff(plain), example[0]);
      assertArrayEquals(plain, FirmwareCobs.unstuff(stuffed), example[1]);
    }
    byte[] run = new byte[254];
    for (int k = 0; k < 254; k++) {
      run[k] = (byte) (k + 1);
    }
    byte[] stuffed = FirmwareCobs.stuff(run);
    assertEquals(255, stuffed.length);
    assertArrayEquals(run, FirmwareCobs.unstuff(stuffed));
    byte[] withTail = java.util.Arrays.copyOf(stuffed, 256);
    withTail[255] = 1;
    assertArrayEquals(run, FirmwareCobs.unstuff(withTail));
  }

  @Test
  void stuffingComesBackForAnything() {
    Random random = new Random(5);
    for (int n = 0; n < 600; n++) {
      byte[] plain = new byte[n];
      random.nextBytes(plain);
      if (n % 3 == 0) {
        java.util.Arrays.fill(plain, (byte) 7);
      }
      byte[] stuffed = FirmwareCobs.stuff(plain);
      for (byte b : stuffed) {
        assertEquals(true, b != 0);
      }
      assertArrayEquals(plain, FirmwareCobs.unstuff(stuffed), n + " bytes");
    }
    assertNull(FirmwareCobs.unstuff(HexFormat.of().parseHex("051122")));
    assertNull(FirmwareCobs.unstuff(new byte[0]));
  }

  private static NumberFormat format(String word) {
    return NumberFormat.parse(word).orElseThrow();
  }

  @Test
  void numbersInTextMustHaveTheirForm() throws Exception {
    assertEquals(8090000, FirmwareNumbers.fromText(format("integer"), "8090000"));
    assertEquals(10.5, FirmwareNumbers.fromText(format("decimal1"), "10.5"));
    assertEquals(8.09e6, FirmwareNumbers.fromText(format("exponent3"), "8.090E+06"));
    assertEquals(0x1F, FirmwareNumbers.fromText(format("hex4"), "001F"));
    String[][] wrong = {
      {"integer", "8090000.0"}, {"integer", ""}, {"decimal1", "10"}, {"decimal1", "10.55"},
      {"decimal1", "1e1"}, {"exponent3", "8.09E+06"}, {"hex4", "1f"}, {"integer", "NaN"}
    };
    for (String[] pair : wrong) {
      assertThrows(
          FirmwareRefusal.class, () -> FirmwareNumbers.fromText(format(pair[0]), pair[1]), pair[1]);
    }
  }

  @Test
  void binaryFieldsKeepOrderAndSign() {
    assertEquals("\u0012\u0034", field("u16", 0x1234, ByteOrder.BIG_ENDIAN));
    assertEquals("\u0034\u0012", field("u16", 0x1234, ByteOrder.LITTLE_ENDIAN));
    assertEquals("\u00ff\u00ff\u00fe", field("i24", -2, ByteOrder.BIG_ENDIAN));
    // 1.5 is 3FC00000 in IEEE 754 single precision.
    assertEquals("\u003f\u00c0\u0000\u0000", field("f32", 1.5, ByteOrder.BIG_ENDIAN));
    for (String kind : new String[] {"i8", "i16", "i24", "i32", "f32"}) {
      for (ByteOrder order : new ByteOrder[] {ByteOrder.BIG_ENDIAN, ByteOrder.LITTLE_ENDIAN}) {
        String bytes = field(kind, -77, order);
        assertEquals(-77, FirmwareNumbers.fromField(format(kind), bytes, order), kind);
      }
    }
  }

  private static String field(String kind, double value, ByteOrder order) {
    return FirmwareNumbers.toField(format(kind), value, order);
  }
}
