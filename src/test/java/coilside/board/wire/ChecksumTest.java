package coilside.board.wire;

import static org.junit.jupiter.api.Assertions.assertEquals;

import coilside.board.profile.ChecksumKind;
import java.nio.charset.StandardCharsets;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/**
 * Validation: check values of the string "123456789" as in the public catalogue of parametrised CRC
 * algorithms (reveng.sourceforge.io).
 */
class ChecksumTest {
  private static final byte[] DIGITS = "123456789".getBytes(StandardCharsets.US_ASCII);

  @ParameterizedTest
  @CsvSource({
    "crc-16/ibm-3740, 29B1",
    "crc-16/xmodem, 31C3",
    "crc-16/kermit, 2189",
    "crc-16/ibm-sdlc, 906E",
    "crc-16/modbus, 4B37",
    "crc-32/iso-hdlc, CBF43926",
    "crc-32/iscsi, E3069283",
    "crc-32/bzip2, FC891918",
    "crc-32/mpeg-2, 0376E6E7",
  })
  void checkValue(String word, String hex) {
    ChecksumKind kind = ChecksumKind.ofWord(word).orElseThrow();
    assertEquals(Long.parseLong(hex, 16), Checksum.of(kind, DIGITS, 0, 9));
  }

  @Test
  void everyKindHasACheckValueAbove() {
    assertEquals(9, ChecksumKind.values().length);
  }

  @Test
  void piecesSumToTheWhole() {
    for (ChecksumKind kind : ChecksumKind.values()) {
      Checksum sum = new Checksum(kind);
      sum.update(DIGITS, 0, 4);
      sum.update(DIGITS, 4, 0);
      sum.update(DIGITS, 4, 5);
      assertEquals(Checksum.of(kind, DIGITS, 0, 9), sum.value(), kind.word());
    }
  }
}
