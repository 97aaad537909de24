package coilside.bench;

import coilside.board.BoardException;
import coilside.quantity.Measured;
import java.time.Duration;
import java.time.Instant;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalDouble;

/**
 * A log: the same acquisition at fixed times, as {@link LogSchedule} says. Every slot of the
 * schedule ends in a row with values or is told by a gap; a gap of many slots is told when it
 * begins and once more, as one row, when it is over.
 *
 * <p>A link that is lost is tried again with growing pauses until half of the interval is over, and
 * then once a slot. An answer that stays damaged, or a board that says nothing, is asked once more;
 * all scans of a row that met trouble are thrown away and taken again. A resonance that is lost is
 * searched for; when it stays lost, the run ends.
 */
final class LogRun {
  /** After so many rows in a row without a resonance, or so many refusals, the run ends. */
  static final int MOST_IN_A_ROW = 3;

  private static final int MOST_TRIES = 2;
  private static final long FIRST_PAUSE_NANOS = 50_000_000L;
  private static final long LONGEST_PAUSE_NANOS = 5_000_000_000L;

  private static final String[] KEPT = {
    "larmor_frequency", "field", "amplitude", "linewidth", "t2_star", "snr"
  };

  private final Bench bench;
  private final Work.Log plan;
  private final Waiter waiter;
  private final LogSchedule schedule;
  private final String run;
  private OptionalDouble carrier = OptionalDouble.empty();
  private long rows;
  private long gaps;
  private long nextUntold;
  private String trouble = "";
  private int lostInARow;
  private int refusedInARow;
  private long tookNanos;
  private boolean thermometerTold;

  LogRun(Bench bench, Work.Log plan, Waiter waiter) {
    this.bench = bench;
    this.plan = plan;
    this.waiter = waiter;
    this.schedule = new LogSchedule(plan.every(), waiter.nanos(), bench.now());
    this.run = "log-" + bench.now().toString().replace(":", "").replaceAll("\\..*Z", "Z");
  }

  /** Runs to the end of the plan, or until the bench is stopped. */
  LogEnd run() throws BoardException, KeepException {
    bench.note(
        "log started",
        run + ": every " + plan.every().toNanos() * 1e-9 + " s, " + plan.scans() + " scans a row");
    LogEnd end = null;
    try {
      warnOfWhatIsStale();
      end = slots();
      return end;
    } finally {
      bench.note(
          "log ended",
          run
              + ": "
              + rows
              + " rows, "
              + gaps
              + " gaps"
              + (end == null
                  ? ", by an error"
                  : end.reason().isEmpty() ? "" : ": " + end.reason()));
    }
  }

  private void warnOfWhatIsStale() {
    for (RungStatus s : bench.ladder()) {
      boolean used =
          s.rung() == Rung.RESONANCE
              || s.rung() == Rung.GAIN
              || s.rung() == Rung.RINGDOWN
              || s.rung() == Rung.NUTATION
              || s.rung() == Rung.T1;
      if (used && s.state() == RungStatus.State.STALE) {
        bench.say(
            true, "The log uses " + s.rung().id() + " though it is stale: " + s.reasons().get(0));
      }
    }
  }

  private LogEnd slots() throws BoardException, KeepException {
    try {
      long slot = 0;
      while (!bench.stopRequested() && (plan.count() == 0 || slot < plan.count())) {
        if (plan.until().isPresent() && schedule.due(slot).isAfter(plan.until().get())) {
          break;
        }
        waiter.await(schedule.dueNanos(slot), bench::stopRequested);
        if (bench.stopRequested()) {
          break;
        }
        noteStepOfTheClock();
        Optional<LogEnd> cut = take(slot);
        if (cut.isPresent()) {
          return cut.get();
        }
        slot = schedule.next(slot, waiter.nanos());
        if (plan.count() > 0) {
          slot = Math.min(slot, plan.count());
        }
      }
      tellMissed(slot);
      return bench.stopRequested()
          ? end(LogEnd.Why.STOPPED, "stopped; what was finished is kept")
          : end(LogEnd.Why.PLANNED, "");
    } catch (BoardException.Stopped e) {
      return end(LogEnd.Why.STOPPED, "stopped; what was finished is kept");
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
      return end(LogEnd.Why.STOPPED, "stopped; what was finished is kept");
    }
  }

  private LogEnd end(LogEnd.Why why, String reason) {
    return new LogEnd(run, why, reason, rows, gaps);
  }

  private void noteStepOfTheClock() throws KeepException {
    Optional<Duration> step = schedule.follow(waiter.nanos(), bench.now());
    if (step.isPresent()) {
      String text =
          String.format(
              Locale.ROOT,
              "the computer's clock stepped by %+.1f s; the rows go on at the same distance",
              step.get().toNanos() * 1e-9);
      bench.note("clock stepped", run + ": " + text);
      bench.say(true, text);
    }
  }

  /** One slot: a row, or a gap with its reason. */
  private Optional<LogEnd> take(long slot)
      throws BoardException, KeepException, InterruptedException {
    long began = waiter.nanos();
    long giveUp = schedule.dueNanos(slot) + plan.every().toNanos() / 2;
    long pause = FIRST_PAUSE_NANOS;
    String met = "";
    for (int tries = 1; ; tries++) {
      Instant started = bench.now();
      try {
        OptionalDouble celsius = temperature();
        Bench.Repetition taken = bench.repeat(plan.scans(), carrier, plan.keepCaptures());
        tookNanos = waiter.nanos() - began;
        refusedInARow = 0;
        return came(slot, started, celsius, taken, met);
      } catch (NotMeasurable e) {
        return Optional.of(end(LogEnd.Why.NOT_READY, e.getMessage() + ": climb the ladder first"));
      } catch (BoardException.OverLimit e) {
        return Optional.of(end(LogEnd.Why.LIMIT, e.getMessage()));
      } catch (BoardException.LinkLost | BoardException.Unreachable e) {
        met = e.getMessage();
      } catch (BoardException.Silent | BoardException.BadAnswer e) {
        met = e.getMessage();
        giveUp = tries < MOST_TRIES ? giveUp : Long.MIN_VALUE;
      } catch (BoardException.Refused e) {
        met = e.getMessage();
        giveUp = Long.MIN_VALUE;
        refusedInARow++;
      }
      if (giveUp == Long.MIN_VALUE || waiter.nanos() + pause - giveUp > 0) {
        tookNanos = waiter.nanos() - began;
        troubled(slot, started, met);
        return refusedInARow < MOST_IN_A_ROW
            ? Optional.empty()
            : Optional.of(
                end(
                    LogEnd.Why.BOARD_REFUSED,
                    "the board refused " + refusedInARow + " times in a row: " + met));
      }
      if (tries == 1 && trouble.isEmpty()) {
        bench.say(true, met + " It is tried again.");
      }
      waiter.await(waiter.nanos() + pause, bench::stopRequested);
      pause = Math.min(2 * pause, LONGEST_PAUSE_NANOS);
      if (bench.stopRequested()) {
        throw new BoardException.Stopped("stopped by the operator");
      }
    }
  }

  /** A thermometer out of order keeps no row from being measured. */
  private OptionalDouble temperature() throws BoardException {
    try {
      return bench.askTemperature();
    } catch (BoardException.BadAnswer | BoardException.Refused e) {
      if (!thermometerTold) {
        thermometerTold = true;
        bench.say(true, "No temperature: " + e.getMessage());
      }
      return OptionalDouble.empty();
    }
  }

  /** The board did not deliver: told at once when it begins, and counted from then on. */
  private void troubled(long slot, Instant started, String why) throws KeepException {
    if (trouble.isEmpty()) {
      tellMissed(slot);
      gap(slot, started, why, "");
      nextUntold = slot + 1;
      bench.note("log gap", run + ", slot " + slot + ": " + why);
    }
    trouble = why;
  }

  private Optional<LogEnd> came(
      long slot, Instant started, OptionalDouble celsius, Bench.Repetition taken, String met)
      throws BoardException, KeepException {
    tellMissed(slot);
    if (!trouble.isEmpty()) {
      bench.note("log goes on", run + ", slot " + slot);
      bench.say(false, "The board is back; the log goes on.");
      trouble = "";
    }
    nextUntold = slot + 1;
    if (taken.reading().isEmpty()) {
      return lost(slot, started, taken);
    }
    lostInARow = 0;
    Reading reading = taken.reading().get();
    Map<String, Measured> values = new LinkedHashMap<>();
    for (String name : KEPT) {
      Measured m = reading.values().get(name);
      if (m != null) {
        values.put(name, m);
      }
    }
    if (plan.follow() && values.containsKey("larmor_frequency")) {
      carrier = OptionalDouble.of(values.get("larmor_frequency").value());
    }
    List<String> notes = new ArrayList<>(reading.warnings());
    if (!met.isEmpty()) {
      notes.add("taken again after trouble: " + met);
    }
    LogRow row =
        new LogRow(
            run,
            slot,
            schedule.due(slot),
            started,
            values,
            celsius,
            taken.capture().scans().stream().mapToInt(s -> s.retries()).sum(),
            "",
            taken.name());
    Optional<LogEnd> cut = Optional.empty();
    for (LogRule rule : plan.rules()) {
      Optional<String> broken = rule.broken(row);
      if (broken.isPresent()) {
        notes.add(broken.get());
        bench.say(true, "Row " + slot + ": " + broken.get());
        if (rule.action() == LogRule.Action.STOP && cut.isEmpty()) {
          cut = Optional.of(end(LogEnd.Why.RULE, "ended by rule: " + broken.get()));
        }
      }
    }
    rows++;
    bench.keepRow(row.withNote(String.join("; ", notes)));
    return cut.map(e -> end(e.why(), e.reason()));
  }

  /** No resonance in the row: it is searched for, and the run goes on or ends. */
  private Optional<LogEnd> lost(long slot, Instant started, Bench.Repetition taken)
      throws BoardException, KeepException {
    lostInARow++;
    bench.say(true, "Row " + slot + ": the resonance is lost; it is searched for.");
    Finding found;
    try {
      found = bench.measure(Rung.RESONANCE);
    } catch (BoardException.LinkLost
        | BoardException.Unreachable
        | BoardException.Silent
        | BoardException.BadAnswer e) {
      gap(
          slot,
          started,
          "the resonance is lost: " + taken.why() + "; its search met trouble",
          taken.name());
      trouble = e.getMessage();
      return Optional.empty();
    }
    carrier = OptionalDouble.empty();
    String outcome =
        found.refused()
            ? found.rung().id() + " refused: " + found.refusal().get().reason()
            : String.format(
                Locale.ROOT,
                "found again at %.6f MHz",
                found.value("larmor_frequency").value() * 1e-6);
    gap(slot, started, "the resonance was lost: " + taken.why() + "; " + outcome, taken.name());
    if (lostInARow < MOST_IN_A_ROW) {
      return Optional.empty();
    }
    return Optional.of(
        end(
            LogEnd.Why.RESONANCE_LOST,
            "no resonance in "
                + lostInARow
                + " rows in a row ("
                + outcome
                + "): check sample and coil, or take more --scans a row"));
  }

  /** One gap row for all slots before this one that no row told of yet. */
  private void tellMissed(long slot) throws KeepException {
    long missed = slot - nextUntold;
    if (missed <= 0) {
      return;
    }
    String which =
        missed == 1
            ? "1 slot missed (" + nextUntold + ")"
            : missed + " slots missed (" + nextUntold + " to " + (slot - 1) + ")";
    String why =
        trouble.isEmpty()
            ? String.format(
                Locale.ROOT,
                "what came before took %.3g s, the interval is %.3g s",
                tookNanos * 1e-9,
                plan.every().toNanos() * 1e-9)
            : trouble;
    gap(nextUntold, schedule.due(nextUntold), which + ": " + why, "");
    nextUntold = slot;
  }

  private void gap(long slot, Instant started, String why, String capture) throws KeepException {
    gaps++;
    bench.keepRow(
        new LogRow(
            run,
            slot,
            schedule.due(slot),
            started,
            Map.of(),
            OptionalDouble.empty(),
            0,
            why,
            capture));
  }
}
