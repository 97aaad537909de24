package coilside.board.wire;

import java.util.Map;

/** What a decoder found in the bytes from a board. */
public sealed interface WireEvent {
  /**
   * What was waited for.
   *
   * @param fields named groups or fields; numbers of a frame in decimal
   */
  record Answer(Map<String, String> fields) implements WireEvent {}

  /**
   * The board reports an error.
   *
   * @param code its code, or ""
   * @param text its text, control characters removed, or ""
   */
  record ErrorReply(String code, String text) implements WireEvent {}

  /**
   * A whole sample block whose length, order and checksum are right.
   *
   * @param index its place among the blocks that were expected
   * @param bytes the sample bytes; handed over, not kept
   */
  record SampleBlock(int index, byte[] bytes) implements WireEvent {}

  /** The end mark of a scan. */
  record EndMark() implements WireEvent {}

  /**
   * A sound message that nobody waited for.
   *
   * @param text for people, control characters removed
   */
  record Other(String text) implements WireEvent {}

  /**
   * A message that is not what it should be: wrong length, order or checksum.
   *
   * @param why in words
   */
  record Damaged(String why) implements WireEvent {}

  /**
   * Bytes that are no message.
   *
   * @param bytes how many were passed over
   */
  record Garbage(int bytes) implements WireEvent {}
}
