package coilside.board.simulated;

import coilside.board.profile.ProfileProblem;
import java.util.List;
import java.util.Optional;

/**
 * What came of reading a scenario file: the scenario, or everything that is wrong with the file.
 *
 * @param scenario there when nothing is wrong
 * @param problems in the order of the file
 */
public record ScenarioReading(Optional<Scenario> scenario, List<ProfileProblem> problems) {
  public ScenarioReading {
    problems = List.copyOf(problems);
    if (scenario.isPresent() != problems.isEmpty()) {
      throw new IllegalArgumentException("a scenario or problems, not both");
    }
  }
}
