package coilside.command;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import java.io.PrintWriter;
import java.io.StringWriter;
import java.io.Writer;
import java.util.concurrent.CountDownLatch;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;

/** An output whose reader is slow, frozen or gone holds nobody up. */
@Timeout(value = 30, threadMode = Timeout.ThreadMode.SEPARATE_THREAD)
class LastingOutputTest {
  @Test
  void everythingComesInOrder() {
    StringWriter out = new StringWriter();
    try (LastingOutput lasting =
        LastingOutput.over(
            new Output(new PrintWriter(out), new PrintWriter(new StringWriter()), false))) {
      for (int i = 0; i < 5000; i++) {
        lasting.output().line("row " + i);
      }
    }
    String[] lines = out.toString().split("\n");
    assertEquals(5000, lines.length);
    for (int i = 0; i < 5000; i++) {
      assertEquals("row " + i, lines[i]);
    }
  }

  @Test
  void aFrozenReaderCostsLinesButNoTime() {
    CountDownLatch thaw = new CountDownLatch(1);
    StringWriter read = new StringWriter();
    Writer frozen =
        new Writer() {
          @Override
          public void write(char[] text, int offset, int length) {
            try {
              thaw.await();
            } catch (InterruptedException e) {
              Thread.currentThread().interrupt();
            }
            read.write(text, offset, length);
          }

          @Override
          public void flush() {}

          @Override
          public void close() {}
        };
    StringWriter errors = new StringWriter();
    try (LastingOutput lasting =
        LastingOutput.over(new Output(new PrintWriter(frozen), new PrintWriter(errors), false))) {
      for (int i = 0; i < 50_000; i++) {
        lasting.output().line("row " + i);
      }
      assertTrue(lasting.dropped() > 25_000, lasting.dropped() + " dropped");
      thaw.countDown();
    }
    assertTrue(read.toString().startsWith("row 0\nrow 1\n"), "the oldest are shown");
    assertTrue(errors.toString().contains("were not shown"), errors.toString());
  }
}
