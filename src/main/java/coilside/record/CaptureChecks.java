package coilside.record;

import com.google.gson.JsonElement;
import com.google.gson.JsonObject;
import java.io.IOException;
import java.io.InputStream;
import java.nio.file.Files;
import java.nio.file.Path;
import java.security.MessageDigest;
import java.time.DateTimeException;
import java.time.Instant;
import java.util.ArrayList;
import java.util.HexFormat;
import java.util.List;
import java.util.Set;
import java.util.regex.Matcher;
import java.util.regex.Pattern;

/**
 * Checks of a SigMF recording beyond what the official schema looks at: the data file's length and
 * SHA-512, times in UTC only, segments and annotations sorted and within the data, whole patterns,
 * no field outside the core and the declared extensions. After the text of SigMF 1.2.6.
 */
public final class CaptureChecks {
  private static final Pattern DATATYPE =
      Pattern.compile("[rc](?:([fiu])(64|32|16)_[lb]e|([iu])(8))");
  private static final Pattern VERSION = Pattern.compile("\\d+\\.\\d+\\.\\d+");
  private static final Pattern SHA512 = Pattern.compile("[0-9a-fA-F]{128}");
  private static final Pattern UTC =
      Pattern.compile("\\d{4}-\\d{2}-\\d{2}T\\d{2}:\\d{2}:\\d{2}(\\.\\d+)?Z");
  private static final Set<String> TOP = Set.of("global", "captures", "annotations");
  private static final Set<String> CORE =
      Set.of(
          "datatype",
          "sample_rate",
          "num_channels",
          "offset",
          "author",
          "description",
          "hw",
          "recorder",
          "license",
          "sha512",
          "collection",
          "dataset",
          "trailing_bytes",
          "metadata_only",
          "data_doi",
          "meta_doi",
          "geolocation",
          "extensions",
          "version",
          "sample_start",
          "frequency",
          "datetime",
          "global_index",
          "header_bytes",
          "sample_count",
          "freq_lower_edge",
          "freq_upper_edge",
          "label",
          "comment",
          "generator",
          "uuid");

  private final Path meta;
  private final Path data;
  private final List<String> problems = new ArrayList<>();

  private CaptureChecks(Path path) {
    this.meta = CaptureReader.sibling(path, CapturesFolder.META);
    this.data = CaptureReader.sibling(path, CapturesFolder.DATA);
  }

  /**
   * All that is wrong with a recording; empty when it is sound.
   *
   * @param path its metadata file, its data file, or the path without an extension
   */
  public static List<String> problems(Path path) {
    CaptureChecks checks = new CaptureChecks(path);
    try {
      checks.run();
    } catch (CaptureException e) {
      checks.problems.add(e.getMessage());
    } catch (IOException e) {
      checks.problems.add("cannot read " + checks.data + ": " + Trouble.words(e));
    }
    return List.copyOf(checks.problems);
  }

  private void run() throws CaptureException, IOException {
    Node root = Node.parse(meta.getFileName().toString(), CaptureReader.metaText(meta));
    if (!root.object().keySet().equals(TOP)) {
      problems.add("the top level holds " + root.object().keySet() + " instead of " + TOP);
    }
    Node global = root.child("global");
    Set<String> namespaces = namespaces(global);
    String version = global.text("core:version");
    require(VERSION.matcher(version).matches(), "version '" + version + "' is not X.Y.Z");
    long samples = checkData(global);
    List<Node> segments = root.list("captures", Integer.MAX_VALUE);
    List<Node> annotations = root.list("annotations", Integer.MAX_VALUE);
    checkNames(global.object(), namespaces);
    checkOrder("capture segments", segments, samples);
    checkOrder("annotations", annotations, samples);
    for (Node segment : segments) {
      checkNames(segment.object(), namespaces);
      if (segment.has("core:datetime")) {
        checkTime(segment.text("core:datetime"));
      }
    }
    for (Node annotation : annotations) {
      checkNames(annotation.object(), namespaces);
      checkAnnotation(annotation, samples);
    }
  }

  private void require(boolean condition, String problem) {
    if (!condition) {
      problems.add(problem);
    }
  }

  private Set<String> namespaces(Node global) throws CaptureException {
    Set<String> names = new java.util.HashSet<>();
    if (global.has("core:extensions")) {
      for (Node extension : global.list("core:extensions", 1000)) {
        names.add(extension.text("name"));
        require(
            VERSION.matcher(extension.text("version")).matches(),
            "extension version '" + extension.text("version") + "' is not X.Y.Z");
        extension.truth("optional");
      }
    }
    return names;
  }

  private long checkData(Node global) throws CaptureException, IOException {
    String datatype = global.text("core:datatype");
    Matcher m = DATATYPE.matcher(datatype);
    if (!m.matches() || "f".equals(m.group(1)) && "16".equals(m.group(2))) {
      problems.add("datatype '" + Words.oneLine(datatype, 40) + "' is none of the standard's");
      return Long.MAX_VALUE;
    }
    boolean i64 = "64".equals(m.group(2)) && !"f".equals(m.group(1));
    require(!i64, "datatype '" + datatype + "' is none of the standard's");
    int bits = Integer.parseInt(m.group(2) != null ? m.group(2) : m.group(4));
    long channels =
        global.has("core:num_channels") ? global.whole("core:num_channels", 1, 1000) : 1;
    long bytesPerSample = bits / 8 * (datatype.startsWith("c") ? 2 : 1) * channels;
    long size = Files.size(data);
    require(
        size % bytesPerSample == 0,
        data.getFileName()
            + " is "
            + size
            + " bytes long, not a whole number of samples of "
            + bytesPerSample
            + " bytes");
    if (global.has("core:sha512")) {
      String stated = global.text("core:sha512");
      require(SHA512.matcher(stated).matches(), "the SHA-512 is not 128 hexadecimal digits");
      require(
          stated.equalsIgnoreCase(sha512()),
          "the SHA-512 of " + data.getFileName() + " is not the one the metadata state");
    } else {
      problems.add("the metadata state no SHA-512");
    }
    return size / bytesPerSample;
  }

  private String sha512() throws IOException {
    MessageDigest digest = FileWriter.sha512();
    byte[] buffer = new byte[65536];
    try (InputStream in = Files.newInputStream(data)) {
      for (int n = in.read(buffer); n >= 0; n = in.read(buffer)) {
        digest.update(buffer, 0, n);
      }
    }
    return HexFormat.of().formatHex(digest.digest());
  }

  private void checkOrder(String what, List<Node> nodes, long samples) throws CaptureException {
    long before = 0;
    long points = 0;
    boolean counted = false;
    for (Node node : nodes) {
      long start = node.whole("core:sample_start", 0, Long.MAX_VALUE >> 1);
      require(start >= before, what + " are not sorted: " + start + " follows " + before);
      require(start < samples, what + " start beyond the data, at sample " + start);
      before = start;
      if (node.has("coilside:points")) {
        counted = true;
        require(
            start == points, "segment at sample " + start + " does not follow the one before it");
        points += node.whole("coilside:points", 1, Integer.MAX_VALUE);
      }
    }
    require(
        !counted || points == samples,
        "the segments account for " + points + " samples, the data file holds " + samples);
  }

  private void checkAnnotation(Node annotation, long samples) throws CaptureException {
    long start = annotation.whole("core:sample_start", 0, Long.MAX_VALUE >> 1);
    if (annotation.has("core:sample_count")) {
      long count = annotation.whole("core:sample_count", 0, Long.MAX_VALUE >> 1);
      require(start + count <= samples, "an annotation ends beyond the data: " + start);
    }
    require(
        annotation.has("core:freq_lower_edge") == annotation.has("core:freq_upper_edge"),
        "an annotation has one frequency edge without the other");
  }

  private void checkTime(String text) {
    boolean sound = UTC.matcher(text).matches();
    if (sound) {
      try {
        Instant.parse(text);
      } catch (DateTimeException e) {
        sound = false;
      }
    }
    require(sound, "'" + Words.oneLine(text, 60) + "' is no UTC time ending in Z");
  }

  private void checkNames(JsonObject object, Set<String> namespaces) {
    for (java.util.Map.Entry<String, JsonElement> entry : object.entrySet()) {
      String key = entry.getKey();
      int colon = key.indexOf(':');
      String namespace = colon < 0 ? "" : key.substring(0, colon);
      boolean known =
          namespace.equals("core")
              ? CORE.contains(key.substring(colon + 1))
              : namespaces.contains(namespace);
      require(
          known,
          "'"
              + Words.oneLine(key, 60)
              + "' belongs neither to the core nor to a declared extension");
    }
  }
}
