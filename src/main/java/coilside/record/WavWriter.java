package coilside.record;

import coilside.signal.Fid;
import java.io.IOException;
import java.io.OutputStream;
import java.nio.ByteBuffer;
import java.nio.ByteOrder;
import java.nio.charset.StandardCharsets;

/**
 * An FID as a WAV file: two channels of 16-bit PCM, the real part left, the imaginary part right,
 * scaled so that the largest component stands at full scale. A WAV file knows whole sample rates
 * only; its comment (LIST INFO ICMT) says the true one and how many volts a count is.
 */
final class WavWriter {
  private static final int FULL_SCALE = 32767;
  private static final int BYTES_PER_FRAME = 4;

  private WavWriter() {}

  static void write(Fid fid, String title, OutputStream out) throws IOException {
    double peak = 0;
    for (int k = 0; k < fid.points(); k++) {
      peak = Math.max(peak, Math.max(Math.abs(fid.re(k)), Math.abs(fid.im(k))));
    }
    double voltsPerCount = peak > 0 ? peak / FULL_SCALE : 1;
    int rate = statedRate(fid);
    byte[] comment =
        padded(
            Words.ascii(title, 100)
                + "; real part left, imaginary part right; 1 count = "
                + voltsPerCount
                + " V at the receiver input; true sample rate "
                + fid.widthHertz()
                + " Hz, stated as "
                + rate
                + " Hz");
    int dataBytes = fid.points() * BYTES_PER_FRAME;
    int listBytes = 4 + 8 + comment.length;
    ByteBuffer head =
        ByteBuffer.allocate(12 + 24 + 8 + listBytes + 8).order(ByteOrder.LITTLE_ENDIAN);
    head.put(tag("RIFF")).putInt(4 + 24 + 8 + listBytes + 8 + dataBytes).put(tag("WAVE"));
    head.put(tag("fmt ")).putInt(16).putShort((short) 1).putShort((short) 2).putInt(rate);
    head.putInt(rate * BYTES_PER_FRAME).putShort((short) BYTES_PER_FRAME).putShort((short) 16);
    head.put(tag("LIST")).putInt(listBytes).put(tag("INFO"));
    head.put(tag("ICMT")).putInt(comment.length).put(comment);
    head.put(tag("data")).putInt(dataBytes);
    out.write(head.array());
    ByteBuffer frame = ByteBuffer.allocate(BYTES_PER_FRAME).order(ByteOrder.LITTLE_ENDIAN);
    for (int k = 0; k < fid.points(); k++) {
      frame.clear();
      frame.putShort((short) Math.round(fid.re(k) / voltsPerCount));
      frame.putShort((short) Math.round(fid.im(k) / voltsPerCount));
      out.write(frame.array());
    }
  }

  /** 1/dwell rounded to whole hertz, within what the format's fields hold. */
  static int statedRate(Fid fid) {
    long rate = Math.round(fid.widthHertz());
    return (int) Math.max(1, Math.min(rate, Integer.MAX_VALUE / BYTES_PER_FRAME));
  }

  private static byte[] tag(String four) {
    return four.getBytes(StandardCharsets.US_ASCII);
  }

  private static byte[] padded(String text) {
    byte[] bytes = text.getBytes(StandardCharsets.US_ASCII);
    return java.util.Arrays.copyOf(bytes, bytes.length + 2 - bytes.length % 2);
  }
}
