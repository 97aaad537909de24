package coilside.bench;

import coilside.board.BoardException;
import coilside.quantity.Measured;
import java.time.Duration;
import java.time.Instant;
import java.util.LinkedHashMap;
import java.util.Map;
import java.util.OptionalDouble;

/**
 * A log: the same acquisition at fixed times. The schedule does not drift: slot k is due at start +
 * k * interval, whatever the rows before it took; slots that were missed are told in a row of their
 * own, not piled up.
 */
final class LogRun {
  private static final String[] KEPT = {
    "larmor_frequency", "field", "amplitude", "linewidth", "t2_star", "snr"
  };

  private final Bench bench;
  private final Work.Log plan;
  private final Waiter waiter;
  private final String run;
  private final Instant start;
  private OptionalDouble carrier = OptionalDouble.empty();

  LogRun(Bench bench, Work.Log plan, Waiter waiter) {
    this.bench = bench;
    this.plan = plan;
    this.waiter = waiter;
    this.start = bench.now();
    this.run = "log-" + start.toString().replace(":", "").replaceAll("\\..*Z", "Z");
  }

  /** Runs to the end of the plan, or until the bench is stopped. */
  void run() throws BoardException, KeepException, InterruptedException {
    bench.note(
        "log started", run + ": every " + plan.every() + ", " + plan.scans() + " scans a row");
    long slot = 0;
    long rows = 0;
    while (!bench.stopRequested() && (plan.count() == 0 || slot < plan.count())) {
      Instant due = start.plus(plan.every().multipliedBy(slot));
      if (plan.until().isPresent() && due.isAfter(plan.until().get())) {
        break;
      }
      waiter.await(due, bench::stopRequested);
      if (bench.stopRequested()) {
        break;
      }
      row(slot, due);
      rows++;
      slot = next(slot);
    }
    bench.note("log ended", run + ": " + rows + " rows");
  }

  private void row(long slot, Instant due) throws BoardException, KeepException {
    Instant started = bench.now();
    try {
      Bench.Taken taken = bench.take(plan.scans(), 0, 0, "", carrier, "log");
      Map<String, Measured> values = new LinkedHashMap<>();
      for (String name : KEPT) {
        Measured m = taken.reading().values().get(name);
        if (m != null) {
          values.put(name, m);
        }
      }
      if (plan.follow() && values.containsKey("larmor_frequency")) {
        carrier = OptionalDouble.of(values.get("larmor_frequency").value());
      }
      bench.keepRow(
          new LogRow(
              run,
              slot,
              due,
              started,
              values,
              taken.capture().scans().get(0).temperatureCelsius(),
              taken.capture().scans().stream().mapToInt(s -> s.retries()).sum(),
              String.join("; ", taken.reading().warnings()),
              taken.name()));
    } catch (NotMeasurable e) {
      gap(slot, due, started, e.getMessage());
    } catch (BoardException.LinkLost
        | BoardException.Silent
        | BoardException.Unreachable
        | BoardException.BadAnswer e) {
      gap(slot, due, started, e.getMessage());
    }
  }

  private void gap(long slot, Instant due, Instant started, String why) throws KeepException {
    bench.keepRow(
        new LogRow(run, slot, due, started, Map.of(), OptionalDouble.empty(), 0, why, ""));
  }

  /** The next slot that is not over yet; missed ones are told. */
  private long next(long slot) throws KeepException {
    long passed = Duration.between(start, bench.now()).dividedBy(plan.every());
    long next = Math.max(slot + 1, passed);
    if (plan.count() > 0) {
      next = Math.min(next, plan.count());
    }
    long missed = next - slot - 1;
    if (missed > 0) {
      Instant due = start.plus(plan.every().multipliedBy(slot + 1));
      gap(
          slot + 1,
          due,
          bench.now(),
          missed + " slots missed: the row before took longer than the interval allows");
    }
    return next;
  }
}
