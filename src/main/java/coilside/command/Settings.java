package coilside.command;

import coilside.bench.BenchSettings;
import coilside.bench.KeepException;
import coilside.board.BoardLimits;
import coilside.board.profile.DeviceProfile;
import coilside.quantity.Nucleus;
import coilside.quantity.Unit;
import coilside.record.BenchRecord;
import java.util.OptionalDouble;

/**
 * The operator's settings for this run: the options, else what was remembered, else what the
 * profile says.
 */
final class Settings {
  private Settings() {}

  static BenchSettings of(CommonOptions options, DeviceProfile profile, BenchRecord record)
      throws KeepException {
    String sample = remembered(record, "sample", options.sample, "unnamed");
    String coil = remembered(record, "coil", options.coil, profile.operator().coil());
    double amplitude = amplitude(options, profile, record);
    double[] range = searchRange(options, profile);
    OptionalDouble t1 =
        options.expectedT1 == null
            ? OptionalDouble.empty()
            : OptionalDouble.of(Values.positive("--expected-t1", options.expectedT1, Unit.SECOND));
    if (options.scanBudget < 8) {
      throw new UsageException("--scan-budget " + options.scanBudget + " must be at least 8");
    }
    return new BenchSettings(
        Nucleus.HYDROGEN_1,
        range[0],
        range[1],
        amplitude,
        sample,
        coil,
        t1,
        0.01,
        0.05,
        0.02,
        options.scanBudget);
  }

  private static String remembered(BenchRecord record, String name, String given, String otherwise)
      throws KeepException {
    if (given != null) {
      String clean = Output.printable(given).strip();
      if (clean.isEmpty() || clean.length() > 200) {
        throw new UsageException("--" + name + " must be 1 to 200 characters long");
      }
      record.setSetting(name, clean);
      return clean;
    }
    return record.setting(name).orElse(otherwise);
  }

  private static double amplitude(CommonOptions options, DeviceProfile profile, BenchRecord record)
      throws KeepException {
    BoardLimits.Range allowed = profile.limits().amplitude();
    double amplitude = profile.operator().amplitude();
    if (options.amplitude != null) {
      amplitude = Values.fraction("--amplitude", options.amplitude);
      if (!allowed.contains(amplitude) || amplitude <= 0) {
        throw new UsageException(
            "--amplitude "
                + options.amplitude
                + " is outside what the profile allows: "
                + allowed.min()
                + " to "
                + allowed.max());
      }
      record.setSetting("amplitude", Double.toString(amplitude));
    } else if (record.setting("amplitude").isPresent()) {
      try {
        double kept = Double.parseDouble(record.setting("amplitude").get());
        amplitude = kept > 0 && allowed.contains(kept) ? kept : amplitude;
      } catch (NumberFormatException e) {
        amplitude = profile.operator().amplitude();
      }
    }
    return allowed.snap(amplitude);
  }

  private static double[] searchRange(CommonOptions options, DeviceProfile profile) {
    BoardLimits.Range carrier = profile.limits().carrierHertz();
    double low = profile.operator().lowestResonanceHertz().orElse(carrier.min());
    double high = profile.operator().highestResonanceHertz().orElse(carrier.max());
    if (options.search != null) {
      int dots = options.search.indexOf("..");
      if (dots < 0) {
        throw new UsageException(
            "--search '" + options.search + "' is not LOW..HIGH; for example 7.9MHz..8.3MHz");
      }
      low = Values.positive("--search", options.search.substring(0, dots), Unit.HERTZ);
      high = Values.positive("--search", options.search.substring(dots + 2), Unit.HERTZ);
      if (low >= high) {
        throw new UsageException("--search '" + options.search + "' does not rise");
      }
      if (!carrier.contains(low) || !carrier.contains(high)) {
        throw new UsageException(
            "--search '"
                + options.search
                + "' leaves the carrier range of the board, "
                + carrier.min() * 1e-6
                + " to "
                + carrier.max() * 1e-6
                + " MHz");
      }
    }
    return new double[] {low, high};
  }
}
