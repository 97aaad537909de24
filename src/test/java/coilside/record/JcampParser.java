package coilside.record;

import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;

/**
 * A reader of JCAMP-DX tables for tests, written from the standard's description of its packed
 * forms (AFFN, PAC, SQZ, DIF, DIFDUP) and sharing nothing with the writer.
 */
final class JcampParser {
  private static final String SQUEEZED = "@ABCDEFGHI";
  private static final String SQUEEZED_NEGATIVE = "abcdefghi";
  private static final String DIFFERENCE = "%JKLMNOPQR";
  private static final String DIFFERENCE_NEGATIVE = "jklmnopqr";
  private static final String DUPLICATE = "STUVWXYZs";

  /** Labelled records by label without blanks, hyphens, slashes and underscores, in upper case. */
  final Map<String, String> records = new HashMap<>();

  /** Ordinates of each page's table, as they stand there. */
  final List<double[]> pages = new ArrayList<>();

  /** First column of each line of each table. */
  final List<double[]> lineStarts = new ArrayList<>();

  static JcampParser parse(String text) {
    JcampParser parser = new JcampParser();
    String label = null;
    StringBuilder value = new StringBuilder();
    for (String raw : text.split("\r?\n")) {
      int comment = raw.indexOf("$$");
      String line = comment >= 0 ? raw.substring(0, comment) : raw;
      if (line.startsWith("##")) {
        parser.finish(label, value);
        int equals = line.indexOf('=');
        label = line.substring(2, equals).toUpperCase(Locale.ROOT).replaceAll("[ \\-/_]", "");
        value = new StringBuilder(line.substring(equals + 1).trim());
      } else if (!line.isBlank()) {
        value.append('\n').append(line);
      }
    }
    parser.finish(label, value);
    return parser;
  }

  private void finish(String label, StringBuilder value) {
    if (label == null) {
      return;
    }
    if (label.equals("DATATABLE")) {
      List<String> lines = List.of(value.toString().split("\n"));
      List<Double> starts = new ArrayList<>();
      pages.add(table(lines.subList(1, lines.size()), starts));
      lineStarts.add(starts.stream().mapToDouble(Double::doubleValue).toArray());
    } else {
      records.put(label, value.toString().replace("\n", " "));
    }
  }

  double[] numbers(String label) {
    String[] items = records.get(label).replaceAll("[()]", "").split(",");
    double[] out = new double[items.length];
    for (int i = 0; i < items.length; i++) {
      out[i] = Double.parseDouble(items[i].trim());
    }
    return out;
  }

  static double[] table(List<String> lines, List<Double> starts) {
    List<Double> out = new ArrayList<>();
    boolean check = false;
    for (String line : lines) {
      List<String> tokens = tokens(line);
      starts.add(Double.parseDouble(tokens.get(0)));
      boolean difference = false;
      double lastStep = 0;
      int fresh = 0;
      for (String token : tokens.subList(1, tokens.size())) {
        char c = token.charAt(0);
        if (DUPLICATE.indexOf(c) >= 0) {
          int times = Integer.parseInt((DUPLICATE.indexOf(c) + 1) + token.substring(1));
          double step = difference ? lastStep : 0;
          for (int i = 1; i < times; i++) {
            out.add(out.get(out.size() - 1) + step);
          }
          continue;
        }
        if (DIFFERENCE.indexOf(c) >= 0 || DIFFERENCE_NEGATIVE.indexOf(c) >= 0) {
          double step = unpack(token, DIFFERENCE, DIFFERENCE_NEGATIVE);
          out.add(out.get(out.size() - 1) + step);
          lastStep = step;
          difference = true;
        } else {
          double y =
              SQUEEZED.indexOf(c) >= 0 || SQUEEZED_NEGATIVE.indexOf(c) >= 0
                  ? unpack(token, SQUEEZED, SQUEEZED_NEGATIVE)
                  : Double.parseDouble(token);
          if (check && fresh == 0) {
            double before = out.get(out.size() - 1);
            if (before != y) {
              throw new IllegalStateException("Y-check: " + y + " instead of " + before);
            }
          } else {
            out.add(y);
          }
          difference = false;
        }
        fresh++;
      }
      check = difference;
    }
    return out.stream().mapToDouble(Double::doubleValue).toArray();
  }

  private static double unpack(String token, String plus, String minus) {
    char c = token.charAt(0);
    int digit = plus.indexOf(c) >= 0 ? plus.indexOf(c) : minus.indexOf(c) + 1;
    double magnitude = Double.parseDouble(digit + token.substring(1));
    return plus.indexOf(c) >= 0 ? magnitude : -magnitude;
  }

  /** Every sign and every packed first digit starts a number; blanks end one. */
  private static List<String> tokens(String line) {
    List<String> out = new ArrayList<>();
    StringBuilder token = new StringBuilder();
    for (char c : line.toCharArray()) {
      boolean starts =
          c == '+'
              || c == '-'
              || (SQUEEZED + SQUEEZED_NEGATIVE).indexOf(c) >= 0
              || (DIFFERENCE + DIFFERENCE_NEGATIVE).indexOf(c) >= 0
              || DUPLICATE.indexOf(c) >= 0;
      if ((starts || Character.isWhitespace(c)) && token.length() > 0) {
        out.add(token.toString());
        token.setLength(0);
      }
      if (!Character.isWhitespace(c)) {
        token.append(c);
      }
    }
    if (token.length() > 0) {
      out.add(token.toString());
    }
    return out;
  }
}
