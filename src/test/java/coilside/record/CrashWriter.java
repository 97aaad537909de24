package coilside.record;

import coilside.bench.Finding;
import coilside.bench.Rung;
import java.io.BufferedReader;
import java.io.InputStreamReader;
import java.nio.file.Path;

/**
 * A program to be killed: writes captures, log rows and findings into a record as fast as it can
 * and reports each on standard output when it has been kept. Begins when told "go", numbering on
 * from what is there.
 */
final class CrashWriter {
  private static final int MOST = 2000;

  private CrashWriter() {}

  public static void main(String[] args) throws Exception {
    Path folder = Path.of(args[0]);
    String word = new BufferedReader(new InputStreamReader(System.in)).readLine();
    if (!"go".equals(word)) {
      return;
    }
    try (BenchRecord record = BenchRecord.open(folder)) {
      long next = record.view().runs().stream().mapToLong(RecordView.LogRun::rows).sum();
      for (long n = next; n < next + MOST; n++) {
        String capture = record.keep(Samples.capture("log", "oil", 2, 700, n));
        record.keep(Samples.row("run-a", n, capture));
        report("row " + n + " " + capture);
        if (n % 3 == 0) {
          Finding finding = Samples.finding("f-" + n, Rung.T2STAR, capture);
          record.keep(finding);
          report("finding " + n + " " + capture);
        }
      }
    }
  }

  private static void report(String line) {
    System.out.println(line);
    System.out.flush();
  }
}
