package coilside.board.wire;

import coilside.board.profile.BoundedPattern;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.Expectation;
import coilside.board.profile.Expectation.LinePattern;
import coilside.board.profile.Framing;
import coilside.board.profile.Replies;
import coilside.board.profile.SampleBlocks;
import coilside.board.profile.SampleBlocks.BlockChecksum;
import java.nio.charset.StandardCharsets;
import java.util.ArrayDeque;
import java.util.Arrays;
import java.util.Deque;
import java.util.Map;
import java.util.Optional;
import java.util.function.Consumer;

/**
 * Decoder of text lines with sample blocks among them: a block follows its header line, or is an
 * IEEE 488.2 definite-length block.
 *
 * <p>A block that turns out damaged is read once more as lines, from its first byte, since the
 * header of the next block may have been swallowed by it.
 */
final class LineDecoder implements WireDecoder {
  private static final int MOST_READINGS = 8;
  private static final int MOST_ECHOES = 4096;

  private final Framing.Lines framing;
  private final Replies replies;
  private final SampleBlocks blocks;
  private final int bytesPerSample;
  private final byte[] end;
  private final byte[] after;

  private final byte[] line;
  private int lineLength;
  private boolean skipping;
  private int skipped;
  private final Deque<String> echoes = new ArrayDeque<>();

  private Expectation awaited;
  private int[] expected = {};
  private int next;

  private byte[] block;
  private int blockLength;
  private int sampleBytes;
  private byte[] header = {};
  private Map<String, String> headerFields = Map.of();
  private int readings;

  LineDecoder(DeviceProfile profile) {
    this.framing = (Framing.Lines) profile.framing();
    this.replies = profile.replies();
    this.blocks = profile.blocks();
    this.bytesPerSample = profile.samples().bytesPerSample();
    this.end = framing.endIn().getBytes(StandardCharsets.ISO_8859_1);
    this.after = blocks.afterBlock().getBytes(StandardCharsets.ISO_8859_1);
    this.line = new byte[framing.longestBytes() + end.length];
  }

  @Override
  public void await(Expectation answer) {
    awaited = answer;
  }

  @Override
  public void expectBlocks(int[] lengths) {
    expected = lengths.clone();
    next = 0;
  }

  @Override
  public void sent(byte[] command) {
    if (framing.echo() && echoes.size() < MOST_ECHOES) {
      int n = command.length - framing.endOut().length();
      echoes.add(new String(command, 0, n, StandardCharsets.ISO_8859_1));
    }
  }

  @Override
  public void reset() {
    echoes.clear();
    lineLength = 0;
    skipping = false;
    skipped = 0;
    block = null;
    expected = new int[0];
    next = 0;
    readings = 0;
  }

  @Override
  public void feed(byte[] bytes, int offset, int length, Consumer<WireEvent> events) {
    int at = offset;
    int stop = offset + length;
    while (at < stop) {
      if (block != null) {
        int take = Math.min(block.length - blockLength, stop - at);
        System.arraycopy(bytes, at, block, blockLength, take);
        blockLength += take;
        at += take;
        if (blockLength == block.length) {
          blockDone(events);
        }
      } else {
        byteOfLine(bytes[at++], events);
      }
    }
  }

  private void byteOfLine(byte b, Consumer<WireEvent> events) {
    if (skipping) {
      skipped++;
      if (b == end[end.length - 1]) {
        events.accept(new WireEvent.Garbage(skipped));
        skipping = false;
        skipped = 0;
      }
      return;
    }
    line[lineLength++] = b;
    if (endsWithEnd()) {
      int n = lineLength - end.length;
      byte[] whole = Arrays.copyOf(line, lineLength);
      lineLength = 0;
      lineDone(new String(whole, 0, n, StandardCharsets.ISO_8859_1), whole, events);
    } else if (blocks.kind() == SampleBlocks.Kind.BLOCK && next < expected.length) {
      definiteLength(events);
    }
    if (lineLength == line.length) {
      skipping = true;
      skipped = lineLength;
      lineLength = 0;
    }
  }

  private boolean endsWithEnd() {
    if (lineLength < end.length) {
      return false;
    }
    for (int i = 0; i < end.length; i++) {
      if (line[lineLength - end.length + i] != end[i]) {
        return false;
      }
    }
    return true;
  }

  /** Looks whether the line so far is the whole head of an IEEE 488.2 block. */
  private void definiteLength(Consumer<WireEvent> events) {
    if (line[0] != '#' || lineLength < 2) {
      return;
    }
    int digits = line[1] - '0';
    if (digits < 1 || digits > 9 || lineLength < 2 + digits) {
      return;
    }
    long length = 0;
    for (int i = 2; i < 2 + digits; i++) {
      if (line[i] < '0' || line[i] > '9') {
        return;
      }
      length = 10 * length + line[i] - '0';
    }
    if (lineLength == 2 + digits) {
      byte[] head = Arrays.copyOf(line, lineLength);
      lineLength = 0;
      startBlock(length, head, Map.of(), events);
    }
  }

  private void lineDone(String text, byte[] whole, Consumer<WireEvent> events) {
    if (text.equals(echoes.peek())) {
      echoes.remove();
      return;
    }
    if (next < expected.length
        && blocks.kind() == SampleBlocks.Kind.LINE
        && blocks.header().orElse(null) instanceof LinePattern pattern) {
      Optional<Map<String, String>> fields = pattern.pattern().match(text);
      if (fields.isPresent()) {
        long length = number(fields.get().get("bytes"));
        if (length < 0) {
          long points = number(fields.get().get("points"));
          length = points < 0 ? -1 : points * bytesPerSample;
        }
        startBlock(length, whole, fields.get(), events);
        return;
      }
    }
    if (awaited instanceof LinePattern pattern) {
      Optional<Map<String, String>> fields = pattern.pattern().match(text);
      if (fields.isPresent()) {
        events.accept(new WireEvent.Answer(fields.get()));
        return;
      }
    }
    if (replies.error().orElse(null) instanceof LinePattern pattern) {
      Optional<Map<String, String>> fields = pattern.pattern().match(text);
      if (fields.isPresent()) {
        events.accept(
            new WireEvent.ErrorReply(
                Clean.text(fields.get().getOrDefault("code", "")),
                Clean.text(fields.get().getOrDefault("text", ""))));
        return;
      }
    }
    if (blocks.endMark().orElse(null) instanceof LinePattern pattern
        && pattern.pattern().match(text).isPresent()) {
      events.accept(new WireEvent.EndMark());
      return;
    }
    if (text.isEmpty()) {
      return;
    }
    for (BoundedPattern ignore : replies.ignore()) {
      if (ignore.match(text).isPresent()) {
        return;
      }
    }
    events.accept(new WireEvent.Other(Clean.text(text)));
  }

  private void startBlock(
      long length, byte[] head, Map<String, String> fields, Consumer<WireEvent> events) {
    int wanted = expected[next];
    String window = fields.get("window");
    if (length != wanted) {
      events.accept(
          new WireEvent.Damaged(
              "a block of " + length + " bytes where " + wanted + " bytes were due"));
    } else if (window != null && number(window) != next) {
      events.accept(
          new WireEvent.Damaged(
              "block " + Clean.text(window) + " where block " + next + " was due"));
    } else {
      sampleBytes = wanted;
      block = new byte[wanted + trailer() + after.length];
      blockLength = 0;
      header = head;
      headerFields = fields;
      if (block.length == 0) {
        blockDone(events);
      }
    }
  }

  private int trailer() {
    if (blocks.checksum().isEmpty()) {
      return 0;
    }
    BlockChecksum sum = blocks.checksum().get();
    return switch (sum.place()) {
      case HEADER -> 0;
      case AFTER_LITTLE, AFTER_BIG -> sum.kind().bytes();
      case AFTER_HEX -> 2 * sum.kind().bytes();
    };
  }

  private void blockDone(Consumer<WireEvent> events) {
    byte[] whole = block;
    block = null;
    String why = damage(whole);
    if (why == null) {
      readings = 0;
      events.accept(
          new WireEvent.SampleBlock(
              next++, whole.length == sampleBytes ? whole : Arrays.copyOf(whole, sampleBytes)));
      return;
    }
    events.accept(new WireEvent.Damaged(why));
    if (++readings <= MOST_READINGS) {
      feed(whole, 0, whole.length, events);
    } else {
      skipping = true;
      skipped = whole.length;
    }
  }

  /** What is wrong with a finished block; null when nothing is. */
  private String damage(byte[] whole) {
    int at = sampleBytes + trailer();
    for (int i = 0; i < after.length; i++) {
      if (whole[at + i] != after[i]) {
        return "a block that does not end where it should";
      }
    }
    if (blocks.checksum().isEmpty()) {
      return null;
    }
    BlockChecksum rule = blocks.checksum().get();
    Checksum sum = new Checksum(rule.kind());
    if (rule.covers() == BlockChecksum.Covers.HEADER_AND_SAMPLES) {
      sum.update(header, 0, header.length);
    }
    sum.update(whole, 0, sampleBytes);
    long said = said(rule, whole);
    return said == sum.value()
        ? null
        : "a block with checksum "
            + Long.toHexString(sum.value())
            + " where the board said "
            + (said < 0 ? "nothing readable" : Long.toHexString(said));
  }

  private long said(BlockChecksum rule, byte[] whole) {
    int n = rule.kind().bytes();
    return switch (rule.place()) {
      case HEADER -> hex(headerFields.getOrDefault("checksum", ""));
      case AFTER_LITTLE -> Fields.unsigned(whole, sampleBytes, n, java.nio.ByteOrder.LITTLE_ENDIAN);
      case AFTER_BIG -> Fields.unsigned(whole, sampleBytes, n, java.nio.ByteOrder.BIG_ENDIAN);
      case AFTER_HEX -> hex(new String(whole, sampleBytes, 2 * n, StandardCharsets.ISO_8859_1));
    };
  }

  private static long hex(String text) {
    try {
      return text.isEmpty() || text.length() > 8 ? -1 : Long.parseLong(text, 16);
    } catch (NumberFormatException e) {
      return -1;
    }
  }

  private static long number(String text) {
    try {
      return text == null || text.length() > 10 ? -1 : Long.parseLong(text);
    } catch (NumberFormatException e) {
      return -1;
    }
  }
}
