package coilside.board.profile;

import java.util.Optional;

/**
 * How sample blocks are wrapped on the way back.
 *
 * @param kind a header line, an IEEE 488.2 definite-length block, or frames
 * @param header for {@link Kind#LINE} the line before the sample bytes, with a group "bytes" or
 *     "points" (real boards: samples), optionally "window" and "checksum" (hexadecimal); for {@link
 *     Kind#FRAME} a layout whose last slot is {@code {samples:samples}}, optionally {@code
 *     {window:..}} and {@code {first:..}} (index of the frame's first sample within its window);
 *     empty for {@link Kind#BLOCK}
 * @param per one block a scan (all windows in a row) or one a window
 * @param frameSamples most samples in one frame; 0 where frames are not used
 * @param afterBlock bytes that follow each block (after a binary checksum); may be empty
 * @param endMark line or frame after the last block of a scan
 * @param checksum over each block; for {@link Kind#FRAME} the framing's own checksum serves
 */
public record SampleBlocks(
    Kind kind,
    Optional<Expectation> header,
    Per per,
    int frameSamples,
    String afterBlock,
    Optional<Expectation> endMark,
    Optional<BlockChecksum> checksum) {
  /** How a block is announced. */
  public enum Kind {
    /** A text line, then the bytes. */
    LINE,
    /** IEEE 488.2 definite-length block: '#', number of digits, length, bytes. */
    BLOCK,
    /** Frames of the framing. */
    FRAME
  }

  /** What one block holds. */
  public enum Per {
    SCAN,
    WINDOW
  }

  /**
   * A checksum over a block.
   *
   * @param kind which
   * @param covers the sample bytes, or the header line (with its end) and the sample bytes
   * @param place where it stands
   */
  public record BlockChecksum(ChecksumKind kind, Covers covers, Place place) {
    /** What is summed. */
    public enum Covers {
      SAMPLES,
      HEADER_AND_SAMPLES
    }

    /** Where the checksum stands. */
    public enum Place {
      /** In the header, hexadecimal, group "checksum"; covers samples only. */
      HEADER,
      /** Right after the sample bytes, binary, little endian; not counted in "bytes". */
      AFTER_LITTLE,
      /** Right after the sample bytes, binary, big endian; not counted in "bytes". */
      AFTER_BIG,
      /** Right after the sample bytes, hexadecimal digits in upper case, fixed width. */
      AFTER_HEX
    }
  }
}
