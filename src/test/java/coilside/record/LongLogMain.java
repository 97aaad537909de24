package coilside.record;

import java.nio.file.Path;
import java.util.Arrays;

/**
 * A program that keeps a long log in a small heap and prints what it cost: median time of a row in
 * each tenth, heap in use after each tenth. Arguments: folder, rows, rows to one capture.
 */
final class LongLogMain {
  private LongLogMain() {}

  public static void main(String[] args) throws Exception {
    int rows = Integer.parseInt(args[1]);
    int rowsPerCapture = Integer.parseInt(args[2]);
    int block = rows / 10;
    long[] nanos = new long[block];
    try (BenchRecord record = BenchRecord.open(Path.of(args[0]));
        LogCsv csv = LogCsv.open(Path.of(args[0], "log.csv"))) {
      for (int n = 0; n < rows; n++) {
        String capture =
            n % rowsPerCapture == 0 ? record.keep(Samples.capture("log", "oil", 2, 500, n)) : "";
        long from = System.nanoTime();
        record.keep(Samples.row("run-a", n, capture));
        nanos[n % block] = System.nanoTime() - from;
        csv.add(Samples.row("run-a", n, capture));
        if (n % block == block - 1) {
          Arrays.sort(nanos);
          System.gc();
          Runtime r = Runtime.getRuntime();
          System.out.println(
              nanos[block / 2] / 1000 + " " + (r.totalMemory() - r.freeMemory()) / 1024);
        }
      }
    }
  }
}
