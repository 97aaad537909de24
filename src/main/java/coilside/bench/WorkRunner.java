package coilside.bench;

import coilside.board.BoardException;
import java.util.Optional;

/** Does one piece of work on a bench and says how it ended. */
final class WorkRunner {
  private WorkRunner() {}

  static Progress.WorkEnded run(Bench bench, Work work) throws BoardException, KeepException {
    if (work instanceof Work.Ready) {
      return ended(bench.ready());
    }
    if (work instanceof Work.Measure measure) {
      return ended(bench.measure(measure.rung()));
    }
    if (work instanceof Work.TakeFid request) {
      try {
        bench.takeFid(request);
        return new Progress.WorkEnded(true, Optional.empty());
      } catch (Bench.FidRefused e) {
        return new Progress.WorkEnded(false, Optional.of("FID refused: " + e.getMessage()));
      }
    }
    if (work instanceof Work.Live live) {
      bench.live(live);
      return new Progress.WorkEnded(true, Optional.empty());
    }
    if (work instanceof Work.Log log) {
      LogEnd end = bench.log(log);
      return new Progress.WorkEnded(
          end.asWished(), end.reason().isEmpty() ? Optional.empty() : Optional.of(end.reason()));
    }
    throw new IllegalStateException("no way to do " + work);
  }

  private static Progress.WorkEnded ended(Climb climb) {
    if (climb.ready()) {
      return new Progress.WorkEnded(true, Optional.empty());
    }
    return climb.measured().stream()
        .filter(Finding::refused)
        .reduce((first, second) -> second)
        .map(WorkRunner::ended)
        .orElse(new Progress.WorkEnded(false, Optional.of("not every rung is fresh")));
  }

  private static Progress.WorkEnded ended(Finding finding) {
    return new Progress.WorkEnded(
        !finding.refused(),
        finding.refusal().map(r -> finding.rung().id() + " refused: " + r.reason()));
  }
}
