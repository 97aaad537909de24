package coilside.board.profile;

import java.util.List;
import java.util.Optional;

/**
 * What became of reading a profile file: the profile, or everything that is wrong with it.
 *
 * @param profile present exactly when there are no problems
 * @param problems in the order of the file; empty when the file is sound
 */
public record ProfileReading(Optional<DeviceProfile> profile, List<ProfileProblem> problems) {
  public ProfileReading {
    problems = List.copyOf(problems);
    if (profile.isPresent() != problems.isEmpty()) {
      throw new IllegalArgumentException("a profile and problems exclude each other");
    }
  }

  public boolean sound() {
    return problems.isEmpty();
  }
}
