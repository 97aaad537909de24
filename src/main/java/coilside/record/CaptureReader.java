package coilside.record;

import coilside.bench.Capture;
import coilside.bench.Conditions;
import coilside.shot.Shot;
import coilside.signal.Fid;
import coilside.signal.Scan;
import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.ByteOrder;
import java.nio.channels.FileChannel;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.DateTimeException;
import java.time.Instant;
import java.util.ArrayList;
import java.util.List;
import java.util.OptionalDouble;

/**
 * Reads a kept capture back, to the last bit: the SigMF recordings this program writes, also when
 * they went through other hands. Datatypes cf64_le and cf32_le; the extension {@code coilside} must
 * be there. Everything is checked against bounds before memory is taken for it.
 */
public final class CaptureReader {
  private static final long MAX_META_BYTES = 64L << 20;
  private static final long MAX_DATA_BYTES = 1L << 29;
  private static final int MAX_SCANS = 1_000_000;
  private static final int MAX_SHOTS = 1_000_000;

  private CaptureReader() {}

  /**
   * Reads a capture.
   *
   * @param path its metadata file, its data file, or the path without an extension
   * @throws CaptureException when it is not there, not sound or not ours; the message says which
   *     file and what
   */
  public static Capture read(Path path) throws CaptureException {
    Path meta = sibling(path, CapturesFolder.META);
    Path data = sibling(path, CapturesFolder.DATA);
    Node root = Node.parse(meta.getFileName().toString(), metaText(meta));
    Node global = root.child("global");
    if (!global.has("coilside:scans")) {
      throw global.wrong(
          "this SigMF recording does not hold the settings of the measurement (extension"
              + " 'coilside'), so it cannot be analysed again; only captures kept by coilside can");
    }
    List<Shot> shots = new ArrayList<>();
    for (Node shot : global.list("coilside:shots", MAX_SHOTS)) {
      shots.add(ShotJson.read(shot));
    }
    List<List<Fid>> windows;
    try (Samples samples = new Samples(data, global)) {
      windows = windows(root.list("captures", MAX_SCANS), samples);
    } catch (IOException e) {
      throw new CaptureException("cannot read " + data + ": " + Trouble.words(e), e);
    }
    List<Node> scanNodes = global.list("coilside:scans", MAX_SCANS);
    if (windows.size() != scanNodes.size() || scanNodes.isEmpty()) {
      throw global.wrong(
          "it lists " + scanNodes.size() + " scans, but the segments hold " + windows.size());
    }
    List<Shot> played = new ArrayList<>();
    List<Scan> scans = new ArrayList<>();
    for (int i = 0; i < scanNodes.size(); i++) {
      Node scan = scanNodes.get(i);
      played.add(shots.get(scan.integer("shot", 0, shots.size() - 1)));
      scans.add(scan(scan, windows.get(i)));
    }
    return new Capture(
        global.text("coilside:purpose"),
        time(global, "coilside:started"),
        played,
        scans,
        conditions(global.child("coilside:conditions")),
        global.child("coilside:settings").texts(),
        global.text("coilside:board"),
        global.truth("coilside:simulated"));
  }

  /** The capture's files share this path but for the extension. */
  static Path sibling(Path path, String extension) {
    String name = path.getFileName() == null ? "" : path.getFileName().toString();
    for (String known : List.of(CapturesFolder.META, CapturesFolder.DATA)) {
      if (name.endsWith(known)) {
        name = name.substring(0, name.length() - known.length());
      }
    }
    return path.resolveSibling(name + extension);
  }

  static String metaText(Path meta) throws CaptureException {
    try {
      if (!Files.isRegularFile(meta)) {
        throw new CaptureException(
            "there is no capture " + meta + ": 'coilside ladder' names the captures there are");
      }
      long size = Files.size(meta);
      if (size > MAX_META_BYTES) {
        throw new CaptureException(
            meta + " is " + size + " bytes long; the limit is " + MAX_META_BYTES);
      }
      return StandardCharsets.UTF_8
          .newDecoder()
          .decode(ByteBuffer.wrap(Files.readAllBytes(meta)))
          .toString();
    } catch (IOException e) {
      throw new CaptureException("cannot read " + meta + ": " + Trouble.words(e), e);
    }
  }

  private static Scan scan(Node node, List<Fid> windows) throws CaptureException {
    double peak = node.number("peak_fraction");
    OptionalDouble temperature = node.optionalNumber("temperature_celsius");
    return new Scan(
        windows,
        peak,
        node.integer("clipped_samples", 0, Integer.MAX_VALUE),
        time(node, "started"),
        node.number("rest_seconds"),
        temperature,
        node.integer("retries", 0, Integer.MAX_VALUE));
  }

  private static Conditions conditions(Node node) throws CaptureException {
    return new Conditions(
        node.text("board"),
        node.text("profile_sha256"),
        node.number("carrier_hertz"),
        node.number("amplitude"),
        node.number("gain_decibels"),
        node.text("sample"),
        node.text("coil"),
        node.optionalNumber("temperature_celsius"));
  }

  private static Instant time(Node node, String key) throws CaptureException {
    String text = node.text(key);
    try {
      return Instant.parse(text);
    } catch (DateTimeException e) {
      throw node.wrong("'" + key + "' is no UTC time: '" + Words.oneLine(text, 60) + "'");
    }
  }

  /** The receive windows of each scan, from segments that follow one another without a gap. */
  private static List<List<Fid>> windows(List<Node> segments, Samples samples)
      throws CaptureException, IOException {
    List<List<Fid>> scans = new ArrayList<>();
    long next = 0;
    for (Node segment : segments) {
      long start = segment.whole("core:sample_start", 0, samples.count);
      if (start != next) {
        throw segment.wrong("it starts at sample " + start + " instead of " + next);
      }
      int points = segment.integer("coilside:points", 1, Integer.MAX_VALUE);
      next = start + points;
      if (next > samples.count) {
        throw segment.wrong(
            "it ends at sample " + next + ", but the data file holds " + samples.count);
      }
      int scan = segment.integer("coilside:scan", 0, segments.size());
      int window = segment.integer("coilside:window", 0, segments.size());
      if (scan == scans.size()) {
        scans.add(new ArrayList<>());
      }
      if (scan != scans.size() - 1 || window != scans.get(scan).size()) {
        throw segment.wrong("scan " + scan + " window " + window + " is out of order");
      }
      double dwell = segment.number("coilside:dwell_seconds");
      double first = segment.number("coilside:start_seconds");
      double carrier = segment.number("core:frequency");
      if (!(dwell > 0 && Double.isFinite(dwell))
          || !Double.isFinite(first)
          || !Double.isFinite(carrier)) {
        throw segment.wrong(
            "dwell " + dwell + " s, start " + first + " s, carrier " + carrier + " Hz");
      }
      scans.get(scan).add(samples.fid(segment, start, points, dwell, first, carrier));
    }
    if (next != samples.count) {
      throw new CaptureException(
          samples.file
              + " holds "
              + samples.count
              + " samples, but the metadata account for "
              + next);
    }
    return scans;
  }

  /** The data file, read window by window. */
  private static final class Samples implements AutoCloseable {
    private final Path file;
    private final FileChannel in;
    private final boolean single;
    private final int bytesPerSample;
    private final long count;

    Samples(Path file, Node global) throws CaptureException, IOException {
      this.file = file;
      String datatype = global.text("core:datatype");
      if (!datatype.equals("cf64_le") && !datatype.equals("cf32_le")) {
        throw global.wrong(
            "datatype '" + Words.oneLine(datatype, 20) + "'; cf64_le and cf32_le can be read");
      }
      single = datatype.equals("cf32_le");
      bytesPerSample = single ? 8 : 16;
      long size = Files.size(file);
      if (size > MAX_DATA_BYTES || size % bytesPerSample != 0) {
        throw new CaptureException(
            file
                + " is "
                + size
                + " bytes long; it must be a multiple of "
                + bytesPerSample
                + " and at most "
                + MAX_DATA_BYTES);
      }
      count = size / bytesPerSample;
      in = FileChannel.open(file);
    }

    Fid fid(Node segment, long start, int points, double dwell, double first, double carrier)
        throws CaptureException, IOException {
      ByteBuffer bytes = ByteBuffer.allocate(points * bytesPerSample);
      bytes.order(ByteOrder.LITTLE_ENDIAN);
      long at = start * bytesPerSample;
      while (bytes.hasRemaining()) {
        if (in.read(bytes, at + bytes.position()) < 0) {
          throw new CaptureException(file + " became shorter while it was read");
        }
      }
      bytes.flip();
      double[] re = new double[points];
      double[] im = new double[points];
      for (int k = 0; k < points; k++) {
        re[k] = single ? bytes.getFloat() : bytes.getDouble();
        im[k] = single ? bytes.getFloat() : bytes.getDouble();
        if (!Double.isFinite(re[k]) || !Double.isFinite(im[k])) {
          throw segment.wrong("sample " + (start + k) + " is not a finite number");
        }
      }
      return new Fid(re, im, dwell, first, carrier);
    }

    @Override
    public void close() throws IOException {
      in.close();
    }
  }
}
