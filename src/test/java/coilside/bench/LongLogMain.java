package coilside.bench;

import coilside.record.BenchRecord;
import coilside.record.LogCsv;
import java.lang.management.ManagementFactory;
import java.lang.management.ThreadMXBean;
import java.nio.file.Path;
import java.time.Duration;
import java.util.Arrays;
import java.util.Optional;

/**
 * A program that logs many accelerated repetitions in a small heap, measuring, fitting and keeping
 * each, and prints what it cost: for each tenth the median time of a row, us, the median time of
 * the processor in it, us, and the heap in use, kB. In the middle the computer's clock steps back
 * by an hour. Arguments: folder, repetitions.
 */
final class LongLogMain {
  private static final ThreadMXBean THREADS = ManagementFactory.getThreadMXBean();

  private LongLogMain() {}

  public static void main(String[] args) throws Exception {
    int repetitions = Integer.parseInt(args[1]);
    int block = repetitions / 10;
    long[] nanos = new long[block];
    long[] cpu = new long[block];
    long[] state = {System.nanoTime(), 0, THREADS.getCurrentThreadCpuTime()};
    LogBoard board = new LogBoard();
    board.larmor = seconds -> 8.09e6 + 20 * Math.sin(seconds / 5000);
    board.celsius = seconds -> 25 + 0.3 * Math.sin(seconds / 20000);
    try (BenchRecord record = BenchRecord.open(Path.of(args[0]), java.time.Clock.systemUTC());
        LogCsv csv = LogCsv.open(Path.of(args[0], "log.csv"))) {
      LogBoard.climb(record);
      Bench bench =
          new Bench(
              board,
              record,
              LogBoard.settings(),
              board,
              board,
              event -> {
                if (event instanceof Progress.LogRowKept kept) {
                  row(kept.row(), csv, nanos, cpu, state, board, repetitions);
                }
              });
      LogEnd end =
          bench.log(
              new Work.Log(
                  Duration.ofSeconds(1),
                  repetitions,
                  Optional.empty(),
                  1,
                  true,
                  false,
                  java.util.List.of()));
      System.out.println(end.why() + " " + end.rows() + " " + end.gaps());
    }
  }

  private static void row(
      LogRow row,
      LogCsv csv,
      long[] nanos,
      long[] cpu,
      long[] state,
      LogBoard board,
      int repetitions) {
    try {
      csv.add(row);
    } catch (KeepException e) {
      throw new IllegalStateException(e);
    }
    long now = System.nanoTime();
    int n = (int) state[1]++;
    nanos[n % nanos.length] = now - state[0];
    cpu[n % nanos.length] = THREADS.getCurrentThreadCpuTime() - state[2];
    if (n == repetitions / 2) {
      board.skew = Duration.ofHours(-1);
    }
    if (n % nanos.length == nanos.length - 1) {
      System.gc();
      Runtime r = Runtime.getRuntime();
      System.out.println(
          median(nanos) / 1000
              + " "
              + median(cpu) / 1000
              + " "
              + (r.totalMemory() - r.freeMemory()) / 1024);
    }
    state[0] = System.nanoTime();
    state[2] = THREADS.getCurrentThreadCpuTime();
  }

  private static long median(long[] values) {
    long[] sorted = values.clone();
    Arrays.sort(sorted);
    return sorted[sorted.length / 2];
  }
}
