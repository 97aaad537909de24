package coilside.quantity;

import java.util.LinkedHashMap;
import java.util.Map;
import java.util.regex.Matcher;
import java.util.regex.Pattern;

/** Reads quantities as people write them: "12.5us", "8.09 MHz", "2h". */
public final class Quantities {
  private static final int LONGEST = 40;
  private static final Pattern FORM =
      Pattern.compile("([+-]?(?:\\d+\\.?\\d*|\\.\\d+)(?:[eE][+-]?\\d{1,3})?)\\s*([A-Za-z\u00b5]*)");

  private Quantities() {}

  private static Map<String, Double> spellings(Unit unit) {
    Map<String, Double> out = new LinkedHashMap<>();
    switch (unit) {
      case SECOND -> {
        out.put("ns", 1e-9);
        out.put("us", 1e-6);
        out.put("ms", 1e-3);
        out.put("s", 1.0);
        out.put("min", 60.0);
        out.put("h", 3600.0);
      }
      case HERTZ -> {
        out.put("Hz", 1.0);
        out.put("kHz", 1e3);
        out.put("MHz", 1e6);
      }
      case VOLT -> {
        out.put("nV", 1e-9);
        out.put("uV", 1e-6);
        out.put("mV", 1e-3);
        out.put("V", 1.0);
      }
      case TESLA -> {
        out.put("uT", 1e-6);
        out.put("mT", 1e-3);
        out.put("T", 1.0);
      }
      case DECIBEL -> out.put("dB", 1.0);
      case CELSIUS -> out.put("degC", 1.0);
      default ->
          throw new IllegalArgumentException("quantities in " + unit.symbol() + " are not read");
    }
    return out;
  }

  /**
   * The value in the unit.
   *
   * @throws IllegalArgumentException no number, a unit missing or of another kind; the message says
   *     what is allowed
   */
  public static double parse(String text, Unit unit) {
    Map<String, Double> spellings = spellings(unit);
    String shown = text.length() > LONGEST ? text.substring(0, LONGEST) + "..." : text;
    Matcher m = FORM.matcher(text.strip());
    if (text.length() > LONGEST || !m.matches()) {
      throw new IllegalArgumentException(
          "'" + shown + "' is not a number with a unit; allowed units: " + allowed(spellings));
    }
    String name = m.group(2).replace('\u00b5', 'u');
    Double size = spellings.get(name);
    if (size == null) {
      throw new IllegalArgumentException(
          (name.isEmpty()
                  ? "'" + shown + "' has no unit"
                  : "the unit of '" + shown + "' is unknown")
              + "; allowed: "
              + allowed(spellings)
              + "; for example "
              + m.group(1)
              + spellings.keySet().stream()
                  .skip(Math.min(1, spellings.size() - 1))
                  .findFirst()
                  .get());
    }
    double number = Double.parseDouble(m.group(1));
    double inverse = Math.rint(1 / size);
    // Dividing by an exact power of ten gives the nearest number, multiplying by its inverse not.
    double si = size < 1 ? number / inverse : number * size;
    if (!Double.isFinite(si)) {
      throw new IllegalArgumentException("'" + shown + "' is too large");
    }
    return si;
  }

  private static String allowed(Map<String, Double> spellings) {
    return String.join(", ", spellings.keySet());
  }
}
