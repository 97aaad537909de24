package coilside.command;

import coilside.bench.BenchSettings;
import coilside.bench.Conditions;
import coilside.bench.Finding;
import coilside.bench.KeepException;
import coilside.board.BoardIdentity;
import coilside.board.BoardLimits;
import coilside.board.profile.DeviceProfile;
import coilside.quantity.Nucleus;
import coilside.record.RecordView;
import java.util.Optional;
import java.util.OptionalDouble;

/** What is known of a bench that another program holds: from its record and the profile. */
final class WatchedBench {
  private final DeviceProfile profile;

  private WatchedBench(DeviceProfile profile) {
    this.profile = profile;
  }

  /** The profile the options name, else the shipped one that was last measured with. */
  static WatchedBench of(CommonOptions options, Optional<Conditions> last) {
    DeviceProfile usual = Profiles.read(BoardAddress.parse(options.board).profile());
    if (options.board == null && last.isPresent()) {
      for (String name : Profiles.SHIPPED) {
        if (Profiles.class.getResource("/device-profiles/" + name + ".toml") != null) {
          DeviceProfile shipped = Profiles.read(name);
          if (shipped.digest().equals(last.get().profileDigest())) {
            return new WatchedBench(shipped);
          }
        }
      }
    }
    return new WatchedBench(usual);
  }

  BoardLimits limits() {
    return profile.limits();
  }

  BoardIdentity identity(Optional<Conditions> last, Optional<Finding> newest, String holder) {
    return new BoardIdentity(
        last.map(Conditions::board).orElse("a board"),
        profile.name(),
        profile.digest(),
        "held by " + holder,
        newest.map(Finding::simulated).orElse(false));
  }

  BenchSettings settings(RecordView view) throws KeepException {
    BoardLimits.Range carrier = profile.limits().carrierHertz();
    return new BenchSettings(
        Nucleus.HYDROGEN_1,
        profile.operator().lowestResonanceHertz().orElse(carrier.min()),
        profile.operator().highestResonanceHertz().orElse(carrier.max()),
        amplitude(view),
        view.setting("sample").orElse("unnamed"),
        view.setting("coil").orElse(profile.operator().coil()),
        OptionalDouble.empty(),
        0.01,
        0.05,
        0.02,
        64);
  }

  private double amplitude(RecordView view) throws KeepException {
    try {
      double kept = Double.parseDouble(view.setting("amplitude").orElse(""));
      return kept > 0 && kept <= 1 ? kept : profile.operator().amplitude();
    } catch (NumberFormatException e) {
      return profile.operator().amplitude();
    }
  }
}
