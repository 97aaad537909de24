package coilside.board.profile;

import java.nio.ByteOrder;
import java.util.Optional;

/** How bytes are cut into messages: text lines or COBS frames. */
public sealed interface Framing {
  /** Longest message that is believed, bytes (line without end, frame before encoding). */
  int longestBytes();

  /**
   * Text lines.
   *
   * @param endOut what ends a line to the board: "\n", "\r\n", "\r"
   * @param endIn what ends a line from the board
   * @param longestBytes longest line from the board
   * @param echo true when the board sends every command line back before it answers
   */
  record Lines(String endOut, String endIn, int longestBytes, boolean echo) implements Framing {}

  /**
   * Frames with consistent-overhead byte stuffing (COBS), each ended by a zero byte.
   *
   * @param byteOrder of binary fields and of the frame checksum, both directions
   * @param checksum at the end of every frame in both directions, over all bytes before it
   * @param longestBytes longest frame before encoding, checksum included
   */
  record Cobs(ByteOrder byteOrder, Optional<ChecksumKind> checksum, int longestBytes)
      implements Framing {}
}
