package coilside.terminal;

import coilside.bench.BenchSettings;
import coilside.board.BoardLimits;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.OptionalDouble;
import java.util.function.BiFunction;
import java.util.function.Function;

/**
 * One line of the settings: what it is, how it stands, what is allowed, and how a typed text
 * changes the bench's settings.
 *
 * @param change gives the changed settings, or throws IllegalArgumentException with the reason
 */
record SettingField(
    String name,
    Function<BenchSettings, String> shown,
    Function<BenchSettings, String> editable,
    String allowed,
    BiFunction<BenchSettings, String, BenchSettings> change) {

  private static final int LONGEST_TEXT = 80;

  /** Named values of the settings record, changed one at a time. */
  private static final class Draft {
    private final BenchSettings from;
    private double low;
    private double high;
    private double amplitude;
    private String sample;
    private String coil;
    private OptionalDouble t1;
    private double pulseTarget;
    private double t1Target;
    private double t2Target;
    private int budget;

    Draft(BenchSettings s) {
      from = s;
      low = s.searchLowHertz();
      high = s.searchHighHertz();
      amplitude = s.amplitude();
      sample = s.sample();
      coil = s.coil();
      t1 = s.expectedT1Seconds();
      pulseTarget = s.pulse90Target();
      t1Target = s.t1Target();
      t2Target = s.t2Target();
      budget = s.scanBudget();
    }

    BenchSettings done() {
      return new BenchSettings(
          from.nucleus(),
          low,
          high,
          amplitude,
          sample,
          coil,
          t1,
          pulseTarget,
          t1Target,
          t2Target,
          budget);
    }
  }

  private interface Setter {
    void set(Draft draft, String text);
  }

  private static BiFunction<BenchSettings, String, BenchSettings> changing(Setter setter) {
    return (settings, text) -> {
      Draft draft = new Draft(settings);
      setter.set(draft, text);
      return draft.done();
    };
  }

  static List<SettingField> all(BoardLimits limits) {
    List<SettingField> out = new ArrayList<>();
    BoardLimits.Range carrier = limits.carrierHertz();
    BoardLimits.Range amplitude = limits.amplitude();
    String carrierRange =
        Numbers.trimmed(carrier.min(), "Hz") + " to " + Numbers.trimmed(carrier.max(), "Hz");
    out.add(text("sample", BenchSettings::sample, changing((d, t) -> d.sample = clean(t))));
    out.add(text("coil", BenchSettings::coil, changing((d, t) -> d.coil = clean(t))));
    out.add(
        number(
            "search from",
            s -> Numbers.trimmed(s.searchLowHertz(), "Hz"),
            carrierRange,
            changing((d, t) -> d.low = within(t, "Hz", 1, carrier, "7.9 MHz"))));
    out.add(
        number(
            "search to",
            s -> Numbers.trimmed(s.searchHighHertz(), "Hz"),
            carrierRange,
            changing((d, t) -> d.high = within(t, "Hz", 1, carrier, "8.3 MHz"))));
    out.add(
        number(
            "amplitude",
            s -> plain(s.amplitude()),
            plain(amplitude.min()) + " to " + plain(amplitude.max()) + " of full",
            changing((d, t) -> d.amplitude = within(t, "", 1, amplitude, "0.5"))));
    out.add(
        number(
            "expected T1",
            s ->
                s.expectedT1Seconds().isPresent()
                    ? Numbers.trimmed(s.expectedT1Seconds().getAsDouble(), "s")
                    : "unknown",
            "1 ms to 100 s, or unknown",
            changing((d, t) -> d.t1 = expectedT1(t))));
    out.add(
        target("90-degree pulse to", BenchSettings::pulse90Target, (d, v) -> d.pulseTarget = v));
    out.add(target("T1 to", BenchSettings::t1Target, (d, v) -> d.t1Target = v));
    out.add(target("T2* and T2 to", BenchSettings::t2Target, (d, v) -> d.t2Target = v));
    out.add(
        number(
            "scans a rung",
            s -> Integer.toString(s.scanBudget()),
            "1 to 1000000, at most",
            changing(
                (d, t) ->
                    d.budget = (int) within(t, "", 1, new BoardLimits.Range(1, 1e6, 1), "256"))));
    return out;
  }

  private static String clean(String text) {
    String t = text.strip();
    return t.length() > LONGEST_TEXT ? t.substring(0, LONGEST_TEXT) : t;
  }

  private static String plain(double v) {
    return Numbers.trimmed(v, "");
  }

  private static OptionalDouble expectedT1(String text) {
    String t = text.trim().toLowerCase(Locale.ROOT);
    if (t.isEmpty() || t.equals("unknown")) {
      return OptionalDouble.empty();
    }
    return OptionalDouble.of(within(text, "s", 1, new BoardLimits.Range(1e-3, 100, 0), "0.5 s"));
  }

  private static SettingField text(
      String name,
      Function<BenchSettings, String> get,
      BiFunction<BenchSettings, String, BenchSettings> change) {
    return new SettingField(name, get, get, "any text, up to " + LONGEST_TEXT + " letters", change);
  }

  private static SettingField number(
      String name,
      Function<BenchSettings, String> get,
      String allowed,
      BiFunction<BenchSettings, String, BenchSettings> change) {
    return new SettingField(name, get, get, allowed, change);
  }

  private interface TargetSetter {
    void set(Draft draft, double value);
  }

  private static SettingField target(
      String name, Function<BenchSettings, Double> get, TargetSetter setter) {
    return number(
        name,
        s -> plain(get.apply(s) * 100) + " %",
        "0.01 % to 50 %, standard uncertainty",
        changing(
            (d, t) ->
                setter.set(d, within(t, "", 0.01, new BoardLimits.Range(1e-4, 0.5, 0), "1 %"))));
  }

  static double within(
      String text, String unit, double bareScale, BoardLimits.Range range, String example) {
    double v = Quantities.read(text, unit, bareScale, example);
    if (!Double.isFinite(v) || !range.contains(v)) {
      throw new IllegalArgumentException(
          Numbers.trimmed(v, unit)
              + " is outside "
              + Numbers.trimmed(range.min(), unit)
              + " to "
              + Numbers.trimmed(range.max(), unit)
              + "; write for example "
              + example);
    }
    return range.snap(v);
  }
}
