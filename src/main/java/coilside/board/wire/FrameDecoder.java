package coilside.board.wire;

import coilside.board.profile.ChecksumKind;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.Expectation;
import coilside.board.profile.Expectation.FrameLayout;
import coilside.board.profile.Framing;
import coilside.board.profile.Replies;
import coilside.board.profile.SampleBlocks;
import java.util.Map;
import java.util.Optional;
import java.util.function.Consumer;

/** Decoder of COBS frames; a sample block is put together from its frames in order. */
final class FrameDecoder implements WireDecoder {
  private final Framing.Cobs framing;
  private final Replies replies;
  private final SampleBlocks blocks;
  private final int bytesPerSample;

  private final byte[] encoded;
  private final byte[] frame;
  private int encodedLength;
  private int skipped;
  private boolean skipping;

  private Expectation awaited;
  private int[] expected = {};
  private int next;
  private byte[] block;
  private int filled;

  FrameDecoder(DeviceProfile profile) {
    this.framing = (Framing.Cobs) profile.framing();
    this.replies = profile.replies();
    this.blocks = profile.blocks();
    this.bytesPerSample = profile.samples().bytesPerSample();
    this.encoded = new byte[Cobs.longestEncoding(framing.longestBytes()) + 1];
    this.frame = new byte[encoded.length];
  }

  @Override
  public void await(Expectation answer) {
    awaited = answer;
  }

  @Override
  public void expectBlocks(int[] lengths) {
    expected = lengths.clone();
    next = 0;
    block = null;
    filled = 0;
  }

  @Override
  public void reset() {
    encodedLength = 0;
    skipping = false;
    skipped = 0;
    expectBlocks(new int[0]);
  }

  @Override
  public void feed(byte[] bytes, int offset, int length, Consumer<WireEvent> events) {
    for (int i = offset; i < offset + length; i++) {
      byte b = bytes[i];
      if (b == 0) {
        delimiter(events);
      } else if (skipping) {
        skipped++;
      } else if (encodedLength == encoded.length) {
        skipping = true;
        skipped = encodedLength + 1;
      } else {
        encoded[encodedLength++] = b;
      }
    }
  }

  private void delimiter(Consumer<WireEvent> events) {
    int length = encodedLength;
    encodedLength = 0;
    if (skipping) {
      skipping = false;
      events.accept(new WireEvent.Garbage(skipped + 1));
      return;
    }
    if (length == 0) {
      return;
    }
    int n = Cobs.decode(encoded, length, frame);
    if (n < 0) {
      events.accept(new WireEvent.Garbage(length + 1));
      return;
    }
    if (framing.checksum().isPresent()) {
      ChecksumKind kind = framing.checksum().get();
      int body = n - kind.bytes();
      if (body < 0
          || Checksum.of(kind, frame, 0, body)
              != Fields.unsigned(frame, body, kind.bytes(), framing.byteOrder())) {
        events.accept(new WireEvent.Damaged("a frame of " + n + " bytes with a wrong checksum"));
        return;
      }
      n = body;
    }
    frameDone(n, events);
  }

  private void frameDone(int n, Consumer<WireEvent> events) {
    if (next < expected.length && blocks.header().orElse(null) instanceof FrameLayout header) {
      Optional<Fields.Match> match = Fields.match(header.layout(), frame, n, framing.byteOrder());
      if (match.isPresent() && match.get().samplesAt() >= 0) {
        samples(match.get(), n, events);
        return;
      }
    }
    Optional<Map<String, String>> answer = fields(awaited, n);
    if (answer.isPresent()) {
      events.accept(new WireEvent.Answer(answer.get()));
      return;
    }
    Optional<Map<String, String>> error = fields(replies.error().orElse(null), n);
    if (error.isPresent()) {
      events.accept(
          new WireEvent.ErrorReply(
              Clean.text(error.get().getOrDefault("code", "")),
              Clean.text(error.get().getOrDefault("text", ""))));
      return;
    }
    if (fields(blocks.endMark().orElse(null), n).isPresent()) {
      events.accept(new WireEvent.EndMark());
      return;
    }
    StringBuilder hex = new StringBuilder("frame");
    for (int i = 0; i < Math.min(n, 16); i++) {
      hex.append(String.format(" %02x", frame[i] & 0xff));
    }
    events.accept(new WireEvent.Other(hex.toString()));
  }

  private Optional<Map<String, String>> fields(Expectation expectation, int n) {
    return expectation instanceof FrameLayout layout
        ? Fields.match(layout.layout(), frame, n, framing.byteOrder()).map(Fields.Match::values)
        : Optional.empty();
  }

  private void samples(Fields.Match match, int n, Consumer<WireEvent> events) {
    String window = match.values().get("window");
    if (window != null && !window.equals(Integer.toString(next))) {
      events.accept(
          new WireEvent.Damaged("a frame of window " + window + " where " + next + " was due"));
      return;
    }
    String first = match.values().get("first");
    if ("0".equals(first)) {
      filled = 0;
    }
    if (first != null && Long.parseLong(first) * bytesPerSample != filled) {
      events.accept(
          new WireEvent.Damaged(
              "a frame that begins at sample "
                  + first
                  + " where "
                  + filled / bytesPerSample
                  + " was due"));
      return;
    }
    int length = n - match.samplesAt();
    if (length > expected[next] - filled) {
      events.accept(
          new WireEvent.Damaged("more than the " + expected[next] + " sample bytes that were due"));
      filled = 0;
      return;
    }
    if (block == null) {
      block = new byte[expected[next]];
    }
    System.arraycopy(frame, match.samplesAt(), block, filled, length);
    filled += length;
    if (filled == block.length) {
      byte[] whole = block;
      block = null;
      filled = 0;
      events.accept(new WireEvent.SampleBlock(next++, whole));
    }
  }
}
