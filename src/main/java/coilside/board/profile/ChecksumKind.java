package coilside.board.profile;

import java.util.Optional;

/**
 * A checksum by its catalogue name (width, polynomial, start, reflection, final XOR are the
 * catalogue's).
 */
public enum ChecksumKind {
  CRC16_IBM_3740("crc-16/ibm-3740", 2),
  CRC16_XMODEM("crc-16/xmodem", 2),
  CRC16_KERMIT("crc-16/kermit", 2),
  CRC16_IBM_SDLC("crc-16/ibm-sdlc", 2),
  CRC16_MODBUS("crc-16/modbus", 2),
  CRC32_ISO_HDLC("crc-32/iso-hdlc", 4),
  CRC32_ISCSI("crc-32/iscsi", 4),
  CRC32_BZIP2("crc-32/bzip2", 4),
  CRC32_MPEG_2("crc-32/mpeg-2", 4);

  private final String word;
  private final int bytes;

  ChecksumKind(String word, int bytes) {
    this.word = word;
    this.bytes = bytes;
  }

  /** The word in a profile: "crc-16/xmodem". */
  public String word() {
    return word;
  }

  /** Width, bytes. */
  public int bytes() {
    return bytes;
  }

  /** The checksum with this word. */
  public static Optional<ChecksumKind> ofWord(String word) {
    for (ChecksumKind kind : values()) {
      if (kind.word.equals(word)) {
        return Optional.of(kind);
      }
    }
    return Optional.empty();
  }
}
